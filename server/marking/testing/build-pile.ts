import { eq } from 'drizzle-orm';
import {
  answers,
  checks,
  marks,
  piles,
  problems,
  revisions,
  scripts,
  setProblems,
  sets,
  setStages,
  submissions,
  variants,
} from '@drizzle/schema';
import type { CheckResult } from '@shared/checks';
import { defaultConvention, type SetStage } from '@shared/primitives';
import type { ProblemContent } from '@shared/problems';
import { draftOf } from '@shared/read-draft';
import { newId } from '../../http/new-id';
import type { Harness } from '../../testing/harness';

/** A problem of one part with three marks: a method, an independent and an accuracy mark. */
export function buildContent(overrides: Partial<ProblemContent> = {}): ProblemContent {
  const criterion = (kind: 'M' | 'A' | 'B', name: string, text: string) => ({
    id: newId(),
    kind,
    name,
    marks: 1,
    text,
    guidance: `guidance to ${name}`,
    awardedBy: kind === 'A' ? (['right'] as const) : [],
  });
  return {
    title: 'Behind the loss',
    statement: 'A pulse of $\\val{nbar}$ photons passes a loss.\n\n(a) How many are left?',
    tags: [],
    safety: '',
    givens: [{ kind: 'uniform', name: 'nbar', symbol: '\\bar n', spellings: [], low: 1, high: 9, step: 1 }],
    parts: [
      {
        id: newId(),
        heading: 'photons left',
        answer: { form: 'number', key: 'nbar / 2', tolerance: { relative: 0.01 } },
        workedPage: true,
        standsAlone: ['right', 'unanswered'],
        criteria: [
          criterion('M', 'M1', 'attenuates'),
          criterion('B', 'B1', 'names the loss'),
          criterion('A', 'A1', 'value'),
        ],
      },
    ],
    convention: defaultConvention,
    ...overrides,
  } as ProblemContent;
}

/** How a student's number stands to a key of 2. */
export function buildCheck(value: number, overrides: Partial<CheckResult> = {}): CheckResult {
  const factor = value / 2;
  const right = factor === 1;
  return {
    verdict: right ? 'right' : 'wrong',
    fraction: right ? 1 : 0,
    readAs: String(value),
    relation: right
      ? { name: 'equal to the key' }
      : factor === 2
        ? { name: 'twice the key', factor }
        : { name: 'no known relation' },
    key: { value: 2, method: 'algebra' },
    value,
    proposed: [],
    ...overrides,
  };
}

/** What to build; the answers are the numbers that students gave, or their checks. */
interface Wishes {
  readonly courseId: string;
  readonly values: readonly (number | CheckResult)[];
  readonly stage?: SetStage;
  readonly content?: ProblemContent;
  readonly showKeys?: boolean;
}

/** A set of one problem with its pile, handed in by one new student an answer. Values that are right stand by their check. */
export function buildPile(harness: Harness, wishes: Wishes) {
  const { db, clock } = harness;
  const { courseId, values, stage = 'marking', content = buildContent(), showKeys = true } = wishes;
  const author = harness.makePerson();
  const now = clock.now();
  const setId = newId();
  const problemId = newId();
  const revisionId = newId();
  const setProblemId = newId();
  const [part] = content.parts;
  if (!part) throw new Error('The content has no part.');
  db.insert(sets)
    .values({ id: setId, courseId, number: 4, title: 'Losses', stage, showKeys, seed: 's', createdAt: now })
    .run();
  db.insert(setStages).values({ id: newId(), setId, stage, at: now }).run();
  db.insert(problems)
    .values({ id: problemId, authorId: author.id, draft: draftOf(content), draftSavedAt: now, createdAt: now })
    .run();
  db.insert(revisions)
    .values({ id: revisionId, problemId, number: 1, content, authorId: author.id, reason: 'first', createdAt: now })
    .run();
  db.insert(setProblems).values({ id: setProblemId, setId, position: 1, problemId, revisionId }).run();
  const pileId = newId();
  db.insert(piles).values({ id: pileId, setId, setProblemId, partId: part.id }).run();

  const handedIn = values.map((value, index) => {
    const student = harness.makeMember(courseId, 'student');
    const check = typeof value === 'number' ? buildCheck(value) : value;
    const scriptId = newId();
    const answerId = newId();
    const submissionId = newId();
    const checkId = newId();
    const code = `K${String(index).padStart(3, '0')}`;
    const text = check.readAs;
    db.insert(variants)
      .values({
        id: newId(),
        setProblemId,
        membershipId: student.membershipId,
        givens: { nbar: { value: 4, printed: '4' } },
      })
      .run();
    db.insert(scripts).values({ id: scriptId, setId, membershipId: student.membershipId, code, createdAt: now }).run();
    db.insert(answers).values({ id: answerId, scriptId, pileId, state: 'waits' }).run();
    db.insert(submissions)
      .values({
        id: submissionId,
        scriptId,
        number: 1,
        at: now,
        by: 'student',
        content: [{ setProblemId, partId: part.id, text, pages: [] }],
        digest: 'f'.repeat(64),
        idempotencyKey: newId(),
      })
      .run();
    db.insert(checks).values({ id: checkId, answerId, submissionId, result: check, at: now }).run();
    const standing = check.verdict === 'right' ? newId() : null;
    if (standing) {
      const criteria = part.criteria.map(({ id }) => ({ criterionId: id, awarded: true }));
      db.insert(marks)
        .values({ id: standing, answerId, kind: 'first', criteria, total: 3, at: now, idempotencyKey: newId() })
        .run();
    }
    db.update(answers)
      .set({ checkId, ...(standing ? { state: 'marked' as const, standingMarkId: standing } : {}) })
      .where(eq(answers.id, answerId))
      .run();
    return { answerId, code, student, scriptId };
  });
  return { setId, pileId, part, handedIn, setProblemId, problemId };
}
