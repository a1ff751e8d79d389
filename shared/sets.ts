import * as z from 'zod';
import { lateRule } from './late-rule';
import { identifier, instant, setStage, type SetStage, versionNumber } from './primitives';
import { problemStatus } from './problems';
import { defineRoute } from './route';
import { sheet } from './scripts';

/** The stages that a lead can move a set to from each stage. Releasing is an act of its own, with its own route. */
export const stageMoves: Readonly<Record<SetStage, readonly SetStage[]>> = {
  draft: ['review'],
  review: ['ready', 'draft'],
  ready: ['open', 'draft'],
  open: ['closed'],
  closed: ['marking'],
  marking: ['moderation'],
  moderation: ['marking'],
  released: ['archived'],
  archived: [],
};

/** Whether problems, order, variants and the opening time can still be changed. */
export function isBeforeOpening(stage: SetStage): boolean {
  return stage === 'draft' || stage === 'review' || stage === 'ready';
}

/** What a set says about itself; times are UTC milliseconds. */
export const setFields = z.object({
  title: z
    .string({ error: 'Give the set a title.' })
    .trim()
    .min(1, 'Give the set a title, for example “Counting quanta”.')
    .max(120, 'A title has at most 120 characters.'),
  /** Markdown at the head of every sheet. */
  coverText: z.string().max(10_000, 'The text at the head has at most 10,000 characters.').default(''),
  /** Null: a lead opens it by hand. */
  opensAt: instant.nullable().default(null),
  closesAt: instant.nullable().default(null),
  individualVariants: z.boolean().default(true),
  /** Whether students see the key of their variant with their feedback. */
  showKeys: z.boolean().default(true),
  /** What becomes of work that comes after the closing time; null: it is not taken. */
  lateRule: lateRule.nullable().default(null),
});
export type SetFields = z.input<typeof setFields>;

/** A problem chosen for a set, pinned to a revision. */
export const chosenProblem = z.object({ problemId: identifier, revisionId: identifier });
export type ChosenProblem = z.infer<typeof chosenProblem>;

/** A set with everything that can be edited. */
const editedSet = setFields.extend({
  problems: z.array(chosenProblem).max(40, 'A set has at most 40 problems.').optional(),
});

/** A problem of a set as leads see it. */
export const setProblem = z.object({
  id: identifier,
  position: z.number().int(),
  problemId: identifier,
  revisionId: identifier,
  revision: z.number().int(),
  /** Differs from `revision` where the problem has moved on. */
  latestRevisionId: identifier,
  latestRevision: z.number().int(),
  title: z.string(),
  status: problemStatus,
  parts: z.number().int(),
  marks: z.number(),
});
export type SetProblem = z.infer<typeof setProblem>;

/** A problem that may be put in a set. */
export const usableProblem = z.object({
  problemId: identifier,
  revisionId: identifier,
  revision: z.number().int(),
  title: z.string(),
  status: problemStatus,
  author: z.string(),
  tags: z.array(z.string()),
  parts: z.number().int(),
  marks: z.number(),
  /** Sets of this course that have it, for example `Set 3`. */
  usedIn: z.array(z.string()),
});
export type UsableProblem = z.infer<typeof usableProblem>;

/** How far the students of a set are. */
export const setCounts = z.object({
  students: z.number().int(),
  /** Sheets that were opened. */
  opened: z.number().int(),
  /** Sheets that hold at least one answer. */
  answered: z.number().int(),
  /** Scripts that were handed in by their students; after closing all are. */
  handedIn: z.number().int(),
});
export type SetCounts = z.infer<typeof setCounts>;

const entered = z.object({ stage: setStage, at: instant });

/** A set in a list. */
export const setSummary = z.object({
  id: identifier,
  courseId: identifier,
  number: z.number().int(),
  title: z.string(),
  stage: setStage,
  /** When it entered its stages, the earliest first; a stage that it came back to is there again. */
  stages: z.array(entered),
  opensAt: instant.nullable(),
  closesAt: instant.nullable(),
  problems: z.number().int(),
  parts: z.number().int(),
  marks: z.number(),
  counts: setCounts,
  version: versionNumber,
});
export type SetSummary = z.infer<typeof setSummary>;

/** A set with its settings and problems. */
export const setDetail = setSummary.omit({ problems: true }).extend({
  coverText: z.string(),
  individualVariants: z.boolean(),
  showKeys: z.boolean(),
  lateRule: lateRule.nullable(),
  problems: z.array(setProblem),
  /** The stages that it can be moved to now. */
  moves: z.array(setStage),
});
export type SetDetail = z.infer<typeof setDetail>;

