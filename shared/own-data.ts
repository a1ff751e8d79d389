import * as z from 'zod';
import { identifier, instant, role } from './primitives';
import { ownQuery } from './queries';
import { signedReceipt } from './receipts';
import { defineRoute } from './route';
import { feedback } from './results';

/** Who did something, as the person that it is about may know it: a role, never a name. */
export const roleOfDoer = z.enum([
  'you',
  'lead',
  'marker',
  'student',
  'administrator',
  'the server',
  'somebody who left',
]);
export type RoleOfDoer = z.infer<typeof roleOfDoer>;

/** That somebody looked at a script after its release. */
export const look = z.object({
  at: instant,
  by: roleOfDoer,
  courseTitle: z.string(),
  setNumber: z.number().int(),
  setTitle: z.string(),
});
export type Look = z.infer<typeof look>;

/** What one script holds. */
const ownScript = z.object({
  courseId: identifier,
  setId: identifier,
  setNumber: z.number().int(),
  setTitle: z.string(),
  code: z.string(),
  begunAt: instant,
  answers: z.array(
    z.object({
      /** For example `2 (b)`. */
      part: z.string(),
      versions: z.array(z.object({ number: z.number().int(), text: z.string(), savedAt: instant })),
      pages: z.array(
        z.object({
          id: identifier,
          mediaType: z.string(),
          bytes: z.number().int(),
          pageCount: z.number().int(),
          sha256: z.string(),
          addedAt: instant,
          removedAt: instant.nullable(),
        }),
      ),
    }),
  ),
  submissions: z.array(
    z.object({ number: z.number().int(), at: instant, by: z.enum(['student', 'closing']), receipt: signedReceipt }),
  ),
  allowances: z.array(
    z.object({
      closesAt: instant.nullable(),
      waivesLateRule: z.boolean(),
      givenAt: instant,
      withdrawnAt: instant.nullable(),
    }),
  ),
  /** Marks and feedback, once they are released; null before. */
  feedback: feedback.nullable(),
  queries: z.array(ownQuery),
});
export type OwnScript = z.infer<typeof ownScript>;

/** Everything that is held about a person. */
export const ownData = z.object({
  madeAt: instant,
  account: z.object({
    id: identifier,
    name: z.string(),
    email: z.string(),
    isAdministrator: z.boolean(),
    createdAt: instant,
    hasPassword: z.boolean(),
  }),
  /** When each sign-in that is still good ends. */
  sessions: z.array(z.object({ expiresAt: instant })),
  memberships: z.array(
    z.object({
      courseId: identifier,
      courseTitle: z.string(),
      term: z.string(),
      role,
      initials: z.string().nullable(),
      createdAt: instant,
      removedAt: instant.nullable(),
    }),
  ),
  scripts: z.array(ownScript),
  letters: z.array(
    z.object({
      kind: z.string(),
      subject: z.string(),
      createdAt: instant,
      sentAt: instant.nullable(),
      cancelledAt: instant.nullable(),
    }),
  ),
  looks: z.array(look),
  /** The record's entries by this person, and about them. */
  record: z.array(
    z.object({
      at: instant,
      action: z.string(),
      thing: z.string(),
      by: roleOfDoer,
      /** Only where they did it themselves, to what is theirs. */
      sentence: z.string().nullable(),
    }),
  ),
});
export type OwnData = z.infer<typeof ownData>;

export const ownDataRoutes = {
  ownData: defineRoute({
    method: 'GET',
    path: '/account/own-data',
    summary: 'Everything that is held about the person who asks, as a file',
    response: ownData,
  }),
  looks: defineRoute({
    method: 'GET',
    path: '/account/looks',
    summary: 'In which role somebody looked at one’s own scripts after their release, the newest first',
    response: z.object({ items: z.array(look), total: z.number().int() }),
  }),
};
