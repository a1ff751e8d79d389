import type { Queryable } from '@drizzle/client';
import { sets } from '@drizzle/schema';
import { desc, eq } from 'drizzle-orm';
import { answerField, type AnswerSpecification } from '@shared/answer-forms';
import type { SetStage } from '@shared/primitives';
import { partLabel, partMarks, problemMarks, type Part, type ProblemContent } from '@shared/problems';
import { lateRuleInWords } from '@shared/late-rule';
import type {
  Sheet,
  SheetField,
  SheetPart,
  SheetProblem,
  SheetState,
  SheetSummary,
  SubmissionSummary,
} from '@shared/scripts';
import { namedGivens, splitStatement } from '@shared/statement';
import { fullMomentOf } from '@shared/times';
import type { GivenValues } from '@shared/variants';
import { conflict, notFound } from '../http/errors';
import { conventionOf } from '../courses/convention';
import { isReleasedTo } from '../results/find-set';
import { variantsOfStudent } from '../sets/draw-set-variants';
import { demandSet, problemsOfSet, type CourseRow, type ProblemOfSet, type SetRow } from '../sets/set-queries';
import { scriptOf, type ScriptRow } from './begin-script';
import { digestOf, lastSubmission, type SubmissionRow } from './hand-in';
import { ownTimes, type OwnTimes } from './own-times';
import { contentOf, savedParts, type SavedPart } from './saved-answers';
import { presentPage } from './worked-pages';

/** Whether students see nothing but the announcement of a set, or not even that. */
function isHidden(stage: SetStage): boolean {
  return stage === 'draft' || stage === 'review';
}

/** Where a sheet stands for its student. Marking and moderation are not theirs to know. */
export function sheetStateOf(
  set: Pick<SetRow, 'stage'>,
  script: Pick<ScriptRow, 'releasedAt'> | undefined,
  { isOpen }: Pick<OwnTimes, 'isOpen'>,
): SheetState {
  if (isOpen) return 'open';
  return isReleasedTo(set, script) ? 'released' : 'closed';
}

/** What a sheet says of the late rule; nothing where no time is left for late work. */
function lateOf({ lateRule }: SetRow, { dueAt, endsAt, allowance }: OwnTimes): Sheet['late'] {
  if (lateRule === null || dueAt === null || endsAt === null || endsAt <= dueAt) return null;
  return {
    until: endsAt,
    rule: allowance?.waivesLateRule ? 'nothing is taken off for you' : lateRuleInWords(lateRule),
  };
}

/** @throws RequestError 404 where students know nothing of the set yet, 409 before it opens */
export function demandOpened(tx: Queryable, setId: string) {
  const found = demandSet(tx, setId);
  const { set, course } = found;
  if (isHidden(set.stage)) throw notFound('sheet');
  if (set.stage === 'ready')
    throw conflict(
      set.opensAt === null
        ? 'This set is not open yet.'
        : `This set opens ${fullMomentOf(set.opensAt, course.timeZone)}.`,
    );
  return found;
}

/**
 * A student's sheet: what is asked, with their own numbers, and what they saved. It is made of named pieces only, so that
 * no key, tolerance, slip or mark scheme can come along.
 */
export function presentSheet(tx: Queryable, setId: string, script: ScriptRow, now: number): Sheet {
  const { set, course } = demandOpened(tx, setId);
  const saved = savedParts(tx, script);
  const variants = variantsOfStudent(tx, setId, script.membershipId);
  const last = lastSubmission(tx, script.id);
  const times = ownTimes(tx, set, script.membershipId, now);
  return {
    ...presentPaper(tx, { set, course, times, saved, givensOf: (id) => variants.get(id)?.givens ?? {} }),
    state: sheetStateOf(set, script, times),
    submission: last ? presentSubmission(last) : null,
    changedSince: hasChanged(last, saved),
    now,
  };
}

/** A part of a sheet as it is shown: saved, or empty in a preview. */
export type ShownPart = Omit<SavedPart, 'answer'> & { readonly answer: Pick<SavedPart['answer'], 'id'> };

interface Paper {
  readonly set: SetRow;
  readonly course: CourseRow;
  readonly times: OwnTimes;
  readonly saved: readonly ShownPart[];
  /** The values of a problem of the set. */
  readonly givensOf: (setProblemId: string) => GivenValues;
}

/** What a sheet asks and when it closes, whoever looks at it. */
export function presentPaper(
  tx: Queryable,
  { set, course, times, saved, givensOf }: Paper,
): Omit<Sheet, 'state' | 'submission' | 'changedSince' | 'now'> {
  const setId = set.id;
  const convention = conventionOf(course);
  const own = problemsOfSet(tx, setId);
  const problems = own.map((each): SheetProblem => {
    const { content } = each.revision;
    const theirs = content.convention;
    const isOwn =
      theirs.vacuumVariance !== convention.vacuumVariance ||
      theirs.squeezingSign !== convention.squeezingSign ||
      theirs.splitterPhase !== convention.splitterPhase;
    return {
      setProblemId: each.setProblem.id,
      position: each.setProblem.position,
      title: content.title,
      marks: problemMarks(content),
      stem: splitStatement(content.statement).stem,
      safety: content.safety,
      givens: printedGivens(content, givensOf(each.setProblem.id)),
      data: printedData(content, givensOf(each.setProblem.id)),
      convention: isOwn ? theirs : null,
      parts: presentParts(each, saved),
    };
  });
  return {
    setId,
    courseId: course.id,
    courseTitle: course.title,
    number: set.number,
    title: set.title,
    coverText: set.coverText,
    closesAt: times.dueAt,
    late: lateOf(set, times),
    allowance: times.allowance && {
      othersCloseAt: set.closesAt,
      closesAt: times.allowance.closesAt,
      waivesLateRule: times.allowance.waivesLateRule,
    },
    timeZone: course.timeZone,
    convention,
    marks: problems.reduce((sum, each) => sum + each.marks, 0),
    problems,
  };
}