/** What moving a set to a stage would do. Nothing has been done yet. */
export const stagePreview = z.object({
  setId: identifier,
  from: setStage,
  to: setStage,
  version: versionNumber,
  /** Whether it can be done. */
  allowed: z.boolean(),
  /** What is in the way, each with what to do about it. */
  obstacles: z.array(z.string()),
  /** What will happen, and to whom. */
  effects: z.array(z.string()),
  /** Whether there is no way back. */
  final: z.boolean(),
});
export type StagePreview = z.infer<typeof stagePreview>;

/** How far one student is; names are for leads. */
export const studentProgress = z.object({
  membershipId: identifier,
  name: z.string(),
  state: z.enum(['not opened', 'nothing yet', 'working', 'handed in', 'handed in at closing']),
  answered: z.number().int(),
  parts: z.number().int(),
  lastSavedAt: instant.nullable(),
  handedInAt: instant.nullable(),
});
export type StudentProgress = z.infer<typeof studentProgress>;

/** Longest list of students that is sent at once. */
export const progressPageSize = 50;

const courseParams = z.object({ courseId: identifier });
const setParams = z.object({ setId: identifier });

export const setsRoutes = {
  sets: defineRoute({
    method: 'GET',
    path: '/courses/:courseId/sets',
    summary: 'The sets of a course with their stages, the newest first',
    params: courseParams,
    response: z.object({ items: z.array(setSummary), total: z.number().int() }),
  }),
  createSet: defineRoute({
    method: 'POST',
    path: '/courses/:courseId/sets',
    summary: 'Begin a set; it gets the next number',
    params: courseParams,
    body: editedSet,
    response: setDetail,
  }),
  set: defineRoute({
    method: 'GET',
    path: '/sets/:setId',
    summary: 'A set with its settings and problems',
    params: setParams,
    response: setDetail,
  }),
  changeSet: defineRoute({
    method: 'PUT',
    path: '/sets/:setId',
    summary: 'Change a set; once it is open its problems, variants and opening time are frozen',
    params: setParams,
    body: editedSet,
    response: setDetail,
    versioned: true,
  }),
  copySet: defineRoute({
    method: 'POST',
    path: '/sets/:setId/copies',
    summary: 'Begin a draft with the problems and settings of a set, its dates moved by whole weeks',
    params: setParams,
    body: z.object({
      weeks: z
        .number({ error: 'Say by how many weeks the dates move.' })
        .int('Dates move by whole weeks.')
        .min(1, 'Dates move by at least a week.')
        .max(260, 'Dates move by at most five years.'),
    }),
    response: setDetail,
  }),
  previewSheet: defineRoute({
    method: 'GET',
    path: '/sets/:setId/students/:membershipId/sheet',
    summary: 'The sheet of any student with their own numbers and times, without their answers; for leads',
    params: setParams.extend({ membershipId: identifier }),
    response: sheet.extend({ student: z.string() }),
  }),
  usableProblems: defineRoute({
    method: 'GET',
    path: '/courses/:courseId/usable-problems',
    summary: 'Problems that may be put in a set: those that are ready, and one’s own, by their latest revision',
    params: courseParams,
    query: z.object({ search: z.string().trim().max(100).default('') }),
    response: z.object({ items: z.array(usableProblem), total: z.number().int() }),
  }),
  previewStage: defineRoute({
    method: 'GET',
    path: '/sets/:setId/stages/:stage/preview',
    summary: 'What moving a set to a stage would do, and to whom; does nothing',
    params: setParams.extend({ stage: setStage }),
    response: stagePreview,
  }),
  moveStage: defineRoute({
    method: 'POST',
    path: '/sets/:setId/stage',
    summary: 'Move a set to another stage',
    params: setParams,
    body: z.object({ stage: setStage }),
    response: setDetail,
    status: 200,
    versioned: true,
  }),
  progress: defineRoute({
    method: 'GET',
    path: '/sets/:setId/progress',
    summary: 'Who has opened their sheet, answered and handed in; for leads',
    params: setParams,
    query: z.object({
      state: studentProgress.shape.state.optional(),
      search: z.string().trim().max(100).default(''),
      page: z.coerce.number().int().min(1).default(1),
    }),
    response: z.object({ items: z.array(studentProgress), total: z.number().int(), counts: setCounts }),
  }),
};
