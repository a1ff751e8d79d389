import * as z from 'zod';
import { convention, identifier, instant, role } from './primitives';
import { defineRoute } from './route';

/** An e-mail address, compared in lower case. */
export const email = z
  .string({ error: 'Give an e-mail address.' })
  .trim()
  .toLowerCase()
  .max(254, 'An e-mail address has at most 254 characters.')
  .pipe(z.email('This is not an e-mail address; one looks like name@example.org.'));

/** The shortest password that is taken. */
export const passwordMinimum = 15;

/** A new password. Whether it is a common one is looked up on the server. */
export const newPassword = z
  .string({ error: 'Give a password.' })
  .min(passwordMinimum, `A password has at least ${String(passwordMinimum)} characters; a few words in a row do well.`)
  .max(256, 'A password has at most 256 characters.');

/** A person's name as others read it. */
export const personName = z
  .string({ error: 'Give a name.' })
  .trim()
  .min(1, 'Give a name.')
  .max(120, 'A name has at most 120 characters.');

/** A course as the person behind the session belongs to it. */
export const sessionCourse = z.object({
  courseId: identifier,
  membershipId: identifier,
  title: z.string(),
  term: z.string(),
  timeZone: z.string(),
  convention,
  role,
});

/** Who is signed in. */
export const session = z.object({
  person: z.object({ id: identifier, name: z.string(), email: z.string(), isAdministrator: z.boolean() }),
  courses: z.array(sessionCourse),
});
export type Session = z.infer<typeof session>;
export type SessionCourse = z.infer<typeof sessionCourse>;

const secret = z.string().min(20).max(100);

/** An account as administrators see it. */
export const account = z.object({
  id: identifier,
  name: z.string(),
  email: z.string(),
  isAdministrator: z.boolean(),
  hasPassword: z.boolean(),
  createdAt: instant,
});
export type Account = z.infer<typeof account>;

/** What the installation says of itself before anybody has signed in. */
export const installation = z.object({
  /** May be empty. */
  institution: z.string(),
  /** Whether letters leave the house; otherwise they wait in the local outbox. */
  mail: z.enum(['smtp', 'outbox']),
  now: instant,
});

export const accountRoutes = {
  installation: defineRoute({
    method: 'GET',
    path: '/installation',
    summary: 'What the sign-in page shows',
    response: installation,
    open: true,
  }),
  session: defineRoute({
    method: 'GET',
    path: '/session',
    summary: 'Who is signed in, and in which courses; null for nobody',
    response: z.object({ session: session.nullable() }),
    open: true,
  }),
  signIn: defineRoute({
    method: 'POST',
    path: '/session',
    summary: 'Sign in with e-mail and password',
    body: z.object({ email, password: z.string().min(1, 'Give your password.').max(256) }),
    response: session,
    open: true,
  }),
  signOut: defineRoute({ method: 'DELETE', path: '/session', summary: 'Sign out here' }),
  signOutEverywhere: defineRoute({ method: 'DELETE', path: '/sessions', summary: 'Sign out everywhere' }),
  forgotPassword: defineRoute({
    method: 'POST',
    path: '/password-resets',
    summary: 'Ask for a link to set a new password; answers alike whether or not there is an account',
    body: z.object({ email }),
    status: 204,
    open: true,
  }),
  readToken: defineRoute({
    method: 'POST',
    path: '/tokens/read',
    summary: 'What a link from a letter is good for',
    body: z.object({ token: secret }),
    response: z.object({
      kind: z.enum(['invitation', 'password reset', 'first administrator']),
      name: z.string(),
      email: z.string(),
      expiresAt: instant,
    }),
    status: 200,
    open: true,
  }),
  useToken: defineRoute({
    method: 'POST',
    path: '/tokens/use',
    summary: 'Set a password by a link from a letter, and sign in; the link is used up',
    body: z.object({
      token: secret,
      password: newPassword,
      /** For the first administrator, who has no account yet. */
      name: personName.optional(),
      email: email.optional(),
    }),
    response: session,
    open: true,
  }),
  changePassword: defineRoute({
    method: 'PUT',
    path: '/account/password',
    summary: 'Change one’s own password; signs out everywhere else',
    body: z.object({ current: z.string().min(1, 'Give your present password.').max(256), password: newPassword }),
    status: 204,
  }),
  accounts: defineRoute({
    method: 'GET',
    path: '/accounts',
    summary: 'All accounts, for administrators',
    query: z.object({
      search: z.string().trim().max(100).default(''),
      page: z.coerce.number().int().min(1).default(1),
    }),
    response: z.object({ items: z.array(account), total: z.number().int() }),
  }),
  setAdministrator: defineRoute({
    method: 'PUT',
    path: '/accounts/:accountId/administrator',
    summary: 'Make somebody an administrator, or no longer one',
    params: z.object({ accountId: identifier }),
    body: z.object({ isAdministrator: z.boolean() }),
    response: account,
  }),
  makeLink: defineRoute({
    method: 'POST',
    path: '/accounts/:accountId/links',
    summary: 'A one-time link to set a password, to be handed over by another way than mail; recorded',
    params: z.object({ accountId: identifier }),
    response: z.object({ link: z.string(), expiresAt: instant }),
  }),
  letters: defineRoute({
    method: 'GET',
    path: '/letters',
    summary: 'The local outbox, for administrators, without the secret part of links; each reading is recorded',
    query: z.object({ page: z.coerce.number().int().min(1).default(1) }),
    response: z.object({
      items: z.array(
        z.object({
          id: identifier,
          kind: z.string(),
          to: z.string(),
          subject: z.string(),
          text: z.string(),
          createdAt: instant,
          dueAt: instant,
          sentAt: instant.nullable(),
          attempts: z.number().int(),
          lastError: z.string().nullable(),
          cancelledAt: instant.nullable(),
        }),
      ),
      total: z.number().int(),
    }),
  }),
};
