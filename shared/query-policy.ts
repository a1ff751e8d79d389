import * as z from 'zod';

/** What a mark query can do to a mark; a course says which to its students. */
export const queryPolicies = ['raise or lower', 'only raise'] as const;
export const queryPolicy = z.enum(queryPolicies);
export type QueryPolicy = z.infer<typeof queryPolicy>;

/** How long marks can be queried after release where the set has no date of its own, in milliseconds. */
export const queriesLast = 14 * 24 * 3_600_000;

/** What students are told. */
export const queryPolicyWords: Readonly<Record<QueryPolicy, string>> = {
  'raise or lower': 'A query can raise or lower a mark.',
  'only raise': 'A query can only raise a mark.',
};
