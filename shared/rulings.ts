import * as z from 'zod';
import { identifier, instant } from './primitives';
import { defineRoute } from './route';

/** Longest question and decision, in characters. */
export const longestRuling = 2000;

/** A question on a pile's part, and what the lead decided. */
export const ruling = z.object({
  id: identifier,
  question: z.string(),
  /** A membership, as everyone who asked, waits or decided. */
  askedById: identifier,
  askedAt: instant,
  /** In words; null while it is open. */
  decision: z.string().nullable(),
  decidedById: identifier.nullable(),
  decidedAt: instant.nullable(),
  /** The answers that it concerns, the first asked about first. */
  answers: z.array(z.object({ answerId: identifier, code: z.string(), byId: identifier })),
});
export type Ruling = z.infer<typeof ruling>;

/** A ruling with the number of the fact by which it came to be as it is. */
export const rulingOutcome = z.object({ ruling, sequence: z.number().int() });
export type RulingOutcome = z.infer<typeof rulingOutcome>;

const words = (missing: string) =>
  z.string({ error: missing }).trim().min(1, missing).max(longestRuling, 'At most 2,000 characters.');

/** A question as it is asked. */
export const newRuling = z.object({
  question: words('Write the question that the lead is to decide.'),
  answerId: identifier,
});

/** A decision in words. */
export const rulingDecision = z.object({ decision: words('Write what is decided, as markers are to apply it.') });

const rulingParams = z.object({ rulingId: identifier });

export const rulingRoutes = {
  ask: defineRoute({
    method: 'POST',
    path: '/piles/:pileId/rulings',
    summary: 'Ask the lead for a ruling on a pile’s part, with the answer that it is about',
    params: z.object({ pileId: identifier }),
    body: newRuling,
    response: rulingOutcome,
    idempotent: true,
  }),
  wait: defineRoute({
    method: 'POST',
    path: '/rulings/:rulingId/answers',
    summary: 'Name one more answer that waits on an open ruling; naming it again changes nothing',
    params: rulingParams,
    body: z.object({ answerId: identifier }),
    response: rulingOutcome,
    status: 200,
  }),
  decide: defineRoute({
    method: 'POST',
    path: '/rulings/:rulingId/decision',
    summary: 'Decide a ruling in words; it binds from then on, and never changes',
    params: rulingParams,
    body: rulingDecision,
    response: rulingOutcome,
    status: 200,
  }),
};
