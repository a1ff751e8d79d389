import { and, count, eq, isNull } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import { memberships, problems } from '@drizzle/schema';
import type { Desk, DeskSet, Need } from '@shared/desk';
import { setStageNames } from '@shared/primitives';
import type { Membership } from '../access/policy';
import { isReleasedTo } from '../results/find-set';
import { scriptOf } from '../scripts/begin-script';
import { ownTimes, stillOpen } from '../scripts/own-times';
import { queryNeeds } from './query-needs';
import { reviewNeeds } from './review-needs';
import { markingCounts, submittedAt, submittedCounts, weighedSets, type WeighedSet } from './desk-sets';

/** How long a released set stays among what needs a student, in milliseconds. */
const newsLasts = 14 * 24 * 3_600_000;

/** The desk of one person in one course. */
export function presentDesk(tx: Queryable, member: Membership, now: number): Desk {
  const weighed = weighedSets(tx, member.courseId);
  const needs = [
    ...needsFor[member.role](tx, member, weighed, now),
    ...reviewNeeds(tx, member),
    ...queryNeeds(tx, member),
  ];
  // What has no date needs somebody now; the others by their date.
  const inOrder = [...needs].sort((a, b) => (a.due ?? 0) - (b.due ?? 0));
  const shown = member.role === 'student' ? weighed.filter(({ row }) => isStudents(row.stage)) : weighed;
  return { now, needs: inOrder, sets: shown.map((each) => presentSet(tx, each, member, now)) };
}

type NeedsOf = (tx: Queryable, member: Membership, weighed: readonly WeighedSet[], now: number) => Need[];

const needsFor: Readonly<Record<Membership['role'], NeedsOf>> = {
  lead: leadNeeds,
  marker: markerNeeds,
  student: studentNeeds,
};

function leadNeeds(tx: Queryable, member: Membership, weighed: readonly WeighedSet[], now: number): Need[] {
  const ids = weighed.map(({ row }) => row.id);
  const marking = markingCounts(tx, ids);
  const submitted = submittedCounts(tx, ids);
  const students = studentsIn(tx, member.courseId);
  const needs = weighed.flatMap(({ row }): Need[] => {
    const name = `Set ${String(row.number)}`;
    const counts = marking.get(row.id) ?? { waits: 0, marked: 0, setAside: 0 };
    const all = counts.waits + counts.marked + counts.setAside;
    const set = (label: string) => ({ label, page: 'set' as const, id: row.id });
    switch (row.stage) {
      case 'draft':
      case 'review':
        return [need(row, row.opensAt, `${name} is not ready yet`, row.title, set('Open the set'))];
      case 'ready':
        return [need(row, row.opensAt, `${name} is ready and opens by itself`, row.title, set('Look at it'))];
      case 'open': {
        const missing = students - (submitted.get(row.id) ?? 0);
        const title = `${name} closes; ${String(missing)} of ${String(students)} have not submitted`;
        return [need(row, row.closesAt, title, 'What is saved when it closes is handed in', set('See the sheets'))];
      }
      case 'closed':
        return [
          need(
            row,
            null,
            `${name} is closed; marking can begin`,
            `${String(all)} answers came in`,
            set('Begin marking'),
          ),
        ];
      case 'marking':
      case 'moderation': {
        const aside: Need[] =
          counts.setAside > 0
            ? [
                {
                  ...need(
                    row,
                    null,
                    `${answersIn(counts.setAside)} set aside in ${name}`,
                    'A marker wants you to look',
                    {
                      label: 'Open the piles',
                      page: 'marking',
                      id: null,
                    },
                  ),
                  id: `aside ${row.id}`,
                },
              ]
            : [];
        const open = stillOpen(tx, row, now);
        const rest =
          counts.waits > 0
            ? need(row, null, `${String(counts.waits)} of ${String(all)} answers to ${name} are unmarked`, row.title, {
                label: 'Open the piles',
                page: 'marking',
                id: null,
              })
            : need(row, null, markedInWords(name, open.length), row.title, {
                label: 'Look at the release',
                page: 'release',
                id: row.id,
              });
        return [...aside, rest];
      }
      case 'released':
      case 'archived':
        return [];
    }
  });
  return [...needs, ...beginnings(tx, weighed, students)];
}

/** What to do in a course that has hardly begun. */
function beginnings(tx: Queryable, weighed: readonly WeighedSet[], students: number): Need[] {
  const steps: Need[] = [];
  if (students === 0)
    steps.push({
      id: 'people',
      due: null,
      title: 'Nobody is in the course yet',
      detail: 'Add students and markers, one by one or from a file',
      act: { label: 'Add people', page: 'people', id: null },
    });
  const written = tx.select({ n: count() }).from(problems).get()?.n ?? 0;
  if (written === 0)
    steps.push({
      id: 'problems',
      due: null,
      title: 'The bank holds no problem yet',
      detail: 'Write one; its keys are computed while you type',
      act: { label: 'Write a problem', page: 'problems', id: null },
    });
  else if (weighed.length === 0)
    steps.push({
      id: 'sets',
      due: null,
      title: 'There is no set yet',
      detail: 'Put problems in order and give them dates',
      act: { label: 'Build a set', page: 'new set', id: null },
    });
  return steps;
}

