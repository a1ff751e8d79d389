import { and, eq, isNotNull, isNull } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import { answers, scripts } from '@drizzle/schema';
import type { SetStage } from '@shared/primitives';
import { lateRuleInWords } from '@shared/late-rule';
import { stageMoves, type StagePreview } from '@shared/sets';
import { momentOf, spanOf } from '@shared/times';
import { allowancesOf, closesToAllAt, timesUnder } from '../scripts/own-times';
import {
  countsOf,
  demandSet,
  marksByPersons,
  problemsOfSet,
  studentsOf,
  type CourseRow,
  type SetRow,
} from './set-queries';

interface Look {
  readonly tx: Queryable;
  readonly set: SetRow;
  readonly course: CourseRow;
  readonly now: number;
}

/** What moving a set to a stage would do, to whom, and what is in the way. It does nothing. */
export function previewStage(tx: Queryable, setId: string, to: SetStage, now: number): StagePreview {
  const { set, course } = demandSet(tx, setId);
  const look = { tx, set, course, now };
  const obstacles = obstaclesTo(look, to);
  return {
    setId,
    from: set.stage,
    to,
    version: set.version,
    allowed: obstacles.length === 0,
    obstacles,
    effects: effectsOf(look, to),
    final: to === 'open' || to === 'closed' || to === 'archived',
  };
}

/** What is in the way of a move, each with what to do about it; empty where it can be made. */
export function obstaclesTo({ tx, set, now }: Look, to: SetStage): string[] {
  if (!stageMoves[set.stage].includes(to)) {
    return [
      to === 'released'
        ? 'A set is released on its release page, once everything is marked.'
        : `A set that is in ${set.stage} cannot be moved to ${to}.`,
    ];
  }
  if (to === 'ready' || to === 'open') return obstaclesToOpening(tx, set, now);
  if (to === 'marking' && set.stage === 'closed') {
    const missing = unenteredScripts(tx, set.id, now);
    return missing > 0
      ? [`${scriptsInWords(missing)} still being handed in and checked. This takes a moment; look again soon.`]
      : [];
  }
  return [];
}

function obstaclesToOpening(tx: Queryable, set: SetRow, now: number): string[] {
  const own = problemsOfSet(tx, set.id);
  const obstacles: string[] = [];
  if (own.length === 0) obstacles.push('The set has no problem yet. Add one below.');
  for (const { revision, status } of own) {
    if (status !== 'ready')
      obstacles.push(`“${revision.content.title}” is ${status}, not ready. Set it ready in the bank, or take it out.`);
    if (revision.content.parts.length === 0)
      obstacles.push(`“${revision.content.title}” has no part to answer. Add one, and make a revision.`);
  }
  if (set.closesAt === null) obstacles.push('The set has no closing time. Set one below.');
  else if (set.closesAt <= now) obstacles.push('The closing time is over already. Choose a later one below.');
  return obstacles;
}

/** Scripts of a set that have not entered their piles, though their students' time is over. */
export function unenteredScripts(tx: Queryable, setId: string, now: number): number {
  const { set } = demandSet(tx, setId);
  const own = allowancesOf(tx, setId);
  return tx
    .selectDistinct({ id: scripts.id, membershipId: scripts.membershipId })
    .from(scripts)
    .innerJoin(answers, eq(answers.scriptId, scripts.id))
    .where(and(eq(scripts.setId, setId), isNull(answers.state)))
    .all()
    .filter(({ membershipId }) => !timesUnder(set, own.get(membershipId) ?? null, now).isOpen).length;
}

/** Students of the course who have more time than a set gives, with the last of their times. */
function withMoreTime({ tx, set, now }: Look): { readonly students: number; readonly last: number } {
  const own = allowancesOf(tx, set.id);
  const from = Math.max(now, set.closesAt ?? 0);
  const times = studentsOf(tx, set.courseId).flatMap(({ membershipId }) => own.get(membershipId)?.closesAt ?? []);
  const later = times.filter((at) => at > from);
  return { students: later.length, last: Math.max(...later) };
}

function moreTimeInWords(look: Look): string[] {
  const { students, last } = withMoreTime(look);
  if (students === 0) return [];
  const who = `${studentsIn(students)} ${students === 1 ? 'has' : 'have'} an allowance`;
  return [
    `${who} and can go on until ${momentOf(last, look.course.timeZone)}${students === 1 ? '' : ' at the latest'}. Their answers enter the piles after that.`,
  ];
}

function effectsOf(look: Look, to: SetStage): string[] {
  switch (to) {
    case 'draft':
      return ['Students see nothing of it. Everything can be changed again.'];
    case 'review':
      return ['Students see nothing of it yet. Colleagues who lead the course can read it and change it.'];
    case 'ready':
      return effectsOfReady(look);
    case 'open':
      return effectsOfOpening(look);
    case 'closed':
      return effectsOfClosing(look);
    case 'marking':
      return effectsOfMarking(look);
    case 'moderation':
      return [
        'Markers can still mark and change marks. Look at the differences and at what was set aside, then release.',
      ];
    case 'released':
      return [];
    case 'archived':
      return [
        'Students go on seeing their marks and feedback.',
        'The set leaves the desk, and stays among the sets. Nothing is deleted.',
      ];
  }
}

