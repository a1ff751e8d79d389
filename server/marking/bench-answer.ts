import { and, asc, desc, eq, inArray, isNull, or } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import { checks, marks, pages, submissions, variants } from '@drizzle/schema';
import { isComputed, type AnswerSpecification } from '@shared/answer-forms';
import type { VariantKey } from '@shared/checks';
import type { BenchAnswer, PrintedGiven, WorkedPage } from '@shared/marking';
import type { Given } from '@shared/problems';
import type { GivenValues } from '@shared/variants';
import { allowance } from '../checks/tolerance';
import type { Context } from '../context';
import { evaluateVariantKeys, type PartKeys } from '../variants/evaluate-variant-keys';
import { findAnswer, findPile, patternOfAnswer, type FoundPile } from './find-pile';
import { ratioOf } from './patterns';
import { maySee, presentMark, type Viewer } from './present-answers';

/** Everything that the light table shows of an answer, for one viewer. */
export async function presentBenchAnswer(context: Context, viewer: Viewer, answerId: string): Promise<BenchAnswer> {
  const tx = context.db;
  const { answer, code, script, state } = findAnswer(tx, answerId);
  const found = findPile(tx, answer.pileId);
  const variant = variantOf(tx, found.setProblem.id, script.membershipId);
  const check =
    answer.checkId === null
      ? null
      : (tx.select().from(checks).where(eq(checks.id, answer.checkId)).get()?.result ?? null);
  const handedIn = handedInFor(tx, script.id, found);
  const history = tx
    .select()
    .from(marks)
    .where(eq(marks.answerId, answerId))
    .orderBy(asc(marks.at))
    .all()
    .filter((row) => maySee(viewer, row));
  const standing = history.find((row) => row.id === answer.standingMarkId);
  const key = check?.key ?? null;
  return {
    id: answer.id,
    pileId: answer.pileId,
    code,
    version: answer.version,
    state,
    pattern: patternOfAnswer(tx, answer),
    givens: printGivens(found.content.givens, variant?.givens ?? {}),
    text: handedIn.text,
    readAs: check?.readAs ?? '',
    problem: check?.problem ?? null,
    verdict: check?.verdict ?? null,
    relation: check?.relation ?? null,
    ratio: check ? ratioOf(check) : null,
    value: check?.value ?? null,
    key: key && {
      value: key.value,
      unit: key.unit ?? null,
      method: key.method,
      agreesTo: key.agreesTo ?? null,
    },
    band: key && bandOf(found.part.answer, key),
    slips: await slipsOf(context, found, variant),
    slip: check?.slip ?? null,
    proposed: [...(check?.proposed ?? [])],
    pages: workedPages(tx, answer.id, handedIn.pageIds),
    standing: standing ? presentMark(standing) : null,
    history: history.map(presentMark),
    setAside: answer.setAsideReason === null ? null : { reason: answer.setAsideReason, byId: answer.setAsideById },
    anotherLook: answer.anotherLook,
  };
}

/** The draw that a student has of a problem in a set: their own, or the one that all share. */
export function variantOf(tx: Queryable, setProblemId: string, membershipId: string) {
  return tx
    .select()
    .from(variants)
    .where(
      and(
        eq(variants.setProblemId, setProblemId),
        or(eq(variants.membershipId, membershipId), isNull(variants.membershipId)),
      ),
    )
    .orderBy(desc(variants.membershipId))
    .get();
}

/** Givens as the statement prints them, in its order. */
export function printGivens(givens: readonly Given[], values: GivenValues): PrintedGiven[] {
  return givens.flatMap(({ name, symbol }) => {
    const value = values[name];
    if (!value) return [];
    return [{ name, symbol, printed: value.printed, ...(value.unit === undefined ? {} : { unit: value.unit }) }];
  });
}

/** What the last submission of a script holds for a part. */
export function handedInFor(tx: Queryable, scriptId: string, found: Pick<FoundPile, 'setProblem' | 'part'>) {
  const last = tx
    .select({ content: submissions.content, at: submissions.at })
    .from(submissions)
    .where(eq(submissions.scriptId, scriptId))
    .orderBy(desc(submissions.number))
    .get();
  const own = last?.content.find((each) => each.setProblemId === found.setProblem.id && each.partId === found.part.id);
  return { at: last?.at ?? null, text: own?.text ?? '', pageIds: (own?.pages ?? []).map((page) => page.id) };
}

/** Worked pages by id, in the order of the submission. */
export function workedPages(tx: Queryable, answerId: string, ids: readonly string[]): WorkedPage[] {
  if (ids.length === 0) return [];
  const rows = tx
    .select({ id: pages.id, mediaType: pages.mediaType, pageCount: pages.pageCount })
    .from(pages)
    .where(and(eq(pages.answerId, answerId), inArray(pages.id, [...ids])))
    .all();
  return ids.flatMap((id) => {
    const row = rows.find((each) => each.id === id);
    return row ? [{ ...row, path: `/pages/${id}` }] : [];
  });
}

/** The values that count as right; only for a number, whose tolerance is an interval. */
export function bandOf(
  answer: AnswerSpecification,
  key: Pick<VariantKey, 'value'>,
): { low: number; high: number } | null {
  if (answer.form !== 'number' || typeof key.value !== 'number') return null;
  const half = allowance(Math.abs(key.value), answer.tolerance);
  return { low: key.value - half, high: key.value + half };
}

const mostRemembered = 5_000;

/** Variants and revisions never change, so what was once computed is remembered. */
const remembered = new Map<string, readonly PartKeys[]>();

/** The slips of a part in one variant, with their values. */
export async function slipsOf(
  context: Pick<Context, 'keys' | 'log'>,
  found: FoundPile,
  variant: ReturnType<typeof variantOf>,
): Promise<BenchAnswer['slips']> {
  const slips = isComputed(found.part.answer) ? (found.part.answer.slips ?? []) : [];
  if (slips.length === 0 || !variant) return [];
  const name = `${variant.id} ${found.setProblem.revisionId} ${found.setProblem.correctionId ?? ''}`;
  let outcome = remembered.get(name);
  if (!outcome) {
    try {
      outcome = await evaluateVariantKeys(context.keys, found.content, variant.givens);
      if (remembered.size >= mostRemembered) remembered.clear();
      remembered.set(name, outcome);
    } catch (error) {
      // The pool of workers is down or overrun. An answer can be marked without seeing where its slips lie.
      context.log.warn({ error: String(error) }, 'slips could not be evaluated for the light table');
    }
  }
  const values = outcome?.[found.partIndex]?.slips ?? [];
  return slips.map((slip, index) => ({
    name: slip.name ?? `slip ${String(index + 1)}`,
    value: values[index]?.key?.value ?? null,
    fraction: slip.fraction,
  }));
}
