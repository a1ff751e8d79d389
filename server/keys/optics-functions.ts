import { bathAmplitude, invertedBathAmplitude } from '../optics/bath-amplitude';
import { compareMethods } from '../optics/compare-methods';
import type { Convention } from '../optics/convention';
import { figureByMethods } from '../optics/figure-by-methods';
import { figureFunctions, type FigureValue } from '../optics/figures';
import {
  photonEnergy,
  photonEnergyOfWavelength,
  photonFlux,
  spontaneousRate,
  thermalOccupation,
} from '../optics/quanta';
import { besselI, besselJ } from '../optics/special/bessel';
import { hermite, laguerre } from '../optics/special/polynomials';
import { stateFunctions } from '../optics/states';
import type { State } from '../optics/state';
import { g2OfStateOrCounts, sampleCounts } from './counted-functions';
import { mathematics } from './mathematics';
import { Refusal } from './plain-functions';
import type { OpticsFunction } from './surroundings';
import { toSi, unitOf, type SiQuantity } from './unit-value';
import { isComplex, isUnit, kindOf, type Value } from './value';

/** A figure's value in the terms of expressions. */
function fromFigure(value: FigureValue): Value {
  if (typeof value === 'number') return value;
  if ('re' in value) return mathematics.complex(value.re, value.im);
  return value.map((entry): Value => {
    if (typeof entry === 'number') return entry;
    return entry.map((cell): Value => (typeof cell === 'number' ? cell : mathematics.complex(cell.re, cell.im)));
  });
}

const rate = [0, 0, -1, 0, 0, 0, 0, 0, 0];
const angularRate = [0, 0, -1, 0, 0, 0, 0, 1, 0];
const length = [0, 1, 0, 0, 0, 0, 0, 0, 0];
const time = [0, 0, 1, 0, 0, 0, 0, 0, 0];
const temperature = [0, 0, 0, 0, 1, 0, 0, 0, 0];
const power = [1, 2, -3, 0, 0, 0, 0, 0, 0];
const dipole = [0, 1, 1, 1, 0, 0, 0, 0, 0];

const has = (quantity: SiQuantity, dimension: readonly number[]): boolean =>
  quantity.dimension.every((exponent, index) => exponent === dimension[index]);

function quantityAt(values: readonly Value[], index: number, what: string): SiQuantity {
  const value = values[index];
  if (isUnit(value)) return toSi(value);
  throw new Refusal(`${what} must have a unit, got ${value === undefined ? 'nothing' : kindOf(value)}`);
}

function expectCount(values: readonly Value[], count: number): void {
  if (values.length !== count)
    throw new Refusal(`takes ${String(count)} ${count === 1 ? 'argument' : 'arguments'}, got ${String(values.length)}`);
}

function expectDimension(
  quantity: SiQuantity,
  allowed: readonly (readonly number[])[],
  what: string,
  example: string,
): void {
  if (!allowed.some((dimension) => has(quantity, dimension)))
    throw new Refusal(`${what} must be given in a unit such as ${example}, got ${quantity.unit || 'a pure number'}`);
}

/** ν in Hz of a frequency; an angular frequency is divided by 2π. */
function frequencyOf(quantity: SiQuantity): number {
  return has(quantity, angularRate) ? quantity.value / (2 * Math.PI) : quantity.value;
}

const withUnits: Readonly<Record<string, OpticsFunction>> = {
  thermalOccupation: (values) => {
    expectCount(values, 2);
    const frequency = quantityAt(values, 0, 'frequency');
    expectDimension(frequency, [rate, angularRate], 'frequency', 'GHz or rad/s');
    const bath = quantityAt(values, 1, 'temperature');
    expectDimension(bath, [temperature], 'temperature', 'K');
    if (!(frequency.value > 0)) throw new Refusal(`frequency must be above 0, got ${String(frequency.value)}`);
    if (!(bath.value >= 0)) throw new Refusal(`temperature must not be negative, got ${String(bath.value)} K`);
    return thermalOccupation(frequencyOf(frequency), bath.value);
  },
  photonEnergy: (values) => {
    expectCount(values, 1);
    const given = quantityAt(values, 0, 'wavelength or frequency');
    expectDimension(given, [length, rate, angularRate], 'wavelength or frequency', 'nm, THz or rad/s');
    if (!(given.value > 0)) throw new Refusal(`wavelength or frequency must be above 0, got ${String(given.value)}`);
    const joules = has(given, length) ? photonEnergyOfWavelength(given.value) : photonEnergy(frequencyOf(given));
    return unitOf(joules, 'J');
  },
  photonFlux: (values) => {
    expectCount(values, 2);
    const beam = quantityAt(values, 0, 'power');
    expectDimension(beam, [power], 'power', 'mW');
    const wavelength = quantityAt(values, 1, 'wavelength');
    expectDimension(wavelength, [length], 'wavelength', 'nm');
    if (!(beam.value >= 0)) throw new Refusal(`power must not be negative, got ${String(beam.value)} W`);
    if (!(wavelength.value > 0)) throw new Refusal(`wavelength must be above 0, got ${String(wavelength.value)} m`);
    return unitOf(photonFlux(beam.value, wavelength.value), 's^-1');
  },
  spontaneousRate: (values) => {
    expectCount(values, 2);
    const angular = quantityAt(values, 0, 'angular frequency');
    expectDimension(angular, [rate, angularRate], 'angular frequency', 'rad/s');
    if (angular.unit === 'Hz')
      throw new Refusal('angular frequency must be given in rad/s, got Hz; multiply by 2π rad');
    const moment = quantityAt(values, 1, 'dipole moment');
    expectDimension(moment, [dipole], 'dipole moment', 'C m');
    if (!(angular.value >= 0))
      throw new Refusal(`angular frequency must not be negative, got ${String(angular.value)}`);
    return unitOf(spontaneousRate(angular.value, moment.value), 's^-1');
  },
};

