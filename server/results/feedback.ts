import { and, desc, eq } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import { answers, checks, courses, marks, scripts, sets, submissions } from '@drizzle/schema';
import { isComputed } from '@shared/answer-forms';
import type { CheckResult } from '@shared/checks';
import { partMarks, type ProblemContent } from '@shared/problems';
import type { Feedback, FeedbackPart, FeedbackSummary } from '@shared/results';
import { namedGivens, splitStatement } from '@shared/statement';
import { correctionsFor } from '../corrections/corrections-in-feedback';
import { notFound } from '../http/errors';
import { bandOf, handedInFor, printGivens, variantOf, workedPages } from '../marking/bench-answer';
import { pilesOfSet, type FoundPile } from '../marking/find-pile';
import { stillOpen } from '../scripts/own-times';
import { findSet, isReleasedTo, releasedAt } from './find-set';
import { lateScripts } from './late-scripts';
import { sumOf } from './set-results';

type MarkRow = typeof marks.$inferSelect;

/** A student's own sets that are released, the newest first. */
export function listFeedback(tx: Queryable, courseId: string, membershipId: string): FeedbackSummary[] {
  return tx
    .select({ set: sets, course: courses, script: scripts })
    .from(scripts)
    .innerJoin(sets, eq(sets.id, scripts.setId))
    .innerJoin(courses, eq(courses.id, sets.courseId))
    .where(and(eq(sets.courseId, courseId), eq(scripts.membershipId, membershipId)))
    .orderBy(desc(sets.number))
    .all()
    .filter(({ set, script }) => isReleasedTo(set, script))
    .map(({ set, course, script }) => {
      const columns = pilesOfSet(tx, set.id);
      const awarded = sumOf(columns.map((found) => standingMark(tx, script.id, found)?.mark?.total ?? null));
      const outOf = sumOf(columns.map((found) => partMarks(found.part)));
      return {
        setId: set.id,
        number: set.number,
        title: set.title,
        releasedAt: script.releasedAt ?? releasedAt(tx, set.id) ?? 0,
        total: sumOf([awarded, -(lateScripts(tx, set, course.timeZone)(script, awarded, outOf)?.marks ?? 0)]),
        outOf,
      };
    });
}

/**
 * A student's own marks and feedback on a set. It names no marker and no other student; keys and how the answer stands to
 * them are there only where the set shows keys.
 *
 * @throws RequestError 404 before the release, and where the student has no script
 */
export function presentFeedback(tx: Queryable, setId: string, membershipId: string, now: number): Feedback {
  const { set, course } = findSet(tx, setId);
  const script = tx
    .select()
    .from(scripts)
    .where(and(eq(scripts.setId, setId), eq(scripts.membershipId, membershipId)))
    .get();
  if (!script || !isReleasedTo(set, script)) throw notFound('feedback');
  const columns = pilesOfSet(tx, setId);
  const positions = [...new Set(columns.map((found) => found.setProblem.position))];
  const problems = positions.map((position) => {
    const own = columns.filter((found) => found.setProblem.position === position);
    const [first] = own;
    const secret = first !== undefined && otherMayStillAnswer(tx, set, first.setProblem.id, script, now);
    const parts = own.map((found) => presentPart(tx, script.id, found, { showKeys: set.showKeys && !secret, secret }));
    const values = first ? (variantOf(tx, first.setProblem.id, membershipId)?.givens ?? {}) : {};
    return {
      position,
      title: first?.content.title ?? '',
      stem: splitStatement(first?.content.statement ?? '').stem,
      givens: printGivens(first ? printedOn(first.content) : [], values),
      total: sumOf(parts.map((part) => part.total)),
      outOf: sumOf(parts.map((part) => part.outOf)),
      parts,
    };
  });
  const last = tx
    .select({ at: submissions.at, digest: submissions.digest })
    .from(submissions)
    .where(eq(submissions.scriptId, script.id))
    .orderBy(desc(submissions.number))
    .get();
  const awarded = sumOf(problems.map((problem) => problem.total));
  const outOf = sumOf(problems.map((problem) => problem.outOf));
  const late = lateScripts(tx, set, course.timeZone)(script, awarded, outOf);
  return {
    setId,
    courseId: set.courseId,
    number: set.number,
    title: set.title,
    releasedAt: script.releasedAt ?? releasedAt(tx, setId) ?? 0,
    handedInAt: last?.at ?? null,
    receipt: last?.digest ?? null,
    late,
    total: sumOf([awarded, -(late?.marks ?? 0)]),
    outOf,
    showKeys: set.showKeys,
    problems,
  };
}

