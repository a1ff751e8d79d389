import { isNull } from 'drizzle-orm';
import { letters } from '@drizzle/schema';
import { partLabel } from '@shared/problems';
import type { Context } from '../server/context';
import { findPile, pilesOfSet } from '../server/marking/find-pile';
import type { SignedIn } from '../server/access/policy';
import { askForReview, decide } from '../server/problems/review-rules';
import { changeClosing } from '../server/queries/query-terms';
import { releaseSet } from '../server/results/release-set';
import { checkClosedSet } from '../server/sets/close-set';
import { moveStage } from '../server/sets/move-stage';
import { demandSet } from '../server/sets/set-queries';
import { createSet } from '../server/sets/set-rules';
import { seededSource } from '../server/keys/random-source';
import { studentCount as everybody } from './accounts';
import { day, DemoClock, hour } from './demo-clock';
import { workOnSheet, type Effort, type OpenSet } from './hand-in-scripts';
import { addProblems, makeCourse, type DemonstrationPeople, type DemonstrationProblem } from './make-course';
import { markPile } from './mark-pile';
import { commentOn, tryOut } from './review-problem';

type Tell = (line: string) => void;

interface World {
  readonly context: Context;
  readonly clock: DemoClock;
  readonly people: DemonstrationPeople;
  readonly tell: Tell;
}

/**
 * Fills an empty database with the demonstration course, through the functions that people's own acts call. Everything
 * that is drawn is fixed; only identifiers and script codes differ from one loading to the next. It takes place on a
 * clock of its own, over the six weeks before now.
 *
 * @param tell is given a line on how far it is
 * @param studentCount fewer, for tests
 */
export async function loadDemonstration(outer: Context, tell: Tell, studentCount = everybody): Promise<void> {
  const clock = new DemoClock(outer.clock.now());
  const context: Context = { ...outer, clock };
  clock.moveTo(clock.daysAgo(44, '09:00'));
  tell('Loading the demonstration: people and problems');
  const people = await makeCourse(context, studentCount);
  const world: World = { context, clock, people, tell };

  await loadReleasedSet(world);
  await loadSetInMarking(world);
  await loadOpenSet(world);
  await loadSetInReview(world);

  // Nobody is written to about the past.
  outer.db.update(letters).set({ sentAt: outer.clock.now() }).where(isNull(letters.sentAt)).run();
  tell('The demonstration course is loaded.');
}

async function loadReleasedSet(world: World): Promise<void> {
  const { context, clock, people } = world;
  const problems = await addProblems(context, people, '1-counting-quanta', 'ready');
  const closesAt = clock.daysAgo(27, '18:00');
  const set = await makeSet(world, {
    number: 1,
    title: 'Counting quanta',
    coverText: 'Give three significant figures unless a part says otherwise.',
    problems,
    closesAt,
    stages: { review: clock.daysAgo(42, '10:00'), ready: clock.daysAgo(39, '11:20'), open: clock.daysAgo(36, '08:00') },
  });
  await workAll(world, set, closesAt, (place) => ({ parts: 6, submits: place % 20 !== 7 }));
  await close(world, set, closesAt);
  clock.moveTo(clock.daysAgo(26, '09:00'));
  for (const { pile } of pilesOfSet(context.db, set.setId))
    markPile(context, clock, people.markers, pile.id, { share: 1, setAside: 0, seed: nameOf(world, pile.id) });
  clock.moveTo(Math.max(clock.now(), clock.daysAgo(14, '10:12')));
  const { set: row } = demandSet(context.db, set.setId);
  const releaser = {
    userId: people.lead.id,
    name: people.lead.name,
    origin: context.config.origin,
    now: clock.now(),
  };
  context.db.transaction(
    (tx) => {
      releaseSet(tx, set.setId, row.version, {}, releaser);
      // Whoever looks at the demonstration can query a mark, whatever the time of day.
      changeClosing(tx, set.setId, clock.daysAgo(-5, '18:00'), {
        user: people.lead,
        version: row.version + 1,
        now: clock.now(),
      });
    },
    { behavior: 'immediate' },
  );
}