function markerNeeds(tx: Queryable, _member: Membership, weighed: readonly WeighedSet[]): Need[] {
  const running = weighed.filter(({ row }) => ['closed', 'marking', 'moderation'].includes(row.stage));
  const marking = markingCounts(
    tx,
    running.map(({ row }) => row.id),
  );
  return running.flatMap(({ row }): Need[] => {
    const { waits, marked, setAside } = marking.get(row.id) ?? { waits: 0, marked: 0, setAside: 0 };
    if (waits === 0) return [];
    const title = `${String(waits)} of ${String(waits + marked + setAside)} answers to Set ${String(row.number)} are unmarked`;
    return [need(row, null, title, row.title, { label: 'Open the piles', page: 'marking', id: null })];
  });
}

function studentNeeds(tx: Queryable, member: Membership, weighed: readonly WeighedSet[], now: number): Need[] {
  const submitted = submittedAt(
    tx,
    member.id,
    weighed.map(({ row }) => row.id),
  );
  return weighed.flatMap(({ row, reached }): Need[] => {
    const name = `Set ${String(row.number)}`;
    const { isOpen, dueAt, endsAt } = ownTimes(tx, row, member.id, now);
    if (isOpen) {
      const isLate = dueAt !== null && dueAt <= now;
      const act = {
        label: submitted.has(row.id) ? 'Look at it again' : 'Open the sheet',
        page: 'sheet' as const,
        id: row.id,
      };
      const title = isLate
        ? `${name} has closed; late work is taken`
        : submitted.has(row.id)
          ? `${name} is submitted; it can be changed until it closes`
          : `${name} closes`;
      return [need(row, isLate ? endsAt : dueAt, title, row.title, act)];
    }
    const released =
      reached.find((each) => each.stage === 'released')?.at ?? scriptOf(tx, row.id, member.id)?.releasedAt ?? undefined;
    if (row.stage !== 'archived' && released !== undefined && released > now - newsLasts)
      return [
        need(row, null, `Marks and feedback for ${name} are ready`, row.title, {
          label: 'Read the feedback',
          page: 'feedback',
          id: row.id,
        }),
      ];
    return [];
  });
}

function need(row: WeighedSet['row'], due: number | null, title: string, detail: string, act: Need['act']): Need {
  return { id: `set ${row.id}`, due, title, detail, act };
}

function markedInWords(name: string, open: number): string {
  if (open === 0) return `${name} is marked and can be released`;
  return `${name} is marked; ${open === 1 ? 'one student still has' : `${String(open)} students still have`} time`;
}

function answersIn(n: number): string {
  return n === 1 ? 'One answer is' : `${String(n)} answers are`;
}

function studentsIn(tx: Queryable, courseId: string): number {
  const row = tx
    .select({ n: count() })
    .from(memberships)
    .where(and(eq(memberships.courseId, courseId), eq(memberships.role, 'student'), isNull(memberships.removedAt)))
    .get();
  return row?.n ?? 0;
}

function isStudents(stage: DeskSet['stage']): boolean {
  return !['draft', 'review', 'ready'].includes(stage);
}

function presentSet(tx: Queryable, { row, reached }: WeighedSet, member: Membership, now: number): DeskSet {
  const { id: setId, number, title, opensAt } = row;
  if (member.role !== 'student') {
    const { stage, closesAt } = row;
    return { setId, number, title, stage, reached, opensAt, closesAt, act: actOf(row, member.role) };
  }
  // A student's line is their own: open as long as it is open to them, released once it is to them.
  const { isOpen, dueAt } = ownTimes(tx, row, member.id, now);
  const script = scriptOf(tx, row.id, member.id);
  // How far the team is with marking is not theirs to know.
  const behindTheScenes = ['draft', 'review', 'marking', 'moderation'];
  const closed = behindTheScenes.includes(row.stage) ? 'closed' : row.stage;
  const stage = isOpen ? 'open' : isReleasedTo(row, script) && row.stage !== 'archived' ? 'released' : closed;
  const own = reached.filter(
    (each) =>
      !behindTheScenes.includes(each.stage) &&
      (!isOpen || setStageNames.indexOf(each.stage) <= setStageNames.indexOf('open')),
  );
  return {
    setId,
    number,
    title,
    stage,
    reached: own,
    opensAt,
    closesAt: dueAt,
    act: actOf({ id: setId, stage }, 'student'),
  };
}

function actOf({ id, stage }: Pick<WeighedSet['row'], 'id' | 'stage'>, role: Membership['role']): DeskSet['act'] {
  if (role === 'student') {
    if (stage === 'open') return { label: 'Open the sheet', page: 'sheet', id };
    if (stage === 'released') return { label: 'Read the feedback', page: 'feedback', id };
    return { label: 'See the receipt', page: 'receipt', id };
  }
  if (['marking', 'moderation'].includes(stage)) return { label: 'Open the piles', page: 'marking', id: null };
  return role === 'marker'
    ? { label: 'Open the piles', page: 'marking', id: null }
    : { label: 'Open the set', page: 'set', id };
}
