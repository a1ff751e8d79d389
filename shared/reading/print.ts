import type { Complex } from './complex';

const superscriptDigits = '⁰¹²³⁴⁵⁶⁷⁸⁹';

/** A whole number as superscripts. */
export function superscript(value: number): string {
  return String(value).replace(/[-\d]/g, (sign) => (sign === '-' ? '⁻' : (superscriptDigits[Number(sign)] ?? sign)));
}

/** Digits with a sign of its own and, from five digits before the point, thin spaces between thousands. */
function printDigits(digits: string): string {
  const [whole = '', decimals] = digits.replace('-', '').split('.');
  const grouped = whole.length > 4 ? whole.replace(/\B(?=(\d{3})+$)/g, '\u202f') : whole;
  return `${digits.startsWith('-') ? '−' : ''}${grouped || '0'}${decimals ? `.${decimals}` : ''}`;
}

/**
 * A number as the read-back prints it: up to `figures` significant figures, without trailing zeros, in powers of ten
 * outside 10⁻⁴ … 10⁶.
 */
export function printNumber(value: number, figures = 7): string {
  if (!Number.isFinite(value)) return 'not finite';
  if (value === 0) return '0';
  const [mantissa = '0', power = '0'] = value.toExponential(figures - 1).split('e');
  const exponent = Number(power);
  if (exponent < -4 || exponent >= 6) {
    return `${printDigits(mantissa.includes('.') ? mantissa.replace(/\.?0+$/, '') : mantissa)} × 10${superscript(exponent)}`;
  }
  return printDigits(String(Number(value.toPrecision(figures))));
}

/** A number with the digits as they were typed: `7.65`, 6 prints as `7.65 × 10⁶`. */
export function printTyped(digits: string, exponent: number | undefined): string {
  const plain = digits.startsWith('.') ? `0${digits}` : digits.replace(/\.$/, '');
  const trimmed = plain.replace(/^0+(?=\d)/, '');
  return exponent === undefined ? printDigits(trimmed) : `${printDigits(trimmed)} × 10${superscript(exponent)}`;
}

/** A part so small beside the other that it is rounding. */
export const negligible = (part: number, whole: number): boolean => Math.abs(part) <= 1e-13 * Math.abs(whole);

/** A complex number as the read-back prints it: `0.7071 + 0.7071 i`. */
export function printComplex({ re, im }: Complex, figures = 7): string {
  if (im === 0 || negligible(im, re)) return printNumber(re, figures);
  const size = Math.abs(im);
  const imaginary = printNumber(size, figures) === '1' ? 'i' : `${printNumber(size, figures)} i`;
  if (re === 0 || negligible(re, im)) return im < 0 ? `−${imaginary}` : imaginary;
  return `${printNumber(re, figures)} ${im < 0 ? '−' : '+'} ${imaginary}`;
}