function effectsOfReady({ tx, set, course, now }: Look): string[] {
  const students = studentsIn(studentsOf(tx, course.id).length);
  if (set.opensAt === null) return [`It waits for you to open it. ${students} will then get a sheet.`];
  if (set.opensAt <= now)
    return [`Its opening time, ${momentOf(set.opensAt, course.timeZone)}, is over: it opens at once, for ${students}.`];
  return [
    `It opens by itself ${momentOf(set.opensAt, course.timeZone)}, in ${spanOf(set.opensAt - now)}, for ${students}.`,
    'Until then it can still be changed. Students see its title and its dates in their list.',
  ];
}

function effectsOfOpening({ tx, set, course, now }: Look): string[] {
  const own = problemsOfSet(tx, set.id);
  const count = studentsOf(tx, course.id).length;
  const parts = own.reduce((sum, each) => sum + each.revision.content.parts.length, 0);
  const drawn = own.some(({ revision }) =>
    revision.content.givens.some((given) => given.kind === 'uniform' || given.kind === 'choice'),
  );
  return [
    `${studentsIn(count)} can open their sheets at once.`,
    !drawn
      ? 'All have the same numbers: nothing is drawn in these problems.'
      : set.individualVariants
        ? 'Every student gets their own numbers. A student who is added later gets theirs with their sheet.'
        : 'All students share one draw of the numbers.',
    `Problems, order and numbers are frozen: ${problemsInWords(own.length)}, ${partsInWords(parts)}. Each part gets its pile.`,
    ...(set.closesAt === null
      ? []
      : [
          `It closes by itself ${momentOf(set.closesAt, course.timeZone)}, in ${spanOf(Math.max(0, set.closesAt - now))}.`,
        ]),
    ...(set.lateRule === null
      ? []
      : [
          `Late work is taken until ${momentOf(closesToAllAt(set) ?? now, course.timeZone)}; ${lateRuleInWords(set.lateRule)}.`,
        ]),
  ];
}

function effectsOfClosing(look: Look): string[] {
  const { tx, set, course, now } = look;
  const counts = countsOf(tx, set);
  const open = counts.students - counts.handedIn;
  const early =
    set.closesAt !== null && set.closesAt > now
      ? [
          `It closes ${spanOf(set.closesAt - now)} before the time that students were told, ${momentOf(set.closesAt, course.timeZone)}.`,
        ]
      : [];
  return [
    ...early,
    withMoreTime(look).students === 0
      ? 'No student can type, add a page or hand in any more.'
      : 'No other student can type, add a page or hand in any more.',
    ...moreTimeInWords(look),
    open === 0
      ? 'All students have handed in. What they saved since is handed in too.'
      : `${studentsIn(open)} ${open === 1 ? 'has' : 'have'} not handed in. What they have saved is handed in for them; ${String(counts.students - counts.answered)} of all sheets hold no answer.`,
    'Every answer is checked and enters its pile; what the check may settle alone gets its mark.',
  ];
}

function effectsOfMarking({ tx, set }: Look): string[] {
  const waiting = tx
    .select({ id: answers.id })
    .from(answers)
    .innerJoin(scripts, eq(scripts.id, answers.scriptId))
    .where(and(eq(scripts.setId, set.id), eq(answers.state, 'waits')))
    .all().length;
  const marked = tx
    .select({ id: answers.id })
    .from(answers)
    .innerJoin(scripts, eq(scripts.id, answers.scriptId))
    .where(and(eq(scripts.setId, set.id), eq(answers.state, 'marked'), isNotNull(answers.standingMarkId)))
    .all().length;
  const byPersons = marksByPersons(tx, set.id);
  return [
    `${String(waiting)} ${waiting === 1 ? 'answer waits' : 'answers wait'} on the piles; ${String(marked)} ${marked === 1 ? 'has its mark' : 'have their marks'}, ${String(marked - byPersons)} of them by the check alone.`,
    'Markers and leads of the course find the piles under Marking.',
  ];
}

function scriptsInWords(n: number): string {
  return `${String(n)} ${n === 1 ? 'script is' : 'scripts are'}`;
}

function studentsIn(n: number): string {
  return `${String(n)} ${n === 1 ? 'student' : 'students'}`;
}

function problemsInWords(n: number): string {
  return `${String(n)} ${n === 1 ? 'problem' : 'problems'}`;
}

function partsInWords(n: number): string {
  return `${String(n)} ${n === 1 ? 'part' : 'parts'}`;
}
