/**
 * Reads a number as an author types it into a field: `0.5`, `0,5`, `−2`, `1e-3`, `2%`, `1/2`, `1 of 2`.
 * This is for the composer's own fields; answers of students are read by `shared/reading`.
 *
 * @returns the number, or undefined where the text is none
 */
export function readTypedNumber(text: string): number | undefined {
  const plain = text.trim().replaceAll('−', '-');
  const ratio = /^(.+?)\s*(?:\/|\bof\b)\s*(.+)$/.exec(plain);
  if (ratio) {
    const [above, below] = [readDecimal(ratio[1] ?? ''), readDecimal(ratio[2] ?? '')];
    return above === undefined || below === undefined || below === 0 ? undefined : above / below;
  }
  const percent = /^(.+?)\s*%$/.exec(plain);
  if (!percent) return readDecimal(plain);
  const hundredths = readDecimal(percent[1] ?? '');
  // Dividing by 100 would make 0.07 of `7%` but 0.069 999… of `6.9999%`; moving the decimal point is exact.
  return hundredths === undefined ? undefined : Number(`${String(hundredths)}e-2`) || hundredths / 100;
}

function readDecimal(text: string): number | undefined {
  if (!/^[+-]?(\d+([.,]\d*)?|[.,]\d+)(e[+-]?\d+)?$/i.test(text)) return undefined;
  const value = Number(text.replace(',', '.'));
  return Number.isFinite(value) ? value : undefined;
}

/**
 * Reads a list of numbers: separated by semicolons, or by commas or spaces where there is no semicolon.
 *
 * @returns the numbers, or the first entry that is none
 */
export function readTypedList(text: string): { readonly values: readonly number[] } | { readonly wrong: string } {
  const entries = (text.includes(';') ? text.split(';') : text.split(/,\s*|\s+/)).map((entry) => entry.trim());
  const values: number[] = [];
  for (const entry of entries.filter((each) => each !== '')) {
    const value = readTypedNumber(entry);
    if (value === undefined) return { wrong: entry };
    values.push(value);
  }
  return { values };
}

/** The decimals of a number as it was typed: `4.0` has one; undefined for exponents, fractions and per cent. */
export function typedDecimals(text: string): number | undefined {
  const match = /^[+\-−]?(?:\d+(?:[.,](\d*))?|[.,](\d+))$/.exec(text.trim());
  return match ? (match[1] ?? match[2] ?? '').length : undefined;
}

/** The shortest text of a number that reads back as the same number. */
export function typeNumber(value: number): string {
  return Object.is(value, -0) ? '0' : String(value);
}

/** A fraction as people write it, `1/3`, where its decimals would not end soon. */
export function typeFraction(fraction: number): string {
  const decimal = typeNumber(fraction);
  if (decimal.length <= 5) return decimal;
  for (let below = 3; below <= 12; below += 1) {
    const above = Math.round(fraction * below);
    if (above / below === fraction) return `${String(above)}/${String(below)}`;
  }
  return decimal;
}
