import * as z from 'zod';
import { identifier, instant } from './primitives';
import { defineRoute } from './route';

/** What a lead grants one student. */
export const allowanceFields = z.object({
  membershipId: z.uuid('Choose a student.'),
  /** When the set closes for them; null: with the set. */
  closesAt: instant.nullable(),
  waivesLateRule: z.boolean().default(false),
  /** For leads and the record. */
  reason: z
    .string({ error: 'Give a reason.' })
    .trim()
    .min(1, 'Give a reason; leads and the record keep it.')
    .max(500, 'A reason has at most 500 characters.'),
});
export type AllowanceFields = z.input<typeof allowanceFields>;

/** An allowance as leads see it. */
export const allowance = allowanceFields.extend({
  id: identifier,
  name: z.string(),
  givenBy: z.string(),
  givenAt: instant,
  /** Whether the student can still work on the set. */
  isOpen: z.boolean(),
});
export type Allowance = z.infer<typeof allowance>;

/** An allowance as its student sees it. */
export const ownAllowance = z.object({
  /** When the set closes for the others. */
  othersCloseAt: instant.nullable(),
  closesAt: instant.nullable(),
  waivesLateRule: z.boolean(),
});

const setParams = z.object({ setId: identifier });

export const allowancesRoutes = {
  allowances: defineRoute({
    method: 'GET',
    path: '/sets/:setId/allowances',
    summary: 'The allowances of a set, by name; for leads',
    params: setParams,
    response: z.object({ items: z.array(allowance), total: z.number().int() }),
  }),
  giveAllowance: defineRoute({
    method: 'POST',
    path: '/sets/:setId/allowances',
    summary: 'Give a student another closing time, or waive the late rule; takes the place of what they had',
    params: setParams,
    body: allowanceFields,
    response: allowance,
  }),
  withdrawAllowance: defineRoute({
    method: 'DELETE',
    path: '/allowances/:allowanceId',
    summary: 'Withdraw an allowance; where the set is closed, what is saved is handed in at once',
    params: z.object({ allowanceId: identifier }),
  }),
};