async function loadSetInMarking(world: World): Promise<void> {
  const { context, clock, people } = world;
  clock.moveTo(clock.daysAgo(30, '09:30'));
  const problems = await addProblems(context, people, '2-splitters-and-losses', 'ready');
  const closesAt = clock.daysAgo(2, '18:00');
  const set = await makeSet(world, {
    number: 2,
    title: 'Splitters and losses',
    coverText: 'Where a page is asked for, a photograph or a PDF will do.',
    problems,
    closesAt,
    stages: { review: clock.daysAgo(28, '15:10'), ready: clock.daysAgo(23, '10:00'), open: clock.daysAgo(20, '08:00') },
  });
  await workAll(world, set, closesAt, (place) => ({ parts: 9, submits: place % 17 !== 5 }));
  await close(world, set, closesAt);
  clock.moveTo(clock.daysAgo(1, '09:05'));
  const shares: Readonly<Record<string, readonly [number, number]>> = {
    '2 (b)': [0.45, 0],
    '1 (b)': [0.4, 2],
    '3 (a)': [0.7, 0],
  };
  for (const { pile } of pilesOfSet(context.db, set.setId)) {
    const name = nameOf(world, pile.id);
    const [share, setAside] = shares[name] ?? [0.15, 0];
    markPile(context, clock, people.markers, pile.id, { share, setAside, seed: `set 2 ${name}` });
  }
}

async function loadOpenSet(world: World): Promise<void> {
  const { context, clock, people } = world;
  clock.moveTo(clock.daysAgo(15, '13:00'));
  const problems = await addProblems(context, people, '3-damping-and-gain', 'ready');
  const set = await makeSet(world, {
    number: 3,
    title: 'Damping and gain',
    coverText: '',
    problems,
    closesAt: clock.daysAgo(-3, '18:00'),
    stages: { review: clock.daysAgo(14, '09:00'), ready: clock.daysAgo(9, '16:00'), open: clock.daysAgo(6, '08:00') },
  });
  // The first of the roster, whose account is printed, is in the middle of it.
  await workAll(world, set, clock.daysAgo(0, '05:00'), (place) => {
    if (place === 0) return { parts: 2, submits: false };
    if (place % 3 !== 1) return null;
    return place % 2 === 0 ? { parts: 5, submits: true } : { parts: 1 + (place % 4), submits: false };
  });
}

async function loadSetInReview(world: World): Promise<void> {
  const { context, clock, people } = world;
  clock.moveTo(clock.daysAgo(5, '11:00'));
  const problems = await addProblems(context, people, '4-fringes-and-superpositions', 'in review');
  await reviewSome(world, problems);
  await makeSet(world, {
    number: 4,
    title: 'Fringes and superpositions',
    coverText: '',
    problems,
    closesAt: clock.daysAgo(-17, '18:00'),
    stages: { review: clock.daysAgo(2, '14:30') },
  });
}

