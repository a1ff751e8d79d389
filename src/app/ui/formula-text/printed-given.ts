/** What of a given's value is printed; a `GivenValue` of the shared schemas is one. */
export interface PrintedGiven {
  /** As the statement prints it, for example `0.70` or `7.65e6`. */
  readonly printed: string;
  readonly unit?: string | undefined;
}

/** The givens of a variant by name. */
export type PrintedGivens = Readonly<Record<string, PrintedGiven>>;

const raised = new Map(Array.from('⁰¹²³⁴⁵⁶⁷⁸⁹⁺⁻', (sign, index) => [sign, '0123456789+-'.charAt(index)]));

/** A number in KaTeX, with its power of ten written out: `7.65e6` becomes `7.65 \times 10^{6}`. */
function formulaOfNumber(printed: string): string {
  const power = /^(.*?)[eE]\+?(-?\d+)$/.exec(printed);
  return power ? `${power[1]} \\times 10^{${power[2]}}` : printed.replaceAll('−', '-');
}

/** A number as text, with a real minus sign and its power of ten raised. */
function textOfNumber(printed: string): string {
  const power = /^(.*?)[eE]\+?(-?\d+)$/.exec(printed);
  const digits = (power ? (power[1] ?? '') : printed).replaceAll('-', '−');
  if (!power) return digits;
  const signs = [...raised.keys()];
  const exponent = Array.from(power[2] ?? '', (c) => signs['0123456789+-'.indexOf(c)] ?? c).join('');
  return `${digits} × 10${exponent}`;
}

/** A unit in KaTeX, upright, with raised exponents: `W/m^2` becomes `\text{W}/\text{m}^{2}`. */
export function formulaOfUnit(unit: string): string {
  const plain = Array.from(unit, (c) => raised.get(c) ?? c).join('');
  return plain.replace(
    /\^?([+-]?\d+)|([*·]|\s+)|(\/)|([^\s\d*·/^+-]+)|./gu,
    (whole, ...groups: (string | undefined)[]) => {
      const [exponent, times, slash, symbol] = groups;
      // A unit may begin with 1, as in 1/s; any other figure is an exponent.
      if (exponent !== undefined) return whole === '1' ? '1' : `^{${exponent}}`;
      if (times !== undefined) return '\\,';
      if (slash !== undefined) return '/';
      return symbol === undefined ? '' : `\\text{${escapeForText(symbol)}}`;
    },
  );
}

function escapeForText(symbol: string): string {
  return symbol.replace(/[\\{}$&#_%~^]/g, (c) => (/[$&#_%{}]/.test(c) ? `\\${c}` : ''));
}

/** `\val{name}` inside a formula: the value and its unit in KaTeX; an unknown name stands for itself. */
export function givenInFormula(name: string, given: PrintedGiven | undefined): string {
  if (!given) return `\\mathtt{${name.replaceAll('_', '\\_')}}`;
  const value = formulaOfNumber(given.printed);
  if (!given.unit) return value;
  return `${value}${given.unit === '%' ? '' : '\\,'}${formulaOfUnit(given.unit)}`;
}

/** `\val{name}` in running text. */
export function givenInText(name: string, given: PrintedGiven | undefined): string {
  if (!given) return name;
  const value = textOfNumber(given.printed);
  return given.unit ? `${value}\u00a0${given.unit}` : value;
}
