import { dimension, type Dimension } from './dimension';

/** A unit by name: its dimension and its size in coherent SI units. */
export interface NamedUnit {
  /** As the read-back prints it. */
  readonly name: string;
  readonly dimension: Dimension;
  readonly factor: number;
  /** What is added after scaling: only the degree Celsius has one. */
  readonly offset?: number;
}

const prefixes: Readonly<Record<string, number>> = {
  q: 1e-30,
  r: 1e-27,
  y: 1e-24,
  z: 1e-21,
  a: 1e-18,
  f: 1e-15,
  p: 1e-12,
  n: 1e-9,
  µ: 1e-6,
  m: 1e-3,
  c: 1e-2,
  d: 1e-1,
  da: 1e1,
  h: 1e2,
  k: 1e3,
  M: 1e6,
  G: 1e9,
  T: 1e12,
  P: 1e15,
  E: 1e18,
  Z: 1e21,
  Y: 1e24,
  R: 1e27,
  Q: 1e30,
};

const longPrefixes: Readonly<Record<string, string>> = {
  atto: 'a',
  femto: 'f',
  pico: 'p',
  nano: 'n',
  micro: 'µ',
  milli: 'm',
  centi: 'c',
  deci: 'd',
  hecto: 'h',
  kilo: 'k',
  mega: 'M',
  giga: 'G',
  tera: 'T',
  peta: 'P',
  exa: 'E',
};

const named = (name: string, factor: number, exponents: Partial<Dimension>): NamedUnit => ({
  name,
  factor,
  dimension: dimension(exponents),
});

const energy = { kg: 1, m: 2, s: -2 };
const electronVolt = 1.602176634e-19; // exact since 2019 (SI)

/** Units that take SI prefixes. */
const prefixable: readonly NamedUnit[] = [
  named('m', 1, { m: 1 }),
  named('g', 1e-3, { kg: 1 }),
  named('s', 1, { s: 1 }),
  named('A', 1, { A: 1 }),
  named('K', 1, { K: 1 }),
  named('mol', 1, { mol: 1 }),
  named('cd', 1, { cd: 1 }),
  named('rad', 1, { rad: 1 }),
  named('sr', 1, { rad: 2 }),
  named('Hz', 1, { s: -1, hertz: 1 }),
  named('Bq', 1, { s: -1 }),
  named('N', 1, { kg: 1, m: 1, s: -2 }),
  named('Pa', 1, { kg: 1, m: -1, s: -2 }),
  named('J', 1, energy),
  named('eV', electronVolt, energy),
  named('W', 1, { kg: 1, m: 2, s: -3 }),
  named('C', 1, { A: 1, s: 1 }),
  named('V', 1, { kg: 1, m: 2, s: -3, A: -1 }),
  named('F', 1, { kg: -1, m: -2, s: 4, A: 2 }),
  named('Ω', 1, { kg: 1, m: 2, s: -3, A: -2 }),
  named('S', 1, { kg: -1, m: -2, s: 3, A: 2 }),
  named('Wb', 1, { kg: 1, m: 2, s: -2, A: -1 }),
  named('T', 1, { kg: 1, s: -2, A: -1 }),
  named('H', 1, { kg: 1, m: 2, s: -2, A: -2 }),
  named('lm', 1, { cd: 1 }),
  named('lx', 1, { cd: 1, m: -2 }),
  named('Gy', 1, { m: 2, s: -2 }),
  named('Sv', 1, { m: 2, s: -2 }),
  named('L', 1e-3, { m: 3 }),
  named('l', 1e-3, { m: 3 }),
  named('bar', 1e5, { kg: 1, m: -1, s: -2 }),
  named('Torr', 101325 / 760, { kg: 1, m: -1, s: -2 }),
];

const degree = Math.PI / 180;

/** Units that stand alone. */
const fixed: readonly NamedUnit[] = [
  named('min', 60, { s: 1 }),
  named('h', 3600, { s: 1 }),
  named('d', 86400, { s: 1 }),
  named('Å', 1e-10, { m: 1 }),
  named('°', degree, { rad: 1 }),
  named('arcmin', degree / 60, { rad: 1 }),
  named('arcsec', degree / 3600, { rad: 1 }),
  named('atm', 101325, { kg: 1, m: -1, s: -2 }),
  named('erg', 1e-7, energy),
  named('cal', 4.184, energy),
  named('u', 1.66053906892e-27, { kg: 1 }), // CODATA 2022
  named('D', 3.33564e-30, { A: 1, s: 1, m: 1 }),
  named('dB', 1, { dB: 1 }),
  { ...named('°C', 1, { K: 1 }), offset: 273.15 },
];

/** Other spellings of units that take prefixes in their short form. */
const shortSpellings: Readonly<Record<string, string>> = { ohm: 'Ω', Ohm: 'Ω', liter: 'L', litre: 'L' };

