import type { ComputedSpecification } from '@shared/answer-forms';
import { isFiniteComplex, modulus, real, subtract, type Complex } from '@shared/reading/complex';
import type { SimulatedAnswer } from '../../demo/simulated-answer';
import { numberCandidates, roundedRelation, throughRelation } from '../../server/checks/relation';

/** Key and slips of a part in one variant, as they were computed. */
export interface KeysOfVariant {
  readonly key: unknown;
  readonly slips: readonly unknown[];
}

const names: Readonly<Partial<Record<SimulatedAnswer['mistake'], string>>> = {
  twice: 'twice the key',
  half: 'half the key',
  sign: 'the key with the other sign',
  'too coarse': roundedRelation.name,
  'square root': 'the square root of the key, an amplitude for an intensity',
};

const slipName = (answer: ComputedSpecification, index: number): string =>
  answer.slips?.[index]?.name ?? `slip ${String(index + 1)}`;

/**
 * What a simulated student did in a part, under the names that patterns use: the mistake made; for one who only carried
 * an earlier mistake on, that. Null for an answer that is right, or wrong in no way that has a name.
 *
 * @param answers what the student wrote for all parts of the problem
 */
export function truthOf(
  answer: ComputedSpecification,
  answers: readonly SimulatedAnswer[],
  index: number,
): string | null {
  const own = answers[index];
  if (!own) return null;
  if (own.mistake === 'slip') return own.slip === undefined ? null : slipName(answer, own.slip);
  if (own.mistake === 'power of ten') return 'a power of ten';
  if (own.mistake !== 'none') return names[own.mistake] ?? null;
  const strayed = answers.slice(0, index).some(({ mistake, text }) => mistake !== 'none' && text !== '');
  return strayed && answer.key.includes('part_') ? throughRelation.name : null;
}

const powersOfTen = new Set(['ten times the key', 'a tenth of the key']);

/** What the answer would be after a mistake; undefined where its name does not say. */
function valueAfter(name: string, answer: ComputedSpecification, { key, slips }: KeysOfVariant): Complex | undefined {
  const slip = (answer.slips ?? []).findIndex((_, index) => slipName(answer, index) === name);
  const slipValue = slips[slip];
  if (typeof slipValue === 'number') return real(slipValue);
  if (typeof key !== 'number') return undefined;
  if (name === throughRelation.name) return undefined;
  return numberCandidates.find(({ relation }) => relation.name === name)?.of(real(key));
}

const nearly = (a: Complex, b: Complex): boolean => modulus(subtract(a, b)) <= 1e-9 * Math.max(modulus(a), modulus(b));

/**
 * Whether the name told is the mistake made: it is called so, or nothing can tell the two apart because they come to the
 * same value in every variant (twice a key that is always 2 is also its square).
 */
export function sameMistake(answer: ComputedSpecification, variants: readonly KeysOfVariant[]) {
  const known = new Map<string, boolean>();
  const alike = (made: string, told: string): boolean => {
    const pair = `${made}\n${told}`;
    const before = known.get(pair);
    if (before !== undefined) return before;
    const same = variants.every((variant) => {
      const [one, other] = [valueAfter(made, answer, variant), valueAfter(told, answer, variant)];
      return one !== undefined && other !== undefined && isFiniteComplex(one) && nearly(one, other);
    });
    known.set(pair, same);
    return same;
  };
  return (made: string | null, told: string | null): boolean => {
    if (made === null || told === null) return made === told;
    if (made === told) return true;
    if (made !== 'a power of ten') return alike(made, told);
    return powersOfTen.has(told) || [...powersOfTen].some((power) => alike(power, told));
  };
}
