import { compareMethods } from '../optics/compare-methods';
import type { Convention } from '../optics/convention';
import { figureByMethods } from '../optics/figure-by-methods';
import { figureFunctions } from '../optics/figures';
import { isState } from '../optics/state';
import { stateFunctions } from '../optics/states';
import { realList, Refusal } from './plain-functions';
import { seededSource, type RandomSource } from './random-source';
import type { OpticsFunction, Surroundings } from './surroundings';
import { kindOf, type Value } from './value';

/** Most trials of a simulated experiment: as long as a list may be. */
const mostShots = 10_000;

/** The largest number that a distribution is listed up to. */
const largestCount = 9_999;

/** What may be left out of a distribution that is drawn from. */
const leftOut = 1e-9;

/**
 * Simulated counts of an ideal counter behind a loss, with Poisson dark counts: `shots` independent draws from
 * P(m) = Σₖ P_η(k) Poisson(m − k; dark), where P_η is the photon distribution behind a loss of transmissivity η.
 *
 * Drawn by inverting the cumulative distribution with xoshiro128** and 53 bits a draw; the same seed draws the same
 * counts. The distribution is cut where less than 10⁻⁹ is left.
 *
 * @param values state of one mode; shots, a whole number from 1 to 10,000; eta, efficiency in [0, 1], 1 where it is left
 *   out; dark ≥ 0, mean dark counts a shot, 0 where it is left out
 * @returns a list of whole numbers, one a shot
 * @throws Refusal outside a given (no seed), for other shots, and for light too bright to be listed
 * @example sampleCounts(vacuum(), 3) is [0, 0, 0]
 * Source: P. L. Kelley and W. H. Kleiner, Phys. Rev. 136 (1964) A316, for counting with a loss (from memory).
 */
export const sampleCounts: OpticsFunction = (values, surroundings) => {
  if (values.length < 2 || values.length > 4)
    throw new Refusal(
      `takes a state, the number of shots, an efficiency and dark counts, got ${String(values.length)} arguments`,
    );
  const [state, shots, eta = 1, dark = 0] = values;
  if (typeof shots !== 'number' || !Number.isInteger(shots) || shots < 1 || shots > mostShots)
    throw new Refusal(`shots must be a whole number from 1 to 10,000, got ${said(shots)}`);
  if (typeof eta !== 'number' || !(eta >= 0 && eta <= 1))
    throw new Refusal(`efficiency must lie between 0 and 1, got ${said(eta)}`);
  if (typeof dark !== 'number' || !(dark >= 0 && dark <= 1000))
    throw new Refusal(`dark counts must lie between 0 and 1000, got ${said(dark)}`);
  if (!isState(state) || state.modes !== 1) throw new Refusal(`state must be a state of one mode, got ${said(state)}`);
  const behind = eta === 1 ? state : stateFunctions.lose([state, eta]);
  const cumulative = cumulated(withDark(distributionOf(behind, surroundings), dark));
  if (surroundings.seed === undefined)
    throw new Refusal(
      'draws the data of a student, so it can only stand in a derived given; let the key name that given',
    );
  const source = seededSource(surroundings.seed);
  return Array.from({ length: shots }, () => firstAbove(cumulative, uniform(source)));
};

/** P(0) … of a state, as far as there is something. */
function distributionOf(state: unknown, { convention, note }: Surroundings): readonly number[] {
  const mean = figure('meanPhotons', [state], convention);
  const variance = figure('photonVariance', [state], convention);
  if (typeof mean !== 'number' || typeof variance !== 'number') throw new Refusal('takes a state of one mode');
  let last = Math.ceil(mean + 12 * Math.sqrt(Math.max(variance, 0)) + 10);
  for (;;) {
    const nmax = Math.min(last, largestCount);
    const compared = compareMethods(
      'photonDistribution',
      figureByMethods(figureFunctions.photonDistribution([state, nmax], convention)),
    );
    const list = compared.value;
    if (!Array.isArray(list)) throw new Refusal('takes a state of one mode');
    const weights = (list as readonly unknown[]).map(Number);
    if (weights.reduce((sum, weight) => sum + weight, 0) >= 1 - leftOut) {
      note(compared);
      return weights;
    }
    if (nmax === largestCount) throw new Refusal('takes light of fewer quanta: its distribution does not fit a list');
    last *= 2;
  }
}