/**
 * Whether somebody who has the same variant of a problem still has time: then nothing that tells the key is shown to
 * those who have their feedback.
 */
function otherMayStillAnswer(
  tx: Queryable,
  set: typeof sets.$inferSelect,
  setProblemId: string,
  script: typeof scripts.$inferSelect,
  now: number,
): boolean {
  const open = stillOpen(tx, set, now).filter((row) => row.membershipId !== script.membershipId);
  if (open.length === 0) return false;
  const givensOf = (membershipId: string) => JSON.stringify(variantOf(tx, setProblemId, membershipId)?.givens ?? null);
  const own = givensOf(script.membershipId);
  return open.some((row) => [own, 'null'].includes(givensOf(row.membershipId)));
}

/** What of the key a student may see: with `secret` nothing that tells it, since another may still answer. */
interface Showing {
  readonly showKeys: boolean;
  readonly secret: boolean;
}

function presentPart(tx: Queryable, scriptId: string, found: FoundPile, { showKeys, secret }: Showing): FeedbackPart {
  const standing = standingMark(tx, scriptId, found);
  const check = standing?.check ?? null;
  const handedIn = handedInFor(tx, scriptId, found);
  const awarded = new Set(standing?.mark?.criteria.filter((each) => each.awarded).map((each) => each.criterionId));
  const key = showKeys ? (check?.key ?? null) : null;
  return {
    partId: found.part.id,
    label: found.partLabel,
    text: splitStatement(found.content.statement).parts.find((part) => part.label === found.partLabel)?.text ?? '',
    answer: handedIn.text,
    readAs: check?.readAs ?? '',
    verdict: check?.verdict ?? null,
    relation: showKeys ? relationIn(check) : null,
    // Why an answer is wrong may speak of the key; why it could not be read never does.
    problem: showKeys || check?.verdict === 'unreadable' ? (check?.problem ?? null) : null,
    key: key && {
      value: key.value,
      unit: key.unit ?? null,
      band: bandOf(found.part.answer, key),
      answer: check?.value ?? null,
    },
    slip: secret ? null : slipIn(check, found),
    criteria: found.part.criteria.map(({ id, kind, name, text, marks: itsMarks }) => ({
      id,
      kind,
      name,
      text,
      marks: itsMarks,
      awarded: awarded.has(id),
    })),
    remark: standing?.mark?.remark ?? '',
    corrections: standing && !secret ? correctionsFor(tx, found, standing.answerId, handedIn.at) : [],
    total: standing?.mark?.total ?? 0,
    outOf: partMarks(found.part),
    pages: standing ? workedPages(tx, standing.answerId, handedIn.pageIds) : [],
  };
}

function relationIn(check: CheckResult | null): string | null {
  return check?.verdict === 'wrong' ? check.relation.name : null;
}

function slipIn(check: CheckResult | null, found: FoundPile): FeedbackPart['slip'] {
  if (check?.slip === undefined || !isComputed(found.part.answer)) return null;
  const slip = found.part.answer.slips?.[check.slip];
  return slip ? { name: slip.name ?? null, feedback: slip.feedback } : null;
}

/** A script's answer to a part, with the mark that stands and the check it was made on. */
function standingMark(
  tx: Queryable,
  scriptId: string,
  found: FoundPile,
): { answerId: string; mark: MarkRow | null; check: CheckResult | null } | undefined {
  const row = tx
    .select({ answerId: answers.id, mark: marks, check: checks.result })
    .from(answers)
    .leftJoin(marks, eq(marks.id, answers.standingMarkId))
    .leftJoin(checks, eq(checks.id, answers.checkId))
    .where(and(eq(answers.scriptId, scriptId), eq(answers.pileId, found.pile.id)))
    .get();
  return row;
}

/** The givens that the statement names: those that only keys use may be the key. */
function printedOn({ givens, statement }: ProblemContent): ProblemContent['givens'] {
  const named = new Set(namedGivens(statement));
  return givens.filter(({ name }) => named.has(name));
}
