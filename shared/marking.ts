import * as z from 'zod';
import { plainValue, relation } from './checks';
import { colleague, holdKind, presence } from './live';
import { identifier, instant, setStage, versionNumber } from './primitives';
import { criterion, verdict } from './problems';
import { defineRoute } from './route';
import { ruling } from './rulings';

/** One criterion as a mark settles it. */
export const markedCriterion = z.object({
  criterionId: identifier,
  awarded: z.boolean(),
});
export type MarkedCriterion = z.infer<typeof markedCriterion>;

/** Longest remark, in characters. */
export const longestRemark = 4000;

/** How long a hold lasts unless it is renewed, in milliseconds. */
export const holdLasts = 60_000;

/** How long a hold outlives a lost connection, in milliseconds. */
export const holdOutlivesConnection = 20_000;

/** How many answers are kept ready behind the one in hand. */
export const keptReady = 2;

/** Where the marking of an answer stands. */
export const answerState = z.enum(['waits', 'marked', 'set aside']);
export type AnswerState = z.infer<typeof answerState>;

/** A mark, as those may read it who may see it. */
export const mark = z.object({
  id: identifier,
  /** Null: the check stands without a person. */
  markerId: identifier.nullable(),
  criteria: z.array(markedCriterion),
  total: z.number(),
  remark: z.string(),
  at: instant,
  replacesId: identifier.nullable(),
  reason: z.string().nullable(),
  /** Whether it was given by applying a mark to a pattern: nobody saw this answer by itself. */
  notSeenSingly: z.boolean(),
});
export type Mark = z.infer<typeof mark>;

/** An answer as a bar of the strip. */
export const pileAnswer = z.object({
  id: identifier,
  /** The script's code. */
  code: z.string(),
  version: versionNumber,
  state: answerState,
  /** The key of one of the pile's patterns. */
  pattern: z.string(),
  /** Who gave the standing mark; null where nobody did, or the check stands. */
  markerId: identifier.nullable(),
  /** The standing mark's total; null where there is none, or it is not this person's to see. */
  total: z.number().nullable(),
  /** Answer ÷ key, where both are numbers. */
  ratio: z.number().nullable(),
  hold: z.object({ holder: identifier, kind: holdKind }).nullable(),
});
export type PileAnswer = z.infer<typeof pileAnswer>;

/** A group of answers that stand in the same relation to their own keys. */
export const pattern = z.object({
  key: z.string(),
  name: z.string(),
  total: z.number().int(),
  /** How sure it is that a group of wrong answers has this in common by more than chance; absent where chance has no part. */
  evidence: z.enum(['weak', 'fair', 'strong', 'beyond doubt']).optional(),
});
export type Pattern = z.infer<typeof pattern>;

/** What a pile is of. */
const pileHeading = z.object({
  id: identifier,
  setProblemId: identifier,
  /** The problem's place in the set, from 1. */
  position: z.number().int(),
  problemTitle: z.string(),
  /** `a`, `b` … */
  partLabel: z.string(),
  heading: z.string(),
  marks: z.number(),
});

/** A pile in a list. */
export const pileSummary = pileHeading.extend({
  total: z.number().int(),
  waiting: z.number().int(),
  marked: z.number().int(),
  setAside: z.number().int(),
  /** Who has an answer of it in hand. */
  onIt: z.array(colleague),
});
export type PileSummary = z.infer<typeof pileSummary>;

/** A set with its piles. */
export const setPiles = z.object({
  setId: identifier,
  number: z.number().int(),
  title: z.string(),
  stage: setStage,
  piles: z.array(pileSummary),
});
export type SetPiles = z.infer<typeof setPiles>;

/** A pile with all its answers in pattern order. */
export const pile = pileHeading.extend({
  courseId: identifier,
  setId: identifier,
  setNumber: z.number().int(),
  setTitle: z.string(),
  stage: setStage,
  /** Whether marks can be given: the set is closed and not released. */
  open: z.boolean(),
  sequence: z.number().int(),
  criteria: z.array(criterion),
  patterns: z.array(pattern),
  answers: z.array(pileAnswer),
  team: z.array(colleague),
  present: z.array(presence),
  /** Open and decided ones, in the order in which they were asked. */
  rulings: z.array(ruling),
  /** Who asks. */
  me: identifier,
  seesAllMarks: z.boolean(),
});
export type Pile = z.infer<typeof pile>;

/** A slip of the part, in this answer's variant. */
export const benchSlip = z.object({
  name: z.string(),
  /** Null where it has no plain value. */
  value: plainValue.nullable(),
  fraction: z.number(),
});

/** A given as it is printed. */
export const printedGiven = z.object({
  name: z.string(),
  /** KaTeX. */
  symbol: z.string(),
  printed: z.string(),
  unit: z.string().optional(),
});
export type PrintedGiven = z.infer<typeof printedGiven>;

/** A worked page as it is fetched. */
export const workedPage = z.object({
  id: identifier,
  mediaType: z.enum(['application/pdf', 'image/jpeg', 'image/png', 'image/webp']),
  pageCount: z.number().int(),
  /** Below `/api`. */
  path: z.string(),
});
export type WorkedPage = z.infer<typeof workedPage>;

