import type { Sheet } from '@shared/scripts';
import type { GivenValues } from '@shared/variants';
import type { Context } from '../context';
import { notFound } from '../http/errors';
import { newId } from '../http/new-id';
import { drawSetVariants, variantsOfStudent } from '../sets/draw-set-variants';
import { demandSet, problemsOfSet, studentsOf } from '../sets/set-queries';
import { ownTimes } from './own-times';
import { presentPaper, type ShownPart } from './present-sheet';

/**
 * The sheet of a student as a lead may look at it, in every stage: the student's numbers and times, and no answer of
 * theirs. Before the set opens the numbers are those that they would get now; nothing is stored.
 *
 * @throws RequestError 404 where there is no such student in the course; VariantError where a variant cannot be drawn
 */
export async function previewSheet(
  context: Context,
  setId: string,
  membershipId: string,
): Promise<Sheet & { readonly student: string }> {
  const { db, clock } = context;
  const { set, course } = demandSet(db, setId);
  const student = studentsOf(db, set.courseId).find((each) => each.membershipId === membershipId);
  if (!student) throw notFound('student');
  const drawn = await drawSetVariants(context, set, [membershipId]);
  const givens = new Map<string, GivenValues>(drawn.map((row) => [row.setProblemId, row.givens]));
  for (const [id, variant] of variantsOfStudent(db, setId, membershipId)) givens.set(id, variant.givens);
  const saved = problemsOfSet(db, setId).flatMap(({ setProblem, revision }) =>
    revision.content.parts.map((part): ShownPart => ({
      answer: { id: newId() },
      setProblemId: setProblem.id,
      partId: part.id,
      latest: undefined,
      pages: [],
    })),
  );
  const times = ownTimes(db, set, membershipId, clock.now());
  return {
    ...presentPaper(db, { set, course, times, saved, givensOf: (id) => givens.get(id) ?? {} }),
    state: times.isOpen ? 'open' : 'closed',
    submission: null,
    changedSince: false,
    now: clock.now(),
    student: student.name,
  };
}
