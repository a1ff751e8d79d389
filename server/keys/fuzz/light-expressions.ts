import { seededSource, type RandomSource } from './seeded-source';

const pick = <T>(source: RandomSource, items: readonly T[]): T => items[source.below(items.length)] as T;

/** A number between bounds with three decimals. */
const real = (source: RandomSource, low: number, high: number): string =>
  (low + ((high - low) * source.below(10_001)) / 10_000).toFixed(3);

const whole = (source: RandomSource, most: number): string => String(source.below(most + 1));

const amplitude = (source: RandomSource, most: number): string =>
  source.below(2) === 0
    ? real(source, -most, most)
    : `(${real(source, -most, most)} + ${real(source, 0, most)}*i)`.replace('+ -', '- ');

/** A pure state of one mode. */
function pureState(source: RandomSource, depth: number): string {
  const simple = [
    () => `fock(${whole(source, 4)})`,
    () => `coherent(${amplitude(source, 1.6)})`,
    () => `squeezed(${real(source, 0, 0.8)}, ${real(source, -3, 3)})`,
    () => `cat(${amplitude(source, 1.5)}, ${real(source, 0, 6)})`,
  ];
  const built = [
    () => `displaced(${pureState(source, depth - 1)}, ${amplitude(source, 1)})`,
    () => `squeeze(${pureState(source, depth - 1)}, ${real(source, 0, 0.5)}, ${real(source, -3, 3)})`,
    () => `phaseShift(${pureState(source, depth - 1)}, ${real(source, -3, 3)})`,
    () => `photonAdded(${pureState(source, depth - 1)})`,
    () => `(${pureState(source, 0)} + ${amplitude(source, 1)}*${pureState(source, 0)})`,
  ];
  return pick(source, depth > 0 && source.below(2) === 0 ? built : simple)();
}

/** A state of one mode. */
function oneMode(source: RandomSource, depth: number): string {
  if (depth <= 0 || source.below(3) === 0) return pureState(source, depth);
  return pick(source, [
    () => `thermal(${real(source, 0, 1.5)})`,
    () => `lose(${oneMode(source, depth - 1)}, ${real(source, 0.1, 1)})`,
    () => `amplify(${oneMode(source, depth - 1)}, ${real(source, 1, 1.8)}, ${real(source, 0, 0.5)})`,
    () => `damp(${oneMode(source, depth - 1)}, ${real(source, 0, 1)}, ${real(source, 0, 2)}, ${real(source, 0, 0.8)})`,
    () => `invert(${oneMode(source, depth - 1)}, ${real(source, 0, 0.5)}, ${real(source, 0, 1)})`,
    () => `phaseAveraged(${oneMode(source, depth - 1)})`,
    () => `dephased(${oneMode(source, depth - 1)}, ${real(source, 0, 1)})`,
    () => `mixture([0.3, 0.7], [${oneMode(source, depth - 1)}, ${oneMode(source, depth - 1)}])`,
    () => `output(${twoModes(source, depth - 1)}, ${pick(source, ['1', '2'])})`,
    () => `heralded(${twoModes(source, depth - 1)}, ${pick(source, ['1', '2'])}, ${whole(source, 2)})`,
    () => `clicked(${twoModes(source, depth - 1)}, ${pick(source, ['1', '2'])}, ${real(source, 0.3, 1)}, 0.01)`,
  ])();
}

/** A state of two modes. */
function twoModes(source: RandomSource, depth: number): string {
  const simple = [
    () => `ket(${whole(source, 3)}, ${whole(source, 3)})`,
    () => `twinBeam(${real(source, 0, 0.6)}, ${real(source, -3, 3)})`,
    () => `noon(${String(1 + source.below(3))}, ${real(source, -3, 3)})`,
    () => `product(${pureState(source, 0)}, ${pureState(source, 0)})`,
  ];
  const built = [
    () => `beamSplitter(${twoModes(source, depth - 1)}, ${real(source, 0, 1)}, ${real(source, -3, 3)})`,
    () => `machZehnder(${twoModes(source, depth - 1)}, ${real(source, 0, 1)}, ${real(source, -3, 3)}, 0.5)`,
    () => `lose(${twoModes(source, depth - 1)}, ${pick(source, ['1', '2'])}, ${real(source, 0.2, 1)})`,
    () => `phaseShift(${twoModes(source, depth - 1)}, ${pick(source, ['1', '2'])}, ${real(source, -3, 3)})`,
  ];
  return pick(source, depth > 0 && source.below(3) > 0 ? built : simple)();
}

function figure(source: RandomSource): string {
  const depth = 1 + source.below(2);
  if (source.below(4) === 0) {
    const joint = twoModes(source, depth);
    return pick(source, [
      `jointProbability(${joint}, ${whole(source, 3)}, ${whole(source, 3)})`,
      `coincidence(${joint})`,
      `visibility(${joint})`,
      `fieldCorrelation(${joint})`,
      `heraldProbability(${joint}, 1, ${whole(source, 2)})`,
      `clickProbability(${joint}, 2, ${real(source, 0.2, 1)}, 0.02)`,
    ]);
  }
  const state = oneMode(source, depth);
  return pick(source, [
    `photonProbability(${state}, ${whole(source, 6)})`,
    `photonDistribution(${state}, 4)`,
    `meanPhotons(${state})`,
    `photonVariance(${state})`,
    `mandelQ(${state})`,
    `g2(${state})`,
    `parity(${state})`,
    `amplitude(${state})`,
    `quadratureMean(${state}, ${real(source, 0, 3)})`,
    `quadratureVariance(${state}, ${real(source, 0, 3)})`,
    `quadratureDensity(${state}, ${real(source, -2, 2)}, ${real(source, 0, 3)})`,
    `wigner(${state}, ${real(source, -2, 2)}, ${real(source, -2, 2)})`,
    `husimi(${state}, ${amplitude(source, 1.5)})`,
    `characteristic(${state}, ${amplitude(source, 1)}, ${pick(source, ['-1', '0', '1'])})`,
    `countProbability(${state}, ${whole(source, 3)}, ${real(source, 0.2, 1)}, 0.1)`,
    `purity(${state})`,
    `matrixElement(${state}, ${whole(source, 3)}, ${whole(source, 3)})`,
    `atomInversion(${state}, 1, ${real(source, 0, 5)})`,
  ]);
}

/** Random figures of random states of moderate size, of the right kinds throughout; the same for the same seed. */
export function lightExpressions(seed: number, count: number): readonly string[] {
  const source = seededSource(seed);
  return Array.from({ length: count }, () => figure(source));
}