/** All that the light table shows of one answer. */
export const benchAnswer = z.object({
  id: identifier,
  pileId: identifier,
  code: z.string(),
  version: versionNumber,
  state: answerState,
  pattern: z.string(),
  givens: z.array(printedGiven),
  text: z.string(),
  readAs: z.string(),
  /** Why it could not be read, or what is wrong, in a sentence. */
  problem: z.string().nullable(),
  verdict: verdict.nullable(),
  relation: relation.nullable(),
  ratio: z.number().nullable(),
  /** The answer as compared, in the key's unit. */
  value: plainValue.nullable(),
  key: z
    .object({
      value: plainValue,
      unit: z.string().nullable(),
      method: z.string(),
      agreesTo: z.number().nullable(),
    })
    .nullable(),
  /** Values that count as right, in the key's unit; only for numbers. */
  band: z.object({ low: z.number(), high: z.number() }).nullable(),
  slips: z.array(benchSlip),
  /** Which of them it is. */
  slip: z.number().int().nullable(),
  /** Criteria that the check proposes. */
  proposed: z.array(identifier),
  pages: z.array(workedPage),
  /** The standing mark, where this person may see it. */
  standing: mark.nullable(),
  /** Marks this person may see, the oldest first. */
  history: z.array(mark),
  setAside: z.object({ reason: z.string(), byId: identifier.nullable() }).nullable(),
  /** Why a mark that a person gave is to be looked at again; it stands meanwhile. */
  anotherLook: z.string().nullable(),
});
export type BenchAnswer = z.infer<typeof benchAnswer>;

/** What a bench holds. */
export const held = z.object({
  sequence: z.number().int(),
  inHand: identifier.nullable(),
  /** The next ones, in their order. */
  reserved: z.array(identifier),
  expiresAt: instant.nullable(),
});
export type Held = z.infer<typeof held>;

/** The current state of an answer, as a refused write gets it. */
export const currentAnswer = pileAnswer.extend({ sequence: z.number().int() });
export type CurrentAnswer = z.infer<typeof currentAnswer>;

/** What a deed at the bench came to. */
export const benchOutcome = z.object({
  answer: currentAnswer,
  /** The mark that stands now; null where none does. */
  mark: mark.nullable(),
  version: versionNumber,
  /** What the bench holds now. */
  held,
});
export type BenchOutcome = z.infer<typeof benchOutcome>;

const bench = { benchId: identifier };
const reason = z
  .string({ error: 'Give a reason.' })
  .trim()
  .min(1, 'Give a reason.')
  .max(1000, 'A reason has at most 1,000 characters.');

/** A mark as it is sent. The total is computed on the server. */
export const newMark = z.object({
  ...bench,
  criteria: z.array(markedCriterion).max(12),
  remark: z.string().trim().max(longestRemark, 'A remark has at most 4,000 characters.').default(''),
  /** Why the mark is changed; needed where it is a colleague's. */
  reason: reason.optional(),
  /** Whether the bench takes the next answer in the same act. */
  takeNext: z.boolean().default(true),
});
export type NewMark = z.input<typeof newMark>;

const pileParams = z.object({ pileId: identifier });
const answerParams = z.object({ answerId: identifier });

export const markingRoutes = {
  piles: defineRoute({
    method: 'GET',
    path: '/courses/:courseId/piles',
    summary: 'The piles of a course’s sets, with how far they are marked',
    params: z.object({ courseId: identifier }),
    response: z.object({ items: z.array(setPiles), total: z.number().int() }),
  }),
  pile: defineRoute({
    method: 'GET',
    path: '/piles/:pileId',
    summary: 'A pile with its answers in pattern order; a marker sees the totals of their own marks only',
    params: pileParams,
    response: pile,
  }),
  benchAnswer: defineRoute({
    method: 'GET',
    path: '/answers/:answerId/bench',
    summary: 'An answer as the light table shows it',
    params: answerParams,
    response: benchAnswer,
  }),
  take: defineRoute({
    method: 'POST',
    path: '/piles/:pileId/holds',
    summary:
      'Take an answer in hand (a named one, the next after one, or the next of a pattern), and keep two more ready',
    params: pileParams,
    body: z.object({
      ...bench,
      answerId: identifier.optional(),
      after: identifier.optional(),
      pattern: z.string().max(200).optional(),
    }),
    response: held,
    status: 200,
  }),
  renewHolds: defineRoute({
    method: 'POST',
    path: '/piles/:pileId/holds/renewal',
    summary: 'Keep what a bench holds for another minute; answers with what it still holds',
    params: pileParams,
    body: z.object(bench),
    response: held,
    status: 200,
  }),
  letGo: defineRoute({
    method: 'POST',
    path: '/piles/:pileId/holds/end',
    summary: 'Give up all that a bench holds',
    params: pileParams,
    body: z.object(bench),
  }),
  mark: defineRoute({
    method: 'POST',
    path: '/answers/:answerId/marks',
    summary: 'Mark an answer that one holds, or change its mark',
    params: answerParams,
    body: newMark,
    response: benchOutcome,
    versioned: true,
    idempotent: true,
  }),
  undoMark: defineRoute({
    method: 'POST',
    path: '/answers/:answerId/marks/undo',
    summary: 'Take back the standing mark; the one before it stands again, or the answer waits',
    params: answerParams,
    body: z.object({ ...bench, markId: identifier }),
    response: benchOutcome,
    status: 200,
    versioned: true,
  }),
  setAside: defineRoute({
    method: 'POST',
    path: '/answers/:answerId/set-aside',
    summary: 'Set an answer that one holds aside for the lead, with a reason',
    params: answerParams,
    body: z.object({ ...bench, reason, takeNext: z.boolean().default(true) }),
    response: benchOutcome,
    status: 200,
    versioned: true,
  }),
  returnAnswer: defineRoute({
    method: 'POST',
    path: '/answers/:answerId/return',
    summary: 'Return an answer that was set aside to the pile',
    params: answerParams,
    body: z.object(bench),
    response: benchOutcome,
    status: 200,
    versioned: true,
  }),
};