function figure(name: 'meanPhotons' | 'photonVariance', args: readonly unknown[], convention: Convention) {
  return compareMethods(name, figureByMethods(figureFunctions[name](args, convention))).value;
}

/** The distribution of a sum with a Poisson variable of mean `dark`. */
function withDark(weights: readonly number[], dark: number): readonly number[] {
  if (dark === 0) return weights;
  const added: number[] = [];
  let term = Math.exp(-dark);
  for (let k = 0; k <= dark + 12 * Math.sqrt(dark) + 20; k += 1) {
    added.push(term);
    term *= dark / (k + 1);
  }
  const sum = new Array<number>(weights.length + added.length - 1).fill(0);
  for (const [n, weight] of weights.entries())
    for (const [k, other] of added.entries()) sum[n + k] = (sum[n + k] ?? 0) + weight * other;
  return sum;
}

function cumulated(weights: readonly number[]): readonly number[] {
  let sum = 0;
  return weights.map((weight) => (sum += Math.max(0, weight)));
}

/** A number in [0, 1) of 53 bits. */
function uniform(source: RandomSource): number {
  return ((source.next() >>> 5) * 2 ** 26 + (source.next() >>> 6)) / 2 ** 53;
}

/** The first place whose cumulated weight lies above a share of the whole. */
function firstAbove(cumulative: readonly number[], share: number): number {
  const wanted = share * (cumulative.at(-1) ?? 1);
  let [low, high] = [0, cumulative.length - 1];
  while (low < high) {
    const middle = (low + high) >> 1;
    if ((cumulative[middle] ?? 1) > wanted) high = middle;
    else low = middle + 1;
  }
  return low;
}

/**
 * Second-order coherence at no delay, estimated from counts: g⁽²⁾ = (Σ mⱼ(mⱼ − 1)/N)/(Σ mⱼ/N)².
 *
 * A loss, or an efficiency below 1, does not change what it tends to; dark counts do. Being a ratio it is off by an amount
 * of the order of 1/N.
 *
 * @param counts a list of whole numbers from 0, of which one is above 0
 * @returns a pure number ≥ 0
 * @throws Refusal where nothing was counted, and for what is no list of counts
 * @example g2Estimate([0, 2, 0, 2]) is 1: Σ m(m − 1)/N = 1 and the mean is 1
 * Source: normally ordered moments of R. J. Glauber, Phys. Rev. 130 (1963) 2529; their estimate by factorial moments of
 *   counts, L. Mandel and E. Wolf, Optical Coherence and Quantum Optics (1995), chapter 14 (both from memory).
 */
function g2Estimate(counts: Value | undefined): number {
  const list = realList(counts);
  const odd = list.find((each) => !Number.isInteger(each) || each < 0);
  if (odd !== undefined) throw new Refusal(`counts must be whole numbers from 0, got ${String(odd)}`);
  const mean = list.reduce((sum, each) => sum + each, 0) / list.length;
  if (!(mean > 0)) throw new Refusal('is not defined for counts that are all 0');
  return list.reduce((sum, each) => sum + each * (each - 1), 0) / list.length / mean ** 2;
}

/** `g2` of a state as the figure it is, of a list of counts as its estimate. */
export function g2OfStateOrCounts(ofState: OpticsFunction): OpticsFunction {
  return (values, surroundings) =>
    values.length === 1 && Array.isArray(values[0]) ? g2Estimate(values[0]) : ofState(values, surroundings);
}

function said(value: Value | undefined): string {
  if (typeof value === 'number') return String(value);
  return value === undefined ? 'nothing' : kindOf(value);
}
