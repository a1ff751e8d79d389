import { problems, revisions } from '@drizzle/schema';
import { defaultConvention } from '@shared/primitives';
import { problemContent, type Part, type ProblemContent } from '@shared/problems';
import { draftOf } from '@shared/read-draft';
import { newId } from '../../http/new-id';
import { moveStage } from '../../sets/move-stage';
import { createSet, type EditedSet } from '../../sets/set-rules';
import { presentSet } from '../../sets/set-queries';
import type { Harness } from '../../testing/harness';

export const hour = 60 * 60_000;

/** A part with an accuracy mark for a right value and a method mark. */
export function buildPart(overrides: Partial<Part> = {}): Part {
  return {
    id: newId(),
    heading: '',
    answer: { form: 'number', key: '2 * nbar', tolerance: { relative: 0.01 } },
    workedPage: false,
    standsAlone: ['right', 'unanswered'],
    criteria: [
      {
        id: newId(),
        kind: 'A',
        name: 'A1',
        marks: 2,
        text: 'value',
        guidance: 'guidance-secret-71',
        awardedBy: ['right', 'follow-through'],
      },
    ],
    ...overrides,
  };
}

/** A problem with a part for a number, one that follows from it, one in words with a page, and a choice. */
export function buildContent(overrides: Partial<ProblemContent> = {}): ProblemContent {
  return problemContent.parse({
    title: 'A faint pulse',
    statement:
      'A pulse holds $\\val{nbar}$ photons.\n\n(a) Twice as many?\n(b) Three times that?\n(c) Say why.\n(d) Choose.',
    givens: [
      { kind: 'uniform', name: 'nbar', symbol: '\\bar n', low: 1, high: 90, step: 1 },
      { kind: 'derived', name: 'hidden', symbol: 'h', expression: 'nbar * 7', significantFigures: 4 },
    ],
    parts: [
      buildPart(),
      buildPart({
        answer: {
          form: 'number',
          key: '3 * part_a',
          tolerance: { relative: 0.01 },
          followThrough: 0.5,
          slips: [{ name: 'once', expression: 'part_a * 1', feedback: 'slip-secret-72', fraction: 0.25 }],
        },
      }),
      buildPart({ answer: { form: 'worked' }, workedPage: true }),
      buildPart({
        answer: {
          form: 'choice',
          options: [
            { label: 'A', text: 'bunched' },
            { label: 'B', text: 'antibunched' },
          ],
          correct: ['B'],
        },
      }),
    ],
    convention: defaultConvention,
    ...overrides,
  });
}

/** A problem in the bank with one revision. */
export function buildProblem(
  { db, clock }: Harness,
  authorId: string,
  content = buildContent(),
  status: 'draft' | 'ready' = 'ready',
) {
  const problemId = newId();
  const revisionId = newId();
  const createdAt = clock.now();
  db.insert(problems)
    .values({ id: problemId, authorId, status, draft: draftOf(content), draftSavedAt: createdAt, createdAt })
    .run();
  db.insert(revisions)
    .values({ id: revisionId, problemId, number: 1, content, authorId, reason: 'first', createdAt })
    .run();
  return { problemId, revisionId, content };
}

/** A course with a lead and two students. */
export function buildCourse(harness: Harness) {
  const course = harness.makeCourse();
  const lead = harness.makeMember(course.id, 'lead', { name: 'Ada Lead' });
  const student = harness.makeMember(course.id, 'student', { name: 'Sol Reed' });
  const other = harness.makeMember(course.id, 'student', { name: 'Kit Moor' });
  return { course, lead, student, other };
}

/** A set that is open, with the course around it. */
export async function buildOpenSet(
  harness: Harness,
  { content = buildContent(), ...settings }: Partial<EditedSet> & { content?: ProblemContent } = {},
) {
  const around = buildCourse(harness);
  const { course, lead } = around;
  const problem = buildProblem(harness, lead.id, content);
  const now = harness.clock.now();
  const created = createSet(
    harness.db,
    course.id,
    { title: 'Counting', closesAt: now + 48 * hour, problems: [problem], ...settings },
    { userId: lead.id, name: lead.name, now },
    'seed',
  );
  const mover = { userId: lead.id, name: lead.name };
  for (const stage of ['review', 'ready', 'open'] as const)
    await moveStage(harness.context, created.id, stage, mover, presentSet(harness.db, created.id).version);
  return { ...around, setId: created.id, problem, mover };
}