/** Other spellings of units that stand alone. */
const fixedSpellings: Readonly<Record<string, string>> = {
  Å: 'Å',
  angstrom: 'Å',
  Angstrom: 'Å',
  angstroms: 'Å',
  ångström: 'Å',
  minute: 'min',
  minutes: 'min',
  mins: 'min',
  hr: 'h',
  hrs: 'h',
  hour: 'h',
  hours: 'h',
  day: 'd',
  days: 'd',
  deg: '°',
  degs: '°',
  degree: '°',
  degrees: '°',
  degC: '°C',
  celsius: '°C',
  '℃': '°C',
  amu: 'u',
  Da: 'u',
  debye: 'D',
  Debye: 'D',
  decibel: 'dB',
  decibels: 'dB',
  sec: 's',
  secs: 's',
  micron: 'µm',
  microns: 'µm',
  arcminute: 'arcmin',
  arcminutes: 'arcmin',
  arcsecond: 'arcsec',
  arcseconds: 'arcsec',
};

/** Whole words, which take the long prefixes. */
const words: Readonly<Record<string, string>> = {
  meter: 'm',
  meters: 'm',
  metre: 'm',
  metres: 'm',
  gram: 'g',
  grams: 'g',
  second: 's',
  seconds: 's',
  ampere: 'A',
  amperes: 'A',
  amp: 'A',
  amps: 'A',
  kelvin: 'K',
  kelvins: 'K',
  mole: 'mol',
  moles: 'mol',
  candela: 'cd',
  radian: 'rad',
  radians: 'rad',
  steradian: 'sr',
  steradians: 'sr',
  hertz: 'Hz',
  becquerel: 'Bq',
  newton: 'N',
  newtons: 'N',
  pascal: 'Pa',
  pascals: 'Pa',
  joule: 'J',
  joules: 'J',
  electronvolt: 'eV',
  electronvolts: 'eV',
  watt: 'W',
  watts: 'W',
  coulomb: 'C',
  coulombs: 'C',
  volt: 'V',
  volts: 'V',
  farad: 'F',
  farads: 'F',
  ohm: 'Ω',
  ohms: 'Ω',
  siemens: 'S',
  weber: 'Wb',
  webers: 'Wb',
  tesla: 'T',
  teslas: 'T',
  henry: 'H',
  henries: 'H',
  lumen: 'lm',
  lux: 'lx',
  liter: 'L',
  liters: 'L',
  litre: 'L',
  litres: 'L',
};

const prefixableByName = new Map(prefixable.map((unit) => [unit.name, unit]));
const fixedByName = new Map(fixed.map((unit) => [unit.name, unit]));

function withPrefix(prefix: string, unit: NamedUnit): NamedUnit {
  return { ...unit, name: `${prefix}${unit.name}`, factor: (prefixes[prefix] ?? 1) * unit.factor };
}

function shortUnit(text: string): NamedUnit | undefined {
  return prefixableByName.get(Object.hasOwn(shortSpellings, text) ? (shortSpellings[text] ?? text) : text);
}

function fixedUnit(text: string): NamedUnit | undefined {
  const name = Object.hasOwn(fixedSpellings, text) ? (fixedSpellings[text] ?? text) : text;
  return fixedByName.get(name) ?? (name === text ? undefined : unitByName(name));
}

function longUnit(text: string): NamedUnit | undefined {
  const lower = text.toLowerCase();
  const plain = Object.hasOwn(words, lower) ? words[lower] : undefined;
  if (plain !== undefined) return prefixableByName.get(plain);
  for (const [long, prefix] of Object.entries(longPrefixes)) {
    const rest = lower.startsWith(long) ? lower.slice(long.length) : '';
    const name = Object.hasOwn(words, rest) ? words[rest] : undefined;
    const unit = name === undefined ? undefined : prefixableByName.get(name);
    if (unit !== undefined) return withPrefix(prefix, unit);
  }
  return undefined;
}

/** Different code points of one sign: micro and mu, ohm and Omega, angstrom and Å. */
const sameSigns = (text: string): string =>
  text
    .normalize('NFC')
    .replace(/μ/g, 'µ')
    .replace(/\u2126/g, 'Ω');

/**
 * The unit of that name, with any SI prefix, or undefined. A name that is a unit by itself wins over a prefix: `min` is
 * a minute, `cd` a candela. `u` before a unit is micro.
 */
export function unitByName(given: string): NamedUnit | undefined {
  const text = sameSigns(given);
  const whole = shortUnit(text) ?? fixedUnit(text);
  if (whole !== undefined) return whole;
  for (const length of [1, 2]) {
    const start = text.slice(0, length);
    const prefix = start === 'u' ? 'µ' : start;
    if (!Object.hasOwn(prefixes, prefix)) continue;
    const unit = shortUnit(text.slice(length));
    if (unit !== undefined) return withPrefix(prefix, unit);
  }
  return longUnit(text);
}

/** A unit that differs from the name only in capitals or spelling, for a hint; undefined where none is near. */
export function nearestUnit(given: string): string | undefined {
  const text = sameSigns(given).toLowerCase();
  for (const unit of [...prefixable, ...fixed]) if (unit.name.toLowerCase() === text) return unit.name;
  for (const prefix of ['k', 'M', 'G', 'T', 'm', 'µ', 'n', 'p', 'f']) {
    for (const unit of prefixable) if (`${prefix}${unit.name}`.toLowerCase() === text) return `${prefix}${unit.name}`;
  }
  return undefined;
}
