/**
 * The dimension of a quantity: exponents of the SI base units, of the radian, of the decibel, and of the hertz as a
 * name. The hertz is counted apart from s⁻¹, because Hz and rad/s are never converted into each other (a factor 2π
 * hides there), while s⁻¹ stands for either.
 */
export interface Dimension {
  readonly m: number;
  readonly kg: number;
  readonly s: number;
  readonly A: number;
  readonly K: number;
  readonly mol: number;
  readonly cd: number;
  readonly rad: number;
  readonly dB: number;
  readonly hertz: number;
}

/** The dimension of a pure number. */
export const pure: Dimension = { m: 0, kg: 0, s: 0, A: 0, K: 0, mol: 0, cd: 0, rad: 0, dB: 0, hertz: 0 };

const names = ['m', 'kg', 's', 'A', 'K', 'mol', 'cd', 'rad', 'dB', 'hertz'] as const;
const physical = ['m', 'kg', 's', 'A', 'K', 'mol', 'cd', 'dB'] as const;

const near = (a: number, b: number): boolean => Math.abs(a - b) < 1e-9;

/** A dimension with the exponents named and zero for the rest. */
export const dimension = (exponents: Partial<Dimension>): Dimension => ({ ...pure, ...exponents });

/** The dimension of a·bⁿ. */
export function combine(a: Dimension, b: Dimension, n = 1): Dimension {
  const result: { -readonly [K in keyof Dimension]: number } = { ...pure };
  for (const name of names) {
    const sum = a[name] + n * b[name];
    result[name] = near(sum, 0) ? 0 : sum;
  }
  return result;
}

/** Whether the dimension is that of a pure number, with no angle, decibel or hertz left either. */
export const isPure = (a: Dimension): boolean => names.every((name) => near(a[name], 0));

/** Whether two dimensions are the same in every exponent, names of units included. */
export const sameDimension = (a: Dimension, b: Dimension): boolean => names.every((name) => near(a[name], b[name]));

/**
 * Whether a value in one may be compared with a value in the other: the physical exponents are equal, and the one does
 * not count cycles where the other counts radians.
 */
export function comparable(a: Dimension, b: Dimension): boolean {
  if (!physical.every((name) => near(a[name], b[name]))) return false;
  const neutral = (d: Dimension) => near(d.rad, 0) && near(d.hertz, 0);
  if (neutral(a) || neutral(b)) return true;
  return near(a.rad, b.rad) && (near(a.hertz, b.hertz) || near(a.rad, 0));
}

const superscript = (n: number): string =>
  String(n).replace(/[-0-9.]/g, (digit) =>
    digit === '-' ? '⁻' : digit === '.' ? '·' : ('⁰¹²³⁴⁵⁶⁷⁸⁹'[Number(digit)] ?? ''),
  );

/** A power as it is printed: the name alone for 1, else with a superscript. */
export const printPower = (name: string, exponent: number): string =>
  exponent === 1 ? name : `${name}${superscript(exponent)}`;

/** The dimension in coherent SI units, as printed: `kg m² s⁻¹`. */
export function printDimension(a: Dimension): string {
  return names
    .filter((name) => name !== 'hertz' && !near(a[name], 0))
    .map((name) => printPower(name, a[name]))
    .join(' ');
}
