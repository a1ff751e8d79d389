import { accountRoutes } from '@shared/accounts';
import { markingRoutes } from '@shared/marking';
import { setsRoutes } from '@shared/sets';
import { lead, markers, students } from '../demo/accounts';
import type { Page } from './fixtures';
import { signIn } from './sign-in';

/** Who looks at the pages of the demonstration. */
export const people = {
  lead: lead.email,
  marker: markers[0].email,
  secondMarker: markers[1].email,
  student: students[0]?.email ?? '',
};

interface Demonstration {
  readonly courseId: string;
  /** The sets by their number, 1 to 4: released, in marking, open, in review. */
  readonly setIds: readonly string[];
  /** The pile of part (b) of the second problem in the set that is being marked. */
  readonly pileId: string;
  /** The problem of that pile. */
  readonly problemId: string;
}

/**
 * Signs a page in as the lead and asks the server under which identifiers the demonstration's things are.
 *
 * @throws Error where the server holds another course
 */
export async function findDemonstration(page: Page): Promise<Demonstration> {
  await signIn(page, people.lead);
  const ask = async (path: string): Promise<unknown> => (await page.request.get(`/api${path}`)).json();
  const { session } = accountRoutes.session.response.parse(await ask('/session'));
  const courseId = session?.courses[0]?.courseId ?? '';
  const sets = setsRoutes.sets.response.parse(await ask(`/courses/${courseId}/sets`)).items;
  const piles = markingRoutes.piles.response.parse(await ask(`/courses/${courseId}/piles`)).items;
  const marking = piles.find(({ stage }) => stage === 'marking');
  const pile = marking?.piles.find(({ position, partLabel }) => position === 2 && partLabel === 'b');
  if (!marking || !pile) throw new Error('The demonstration has no part 2 (b) that is being marked.');
  const { problems } = setsRoutes.set.response.parse(await ask(`/sets/${marking.setId}`));
  const setIds: string[] = [];
  for (const { number, id } of sets) setIds[number] = id;
  return { courseId, setIds, pileId: pile.id, problemId: problems[1]?.problemId ?? '' };
}