/** Values of the names that the statement prints; what only keys use stays on the server. */
export function printedGivens(content: ProblemContent, values: GivenValues): SheetProblem['givens'] {
  return Object.fromEntries(
    namedGivens(content.statement).flatMap((name) => {
      const value = values[name];
      if (!value) return [];
      return [[name, { printed: value.printed, ...(value.unit === undefined ? {} : { unit: value.unit }) }]];
    }),
  );
}

/** The lists of counts that the statement names; those that only keys use stay on the server. */
export function printedData(content: ProblemContent, values: GivenValues): SheetProblem['data'] {
  const named = new Set(namedGivens(content.statement));
  return content.givens.flatMap(({ name, symbol }) => {
    const counts = values[name]?.counts;
    return counts && named.has(name) ? [{ name, symbol, counts: [...counts] }] : [];
  });
}

function presentParts({ setProblem, revision }: ProblemOfSet, saved: readonly ShownPart[]): SheetPart[] {
  const { content } = revision;
  const texts = new Map(splitStatement(content.statement).parts.map((part) => [part.label, part.text]));
  return content.parts.flatMap((part, index): SheetPart[] => {
    const its = saved.find((each) => each.setProblemId === setProblem.id && each.partId === part.id);
    if (!its) return [];
    const label = partLabel(index);
    return [
      {
        answerId: its.answer.id,
        label,
        text: texts.get(label) ?? '',
        marks: partMarks(part),
        field: fieldOf(part.answer, content),
        options: optionsOf(part),
        workedPage: part.workedPage,
        answer: its.latest?.text ?? '',
        version: its.latest?.number ?? 0,
        savedAt: its.latest?.savedAt ?? null,
        pages: its.pages.map(presentPage),
      },
    ];
  });
}

/** What is printed beside the field of an answer. */
export function fieldOf(answer: AnswerSpecification, content: ProblemContent): SheetField {
  const variables = new Map(content.givens.map(({ name, symbol, spellings }) => [name, { symbol, spellings }]));
  const field = answerField(answer, variables);
  switch (field.form) {
    case 'number':
      return field;
    case 'formula':
      return {
        form: 'formula',
        variables: field.variables.map(({ name, symbol, spellings }) => ({
          name,
          ...(symbol === undefined ? {} : { symbol }),
          ...(spellings === undefined ? {} : { spellings: [...spellings] }),
        })),
      };
    case 'choice':
      return { form: 'choice', labels: [...field.labels], several: field.several };
    default:
      return { form: field.form };
  }
}

/** What the options of a choice say; none for other forms. */
export function optionsOf(part: Part): SheetPart['options'] {
  if (part.answer.form !== 'choice') return [];
  return part.answer.options.map((option) =>
    typeof option === 'string' ? { label: option, text: '' } : { label: option.label, text: option.text },
  );
}

/** A submission in short. */
export function presentSubmission({ number, at, by, digest }: SubmissionRow): SubmissionSummary {
  return { number, at, by, digest };
}

/** Whether what is saved differs from what was handed in last; false where nothing was handed in. */
export function hasChanged(last: SubmissionRow | undefined, saved: readonly SavedPart[]): boolean {
  return last !== undefined && digestOf(contentOf(saved)) !== last.digest;
}

/** A student's sheets in a course, the newest first; sets that are being made are not among them. */
export function listSheets(tx: Queryable, courseId: string, membershipId: string, now: number): SheetSummary[] {
  return tx
    .select()
    .from(sets)
    .where(eq(sets.courseId, courseId))
    .orderBy(desc(sets.number))
    .all()
    .filter((set) => !isHidden(set.stage))
    .map((set): SheetSummary => {
      const { id, number, title, opensAt } = set;
      const times = ownTimes(tx, set, membershipId, now);
      const script = scriptOf(tx, id, membershipId);
      const saved = script ? savedParts(tx, script) : [];
      const last = script && lastSubmission(tx, script.id);
      return {
        setId: id,
        number,
        title,
        state: set.stage === 'ready' ? 'coming' : sheetStateOf(set, script, times),
        opensAt,
        closesAt: times.dueAt,
        lateUntil: lateOf(set, times)?.until ?? null,
        parts:
          set.stage === 'ready'
            ? 0
            : problemsOfSet(tx, id).reduce((sum, each) => sum + each.revision.content.parts.length, 0),
        answered: saved.filter((part) => (part.latest?.text ?? '').trim() !== '' || part.pages.length > 0).length,
        submission: last ? presentSubmission(last) : null,
        changedSince: hasChanged(last, saved),
      };
    });
}
