import { isComputed, type AnswerSpecification } from '@shared/answer-forms';
import type { FieldProblem } from '@shared/problem-details';
import type { DraftAnswer, ProblemDraft } from '@shared/problem-draft';
import type { ProblemSample, SampledKey } from '@shared/problem-routes';
import { readDraft, readDraftPart, readDraftVariables } from '@shared/read-draft';
import type { GivenValues } from '@shared/variants';
import { comparedPoints, formulaPoints, KeyProblem, type ComputedKey } from '../checks';
import { passing } from '../checks/audit/passes';
import { areNumbered, countVariants, drawNumbers, plainGivensOf } from '../variants/draw-givens';
import { deriveGivens } from '../variants/derive-givens';
import type { Keys } from '../variants/evaluate-outcomes';
import { evaluateKeys, type PartExpressions } from '../variants/evaluate-variant-keys';
import { presentKey, type KeyOutcome } from '../variants/key-outcome';
import { printFormulaPoint } from './formula-point';
import { typesetExpression } from './typeset-expression';

interface SampleOptions {
  readonly count: number;
  readonly shown?: number | undefined;
  readonly seed: string;
}

/** How long an author waits for a sample at most, in milliseconds. */
const longestSample = 8000;

/**
 * Sample variants of a draft: whatever of it is in order is drawn and evaluated, the rest is named among the faults.
 */
export async function sampleDraft(keys: Keys, draft: ProblemDraft, options: SampleOptions): Promise<ProblemSample> {
  const read = readDraft(draft);
  const content = { givens: read.givens.map(({ given }) => given), convention: draft.convention };
  const numbers = sampleNumbers(content, options);
  const deadline = performance.now() + longestSample;
  const derived = await deriveGivens(
    keys,
    content,
    numbers.map((number) => plainGivensOf(content, number)),
    deadline,
  );
  const results = await evaluateKeys(
    keys,
    draft.parts.map(draftExpressions),
    draft.convention,
    derived.map((variant) => variant.givens),
    deadline,
  );
  const numbered = areNumbered(content);
  const answers = draft.parts.map((_, index) => readDraftPart(draft, index)?.answer);
  return {
    count: numbered ? countVariants(content) : null,
    variants: derived.map((variant, index) => ({
      number: numbered ? (numbers[index] ?? null) : null,
      givens: variant.givens,
      parts: (results[index] ?? []).map(({ key, slips }, place) => {
        const part = draft.parts[place];
        const present = (outcome: KeyOutcome) => presentOutcome(outcome, part, draft, variant.givens);
        const answer = answers[place];
        return {
          key: key && present(key),
          slips: slips.map((slip) => withPassing(present(slip), answer, key, slip)),
        };
      }),
    })),
    faults: [...read.faults, ...derivationFaults(derived, read.givens)],
  };
}

function sampleNumbers(content: Parameters<typeof drawNumbers>[0], options: SampleOptions): readonly number[] {
  const shown = options.shown !== undefined && options.shown <= countVariants(content) ? options.shown : undefined;
  const drawn = drawNumbers(content, options.count, `sample ${options.seed}`);
  if (shown === undefined || drawn.includes(shown)) return drawn;
  const nearest = drawn.reduce(
    (best, each) => (Math.abs(each - shown) < Math.abs(best - shown) ? each : best),
    Infinity,
  );
  return drawn.map((each) => (each === nearest ? shown : each));
}

/** The expressions of a part as far as they are typed; those that are empty come to nothing. */
function draftExpressions(part: ProblemDraft['parts'][number]): PartExpressions {
  const { answer } = part;
  if (answer.form === 'choice' || answer.form === 'worked') return { key: null, slips: [] };
  return {
    key: answer.key.trim() === '' ? null : answer.key,
    slips: answer.slips.map((slip) => slip.expression),
    wanted: draftWanted(answer),
  };
}

function draftWanted(answer: DraftAnswer): PartExpressions['wanted'] {
  if (answer.form === 'state') return { kind: 'state' };
  if (answer.form !== 'formula') return undefined;
  const points = formulaPoints(readDraftVariables(answer.variables));
  return { kind: 'formula', points, enough: comparedPoints };
}

function derivationFaults(
  derived: readonly { readonly faults: readonly FieldProblem[] }[],
  places: readonly { readonly index: number }[],
): readonly FieldProblem[] {
  const first = derived.find((variant) => variant.faults.length > 0)?.faults ?? [];
  // The path counts the givens that are in order; the page counts those of the draft.
  return first.map((fault) => ({
    ...fault,
    path: fault.path.map((step, place) =>
      place === 1 && typeof step === 'number' ? (places[step]?.index ?? step) : step,
    ),
  }));
}

/** A slip with whether it would pass as right, by the comparisons that answers are judged by. */
function withPassing(
  shown: SampledKey,
  answer: AnswerSpecification | undefined,
  key: KeyOutcome | null,
  slip: KeyOutcome,
): SampledKey {
  const [right, wrong] = [computedKeyOf(key), computedKeyOf(slip)];
  if ('fault' in shown || !answer || !isComputed(answer) || !right || !wrong) return shown;
  try {
    return { ...shown, passes: passing(answer, right, wrong) !== 'told apart' };
  } catch (error) {
    // A key that is not of the part's kind has a fault of its own.
    if (error instanceof KeyProblem) return shown;
    throw error;
  }
}

function computedKeyOf(outcome: KeyOutcome | null): ComputedKey | undefined {
  const key = outcome?.key;
  if (!key) return undefined;
  if (typeof key.value !== 'string') return { value: key.value, unit: key.unit };
  return 'compared' in key && key.compared ? { value: key.compared } : undefined;
}

function presentOutcome(
  outcome: KeyOutcome,
  part: ProblemDraft['parts'][number] | undefined,
  draft: ProblemDraft,
  givens: GivenValues,
): SampledKey {
  if (outcome.fault) return { fault: outcome.fault };
  const { key } = outcome;
  const shown = presentKey(key);
  if (typeof key.value !== 'string' || !part) return shown;
  if (part.answer.form !== 'formula') return 'typeset' in key ? { ...shown, typeset: key.typeset } : shown;
  const { variables } = part.answer;
  const typeset = typesetExpression(key.value, {
    values: givens,
    symbols: new Map(
      [...draft.givens, ...variables]
        .filter(({ symbol }) => symbol.trim() !== '')
        .map(({ name, symbol }) => [name.trim(), symbol.trim()]),
    ),
    variables: new Set(variables.map(({ name }) => name.trim())),
  });
  const values = 'compared' in key && key.compared && 'atPoints' in key.compared ? key.compared.atPoints : [];
  return { ...shown, typeset, example: printFormulaPoint(formulaPoints(readDraftVariables(variables)), values) };
}