function wholeAt(values: readonly Value[], index: number, what: string, least: number, most: number): number {
  const value = values[index];
  if (typeof value !== 'number' || !Number.isInteger(value) || value < least || value > most)
    throw new Refusal(`${what} must be a whole number from ${String(least)} to ${String(most)}, got ${given(value)}`);
  return value;
}

function realAt(values: readonly Value[], index: number, what: string): number {
  const value = dropTime(values[index]);
  if (typeof value !== 'number' || !Number.isFinite(value))
    throw new Refusal(`${what} must be a finite real number, got ${given(value)}`);
  return value;
}

function given(value: Value | undefined): string {
  return typeof value === 'number' ? String(value) : value === undefined ? 'nothing' : kindOf(value);
}

function realsAt(values: readonly Value[], index: number, what: string): readonly number[] {
  const list = values[index];
  if (!Array.isArray(list)) throw new Refusal(`${what} must be a list of numbers, got ${given(list)}`);
  return (list as readonly Value[]).map((_, at) =>
    realAt(list as readonly Value[], at, `${what}: entry ${String(at + 1)}`),
  );
}

const largestOrder = 16_383;

const special: Readonly<Record<string, OpticsFunction>> = {
  laguerre: (values) => {
    expectCount(values, 3);
    return laguerre(
      wholeAt(values, 0, 'degree', 0, largestOrder),
      realAt(values, 1, 'a'),
      realAt(values, 2, 'argument'),
    );
  },
  hermite: (values) => {
    expectCount(values, 2);
    return hermite(wholeAt(values, 0, 'degree', 0, largestOrder), realAt(values, 1, 'argument'));
  },
  besselI: (values) => {
    expectCount(values, 2);
    return besselI(wholeAt(values, 0, 'order', -largestOrder, largestOrder), realAt(values, 1, 'argument'));
  },
  besselJ: (values) => {
    expectCount(values, 2);
    return besselJ(wholeAt(values, 0, 'order', -largestOrder, largestOrder), realAt(values, 1, 'argument'));
  },
  bathAmplitude: (values) => bath(values, bathAmplitude),
  invertedBathAmplitude: (values) => bath(values, invertedBathAmplitude),
};

function bath(values: readonly Value[], amplitudeOf: typeof bathAmplitude): Value {
  expectCount(values, 4);
  const [time, frequency] = [realAt(values, 0, 'time'), realAt(values, 1, 'frequency')];
  const frequencies = realsAt(values, 2, 'frequencies of the bath');
  const couplings = realsAt(values, 3, 'couplings');
  if (couplings.length !== frequencies.length)
    throw new Refusal(
      `couplings must be as many as the ${String(frequencies.length)} frequencies of the bath, got ${String(couplings.length)}`,
    );
  const { amplitude } = amplitudeOf(time, frequency, frequencies, couplings);
  return mathematics.complex(amplitude.re, amplitude.im);
}

/**
 * Arguments of states and figures are pure numbers; a rate, an angular rate or a time may come with its unit and is
 * taken in s⁻¹, rad/s or s, so that their products are what they should be.
 */
function dropTime(value: Value | undefined): Value | undefined {
  if (Array.isArray(value)) return (value as readonly Value[]).map((each) => dropTime(each) ?? each);
  if (!isUnit(value)) return value;
  const si = toSi(value);
  if (si.unit === 'Hz')
    throw new Refusal('a rate in Hz is not guessed at (a factor 2π hides there); give it in s^-1 or rad/s');
  if (si.unit === '' || si.unit === 'rad' || has(si, rate) || has(si, angularRate) || has(si, time)) return si.value;
  throw new Refusal(`a pure number, a rate or a time is needed, got a value in ${si.unit}`);
}

/** A value as the engine of states takes it. */
function toOptics(value: Value): unknown {
  const plain = dropTime(value);
  return isComplex(plain)
    ? { re: plain.re, im: plain.im }
    : Array.isArray(plain)
      ? (plain as readonly Value[]).map(toOptics)
      : plain;
}

function ofState(make: (args: readonly unknown[], convention?: Convention) => State): OpticsFunction {
  return (values, { convention }) => make(values.map(toOptics), convention);
}

function ofFigure(name: keyof typeof figureFunctions): OpticsFunction {
  const figure = figureFunctions[name];
  return (values, { convention, note }) => {
    const compared = compareMethods(name, figureByMethods(figure(values.map(toOptics), convention)));
    note(compared);
    return fromFigure(compared.value);
  };
}

/** Every function of the language that knows of light, by name. */
export const opticsFunctions: Readonly<Record<string, OpticsFunction>> = Object.assign(
  Object.create(null) as Record<string, OpticsFunction>,
  Object.fromEntries(Object.entries(stateFunctions).map(([name, make]) => [name, ofState(make)])),
  Object.fromEntries(
    (Object.keys(figureFunctions) as (keyof typeof figureFunctions)[]).map((name) => [name, ofFigure(name)]),
  ),
  { ...withUnits, ...special, g2: g2OfStateOrCounts(ofFigure('g2')), sampleCounts },
);
