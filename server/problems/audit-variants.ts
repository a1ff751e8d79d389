import { auditedVariants } from '@shared/audit';
import type { Convention } from '@shared/primitives';
import type { ProblemContent } from '@shared/problems';
import type { AuditedOutcome, AuditedPart, AuditedVariant, AuditInput, OtherConvention } from '../checks/audit/audited';
import { areNumbered, countVariants, drawNumbers, plainGivensOf } from '../variants/draw-givens';
import { deriveGivens } from '../variants/derive-givens';
import type { Keys } from '../variants/evaluate-outcomes';
import { evaluateKeys, expressionsOf, type PartKeys } from '../variants/evaluate-variant-keys';
import type { KeyOutcome } from '../variants/key-outcome';

/** How many variants are evaluated between two words on how far it is. */
const atOnce = 20;

/** In how many variants the keys are computed under other conventions too. */
const triedConventions = 6;

/** The part of a problem's content on which its audit depends. */
export type AuditedContent = Pick<ProblemContent, 'statement' | 'givens' | 'parts' | 'convention'>;

/**
 * Draws a problem's variants, 500 or all there are, and computes everything that an audit looks at.
 *
 * @param progress is told how many variants are computed, of how many
 */
export async function drawAudited(
  keys: Keys,
  content: AuditedContent,
  progress: (done: number, total: number) => void,
): Promise<AuditInput> {
  const numbers = drawNumbers(content, auditedVariants, 'key audit');
  const numbered = areNumbered(content);
  const total = numbers.length;
  progress(0, total);
  const variants: AuditedVariant[] = [];
  const undrawn: AuditInput['undrawn'][number][] = [];
  for (let at = 0; at < total; at += atOnce) {
    const some = numbers.slice(at, at + atOnce);
    const derived = await deriveGivens(
      keys,
      content,
      some.map((number) => plainGivensOf(content, number)),
    );
    const drawn = derived.map((variant, index) => ({ ...variant, number: numbered ? (some[index] ?? null) : null }));
    for (const { number, givens, faults } of drawn)
      if (faults[0]) undrawn.push({ number, givens, why: faults[0].message });
    const whole = drawn.filter(({ faults }) => faults.length === 0);
    const computed = await evaluateKeys(
      keys,
      content.parts.map(expressionsOf),
      content.convention,
      whole.map(({ givens }) => givens),
    );
    for (const [index, { number, givens }] of whole.entries())
      variants.push({ number, givens, parts: (computed[index] ?? []).map(auditedPart) });
    progress(Math.min(at + atOnce, total), total);
  }
  return {
    content,
    variants: await withConventions(keys, content, variants),
    undrawn,
    possible: countVariants(content),
  };
}

function auditedPart({ key, slips }: PartKeys): AuditedPart {
  return { key: key && auditedOutcome(key), slips: slips.map(auditedOutcome) };
}

function auditedOutcome({ key, fault }: KeyOutcome): AuditedOutcome {
  if (fault) return { fault: fault.message };
  const { agreesTo } = key;
  if (typeof key.value !== 'string') return { key: { value: key.value, unit: key.unit }, agreesTo };
  if ('compared' in key && key.compared) return { key: { value: key.compared }, agreesTo };
  return { fault: 'The key cannot be compared with answers.' };
}

/** The other conventions in use, each different from the problem's own in one thing. */
function otherConventions(
  own: Convention,
): readonly { readonly kind: OtherConvention['kind']; readonly words: string; readonly convention: Convention }[] {
  const variances = ([0.25, 0.5, 1] as const).filter((each) => each !== own.vacuumVariance);
  const fractions: Readonly<Record<string, string>> = { '0.25': '1/4', '0.5': '1/2', '1': '1' };
  return [
    ...variances.map((vacuumVariance) => ({
      kind: 'vacuum variance' as const,
      words: `a vacuum variance of ${fractions[String(vacuumVariance)] ?? ''}`,
      convention: { ...own, vacuumVariance },
    })),
    {
      kind: 'sign of squeezing',
      words: 'the other sign of squeezing',
      convention: { ...own, squeezingSign: own.squeezingSign === 1 ? (-1 as const) : (1 as const) },
    },
    {
      kind: 'splitter phase',
      words: own.splitterPhase === 0 ? 'a reflection phase of π/2' : 'a reflection phase of 0',
      convention: { ...own, splitterPhase: own.splitterPhase === 0 ? Math.PI / 2 : 0 },
    },
  ];
}

/** Adds the keys under other conventions to a few variants, spread over all. */
async function withConventions(
  keys: Keys,
  content: AuditedContent,
  variants: readonly AuditedVariant[],
): Promise<readonly AuditedVariant[]> {
  const stride = Math.max(1, Math.floor(variants.length / triedConventions));
  const tried = new Set(
    Array.from({ length: triedConventions }, (_, index) => index * stride).filter((index) => index < variants.length),
  );
  const places = [...tried];
  const givens = places.map((index) => variants[index]?.givens ?? {});
  const keysOnly = content.parts.map((part) => ({ ...expressionsOf(part), slips: [] }));
  const under: (ReturnType<typeof otherConventions>[number] & {
    readonly results: Awaited<ReturnType<typeof evaluateKeys>>;
  })[] = [];
  for (const other of otherConventions(content.convention))
    under.push({ ...other, results: await evaluateKeys(keys, keysOnly, other.convention, givens) });
  return variants.map((variant, index) => {
    if (!tried.has(index)) return variant;
    const place = places.indexOf(index);
    const parts = variant.parts.map((part, number) => ({
      ...part,
      conventions: under.map(({ kind, words, results }) => {
        const key = results[place]?.[number]?.key;
        return { kind, words, key: key ? auditedOutcome(key) : null };
      }),
    }));
    return { ...variant, parts };
  });
}
