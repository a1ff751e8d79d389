import type { FieldProblem } from '@shared/problem-details';
import type { ProblemDraft } from '@shared/problem-draft';
import type { ProblemSample, SampledKey } from '@shared/problem-routes';
import { readDraft } from '@shared/read-draft';
import { areNumbered, countVariants, drawNumbers, plainGivensOf } from '../variants/draw-givens';
import { deriveGivens } from '../variants/derive-givens';
import type { Keys } from '../variants/evaluate-outcomes';
import { evaluateKeys, type PartExpressions } from '../variants/evaluate-variant-keys';
import type { KeyOutcome } from '../variants/key-outcome';

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
  return {
    count: numbered ? countVariants(content) : null,
    variants: derived.map((variant, index) => ({
      number: numbered ? (numbers[index] ?? null) : null,
      givens: variant.givens,
      parts: (results[index] ?? []).map(({ key, slips }) => ({
        key: key && presentOutcome(key),
        slips: slips.map(presentOutcome),
      })),
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
  };
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

function presentOutcome(outcome: KeyOutcome): SampledKey {
  return outcome.fault ? { fault: outcome.fault } : outcome.key;
}