/** Two markers are asked; one has tried a problem out and signed it off, and wants another changed. */
async function reviewSome({ context, clock, people }: World, problems: readonly DemonstrationProblem[]): Promise<void> {
  const { db } = context;
  const [first, second] = people.markers;
  const [cat, night, fringes] = ['a-cat-behind-a-loss', 'a-night-at-the-counter', 'fringes-of-one-quantum'].map(
    (name) => problems.find((problem) => problem.name === name)?.problemId,
  );
  if (!first || !second || !cat || !night || !fringes) throw new Error('The review of the demonstration has gaps.');
  const dueAt = clock.daysAgo(-2, '18:00');
  const ask = (problemId: string, ...colleagues: readonly SignedIn[]) => {
    const colleagueIds = colleagues.map(({ id }) => id);
    askForReview(db, problemId, { colleagueIds, dueAt, note: '' }, people.lead, clock.now());
  };
  ask(cat, first, second);
  ask(night, first);
  ask(fringes, first, second);
  await tryOut(context, cat, second, clock.daysAgo(4, '09:40'), 14, ({ alpha = 0, eta = 0 }) => {
    const lost = (1 - eta) * alpha ** 2;
    return [lost.toPrecision(4), Math.exp(-lost).toPrecision(3)];
  });
  const signedAt = clock.daysAgo(4, '10:20');
  decide(db, cat, { revision: 1, kind: 'signed off', words: '' }, { personId: second.id, now: signedAt });
  commentOn(context, people.lead, cat, {
    colleague: second,
    at: clock.daysAgo(4, '10:05'),
    lineWith: 'quanta pass to the surroundings',
    text: 'The hint on orthogonal terms comes late. Could it stand first?',
  });
  commentOn(context, people.lead, fringes, {
    colleague: second,
    at: clock.daysAgo(4, '11:02'),
    lineWith: 'equal weight',
    text: 'This leaves open whether both paths keep one polarisation. I lost four minutes over it.',
    reply: 'They do. I shall say so.',
  });
  commentOn(context, people.lead, fringes, {
    colleague: second,
    at: clock.daysAgo(4, '11:06'),
    lineWith: 'With what visibility',
    text: 'They look for a number.',
    instead: ['With what visibility do fringes show?', 'What is the visibility of the fringes?'],
  });
  const words = 'Please say what is assumed about polarisation before students ask.';
  const decidedAt = clock.daysAgo(4, '11:10');
  decide(db, fringes, { revision: 1, kind: 'changes asked', words }, { personId: second.id, now: decidedAt });
}

interface SetPlan {
  readonly number: number;
  readonly title: string;
  readonly coverText: string;
  readonly problems: readonly DemonstrationProblem[];
  readonly closesAt: number;
  readonly stages: Readonly<Partial<Record<'review' | 'ready' | 'open', number>>>;
}

async function makeSet({ context, clock, people }: World, plan: SetPlan): Promise<OpenSet> {
  const mover = { userId: people.lead.id, name: people.lead.name };
  const { id: setId } = createSet(
    context.db,
    people.courseId,
    {
      title: plan.title,
      coverText: plan.coverText,
      opensAt: plan.stages.open ?? plan.closesAt - 14 * day,
      closesAt: plan.closesAt,
      problems: plan.problems.map(({ problemId, revisionId }) => ({ problemId, revisionId })),
    },
    { ...mover, now: clock.now() },
    `demonstration ${String(plan.number)}`,
  );
  for (const stage of ['review', 'ready', 'open'] as const) {
    const at = plan.stages[stage];
    if (at === undefined) break;
    clock.moveTo(at);
    await moveStage(context, setId, stage, mover, demandSet(context.db, setId).set.version);
  }
  return { setId, number: plan.number, problems: plan.problems };
}

/** Lets every student work on a set, spread over the time until it closes. */
async function workAll(
  { context, clock, people, tell }: World,
  set: OpenSet,
  until: number,
  effortOf: (place: number) => Effort | null,
): Promise<void> {
  const from = clock.now();
  for (const [place, student] of people.students.entries()) {
    tell(
      `Loading the demonstration: set ${String(set.number)}, ${String(place + 1)} of ${String(people.students.length)} scripts`,
    );
    const effort = effortOf(place);
    if (!effort) continue;
    // Most work is done on the last evenings.
    const drawn = seededSource(`when ${String(set.number)} ${String(place)}`).below(1000) / 1000;
    clock.moveTo(Math.min(from + (until - from) * Math.sqrt(drawn), until - hour));
    await workOnSheet(context, clock, set, student, place, effort);
  }
}

async function close({ context, clock }: World, set: OpenSet, closesAt: number): Promise<void> {
  clock.moveTo(closesAt);
  await moveStage(
    context,
    set.setId,
    'closed',
    { userId: null, name: 'the clock' },
    demandSet(context.db, set.setId).set.version,
  );
  await checkClosedSet(context, set.setId);
}

/** A part as people say it: `2 (b)`. */
function nameOf({ context }: World, pileId: string): string {
  const { setProblem, partIndex } = findPile(context.db, pileId);
  return `${String(setProblem.position)} (${partLabel(partIndex)})`;
}
