import { and, eq, isNull } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import { setProblems, variants } from '@drizzle/schema';
import type { Context } from '../context';
import { newId } from '../http/new-id';
import { drawVariants } from '../variants/draw-variant';
import { problemsOfSet, type SetRow } from './set-queries';

type NewVariant = typeof variants.$inferInsert;

/**
 * Draws the variants that a set still lacks for some students: one a problem and student, or one a problem where all share.
 * Nothing is stored; the draw of a student is the same whenever it is made.
 *
 * @throws VariantError where a derived given has no value
 */
export async function drawSetVariants(
  context: Pick<Context, 'db' | 'keys'>,
  set: SetRow,
  membershipIds: readonly string[],
): Promise<readonly NewVariant[]> {
  const drawn: NewVariant[] = [];
  for (const { setProblem, revision } of problemsOfSet(context.db, set.id)) {
    const there = new Set(variantsOf(context.db, setProblem.id, membershipIds).map((row) => row.membershipId));
    const wanted = (set.individualVariants ? membershipIds : [null]).filter((each) => !there.has(each));
    const givens = await drawVariants(
      context.keys,
      revision.content,
      wanted.map((each) => `${set.seed}\n${setProblem.problemId}${each === null ? '' : `\n${each}`}`),
    );
    drawn.push(
      ...wanted.map((membershipId, index) => ({
        id: newId(),
        setProblemId: setProblem.id,
        membershipId,
        givens: givens[index] ?? {},
      })),
    );
  }
  return drawn;
}

function variantsOf(tx: Queryable, setProblemId: string, membershipIds: readonly string[]) {
  const rows = tx
    .select({ membershipId: variants.membershipId })
    .from(variants)
    .where(eq(variants.setProblemId, setProblemId))
    .all();
  const asked = new Set<string | null>([null, ...membershipIds]);
  return rows.filter((row) => asked.has(row.membershipId));
}

/** Stores drawn variants; one that somebody stored meanwhile stays. */
export function storeVariants(tx: Queryable, drawn: readonly NewVariant[]): void {
  for (const row of drawn) tx.insert(variants).values(row).onConflictDoNothing().run();
}

/** The variants that a student answers in a set, by the set's problem. */
export function variantsOfStudent(tx: Queryable, setId: string, membershipId: string) {
  const rows = tx
    .select({ variant: variants })
    .from(variants)
    .innerJoin(setProblems, eq(setProblems.id, variants.setProblemId))
    .where(and(eq(setProblems.setId, setId), eq(variants.membershipId, membershipId)))
    .all();
  const shared = tx
    .select({ variant: variants })
    .from(variants)
    .innerJoin(setProblems, eq(setProblems.id, variants.setProblemId))
    .where(and(eq(setProblems.setId, setId), isNull(variants.membershipId)))
    .all();
  return new Map([...shared, ...rows].map(({ variant }) => [variant.setProblemId, variant]));
}
