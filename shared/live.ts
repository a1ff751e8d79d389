import * as z from 'zod';
import { jobState } from './jobs';
import { identifier, setStage } from './primitives';
import { ruling } from './rulings';

/** Where the live connection is found on the server. */
export const livePath = '/live';

/** A colleague as benches show them: initials on a hue, and the name. */
export const colleague = z.object({
  membershipId: identifier,
  name: z.string(),
  initials: z.string(),
  /** 1 to 8. */
  hue: z.number().int(),
});
export type Colleague = z.infer<typeof colleague>;

/** In hand, or kept ready as one of the next. */
export const holdKind = z.enum(['in hand', 'reserved']);
export type HoldKind = z.infer<typeof holdKind>;

/** A hold as others see it. */
export const seenHold = z.object({ answerId: identifier, kind: holdKind, holder: identifier });
export type SeenHold = z.infer<typeof seenHold>;

/** Every fact about a pile carries its number; whoever misses one fetches the pile again. */
const pileFact = z.object({ pileId: identifier, sequence: z.number().int() });

const answerFact = pileFact.extend({ answerId: identifier, version: z.number().int() });

/** Someone at a bench of a pile. */
export const presence = colleague.extend({
  /** The answer in hand; null while they look around. */
  answerId: identifier.nullable(),
});
export type Presence = z.infer<typeof presence>;

/**
 * What the server tells: facts in the past tense, with ids. Keys, texts and names of students never travel this way.
 */
export const liveEvents = {
  /** Holds were taken and given up, on one pile, in one act. */
  holdsChanged: pileFact.extend({ taken: z.array(seenHold), letGo: z.array(identifier) }),
  /** An answer has a standing mark. `total` is null for all who may see their own marks only. */
  answerMarked: answerFact.extend({ markerId: identifier.nullable(), total: z.number().nullable() }),
  answerSetAside: answerFact.extend({ byId: identifier }),
  /** An answer waits again: it was returned to the pile, or its mark was undone. */
  answerReturned: answerFact,
  /** A ruling was asked for, or one more answer waits on it. */
  rulingAsked: pileFact.extend({ ruling }),
  /** The lead has decided. */
  rulingDecided: pileFact.extend({ ruling }),
  /** Answers were handed in, or checked anew: fetch the pile again. */
  pileChanged: pileFact,
  /** Who is on the pile now. */
  presenceChanged: z.object({ pileId: identifier, present: z.array(presence) }),
  /** A set entered a stage. */
  stageChanged: z.object({ courseId: identifier, setId: identifier, stage: setStage }),
  /** Somebody commented on a problem, settled a comment, was asked, or decided: fetch its review again. */
  reviewChanged: z.object({ problemId: identifier }),
  /** Long work went on, or ended. It is told to who started it. */
  jobMoved: z.object({ jobId: identifier, state: jobState, done: z.number().int(), total: z.number().int() }),
} as const;

/** The names of live events. */
export type LiveEventName = keyof typeof liveEvents;
/** The body of a live event. */
export type LiveEvent<Name extends LiveEventName> = z.infer<(typeof liveEvents)[Name]>;

/** The events as the two ends of the connection type them. */
export type ServerEvents = { [Name in LiveEventName]: (body: LiveEvent<Name>) => void };

/** What a page asks for: the bench of a pile with an identifier of its own, a course's news, or a problem's review. */
export const watchPile = z.object({ pileId: identifier, benchId: identifier });
export const watchCourse = z.object({ courseId: identifier });
export const watchProblem = z.object({ problemId: identifier });

/** The answer to a wish to watch. */
export type Watching = { readonly ok: true } | { readonly ok: false; readonly detail: string };

/** What a page says. */
export interface ClientEvents {
  watchPile: (wish: z.infer<typeof watchPile>, acknowledge: (watching: Watching) => void) => void;
  /** The bench was left: its holds are given up at once. */
  leavePile: (wish: z.infer<typeof watchPile>) => void;
  watchCourse: (wish: z.infer<typeof watchCourse>, acknowledge: (watching: Watching) => void) => void;
  leaveCourse: (wish: z.infer<typeof watchCourse>) => void;
  watchProblem: (wish: z.infer<typeof watchProblem>, acknowledge: (watching: Watching) => void) => void;
  leaveProblem: (wish: z.infer<typeof watchProblem>) => void;
}
