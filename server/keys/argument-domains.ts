/** What an argument may be, in words, and a value outside of it, which tests try. */
export interface ArgumentDomain {
  readonly words: string;
  readonly outside?: string;
}

const domain = (words: string, outside?: string): ArgumentDomain => ({
  words,
  ...(outside === undefined ? {} : { outside }),
});

const photons = domain('whole number, 0 to 16,383', '-1');
const angle = domain('real, radians', 'i');
const amplitude = domain('complex, |α|² ≤ 10,000', '101');
const fraction = domain('0 to 1', '1.2');
const notNegative = domain('real, ≥ 0', '-0.1');
const squeezing = domain('0 to 6', '6.5');
const oneMode = domain('a state of one mode', '1');
const twoModes = domain('a state of two modes', 'vacuum()');
const anyState = domain('a state of one mode, or of two with the mode', '1');
const real = domain('real', 'i');
const any = domain('real or complex');
const list = domain('a list of numbers');

/** The domains of arguments by their names, which mean the same throughout. */
const byName: Readonly<Record<string, ArgumentDomain>> = {
  state: oneMode,
  state1: oneMode,
  state2: oneMode,
  joint: twoModes,
  mode: domain('1 or 2', '3'),
  n: photons,
  m: photons,
  N: photons,
  nmax: domain('whole number, 0 to 9,999', '10000'),
  k: photons,
  alpha: amplitude,
  xi: domain('complex'),
  theta: angle,
  phi: angle,
  r: squeezing,
  eta: fraction,
  T: fraction,
  T1: fraction,
  T2: fraction,
  shots: domain('whole number, 1 to 10,000', '0'),
  nbar: notNegative,
  kappa: notNegative,
  sigma: notNegative,
  dark: notNegative,
  t: notNegative,
  omega: real,
  g: real,
  G: domain('real, ≥ 1', '0.9'),
  s: domain('−1 to 1', '1.5'),
  x: real,
  p: real,
  probabilities: domain('a list of numbers in [0, 1] that add to 1 within 10⁻⁹', '[0.5, 0.6]'),
  states: domain('a list of as many states', '[vacuum()]'),
  frequencies: domain('a list of real numbers', '1'),
  couplings: domain('a list of as many real numbers', '[0.1]'),
  frequency: domain('a frequency above 0, in Hz, GHz … or rad/s', '5'),
  temperature: domain('a temperature ≥ 0, in K', '5'),
  power: domain('a power ≥ 0, in W, mW …', '5'),
  wavelength: domain('a length above 0, in m, nm …', '5'),
  wavelengthOrFrequency: domain('a length, a frequency or an angular frequency above 0', '5'),
  angularFrequency: domain('an angular frequency ≥ 0, in rad/s', '5 GHz'),
  dipole: domain('a dipole moment, in C m', '5'),
};

/** Where a function's argument is not what its name says elsewhere. */
const byFunction: Readonly<Record<string, Readonly<Record<string, ArgumentDomain>>>> = {
  ket: { m: domain('whole number, 0 to 16,383; left out for one mode', '-1') },
  displaced: { state: anyState },
  squeeze: { state: anyState },
  phaseShift: { state: anyState },
  lose: { state: anyState },
  amplify: { state: anyState },
  purity: { state: domain('a state of one mode or two', '1') },
  fidelity: {
    state1: domain('a state of one mode or two', '1'),
    state2: domain('a state of as many modes', '1'),
  },
  overlap: {
    state1: domain('a pure state of one mode or two', 'thermal(1)'),
    state2: domain('a pure state of as many modes', 'thermal(1)'),
  },
  covariance: { state: domain('a state of one mode or two', '1') },
  g2: { state: domain('a state of one mode, or a list of counts', '1') },
  sampleCounts: { dark: domain('real, 0 to 1000', '-0.1') },
  gN: { N: domain('whole number, 1 to 32', '0') },
  densityMatrix: { nmax: domain('whole number, 0 to 99', '100') },
  husimi: { alpha: domain('complex') },
  pFunction: { alpha: domain('complex') },
  bathAmplitude: { t: real },
  invertedBathAmplitude: { t: real },
  laguerre: { a: real },
  besselI: { n: domain('whole number, −16,383 to 16,383', '0.5') },
  besselJ: { n: domain('whole number, −16,383 to 16,383', '0.5') },
  round: { places: domain('whole number, 0 to 15', '16') },
  factorial: { n: domain('whole number, 0 to 170', '171') },
  combinations: { n: domain('whole number, at least k', '-1'), k: domain('whole number, 0 to n', '-1') },
  range: {
    first: real,
    last: real,
    step: domain('real, not 0; at most 10,000 entries', '0'),
  },
};

/** Arguments of arithmetic that take more than a name says elsewhere. */
const arithmetic: Readonly<Record<string, ArgumentDomain>> = {
  x: any,
  y: any,
  z: any,
  a: domain('real'),
  b: domain('real'),
  list,
};

/** What an argument of a function may be; undefined where nothing is known of it. */
export function argumentDomain(
  functionName: string,
  argument: string,
  isArithmetic: boolean,
): ArgumentDomain | undefined {
  const own = Object.hasOwn(byFunction, functionName) ? byFunction[functionName]?.[argument] : undefined;
  if (own) return own;
  if (isArithmetic && Object.hasOwn(arithmetic, argument)) return arithmetic[argument];
  return Object.hasOwn(byName, argument) ? byName[argument] : undefined;
}
