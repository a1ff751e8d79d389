import * as z from 'zod';
import { email, personName } from './accounts';
import { convention, defaultConvention, identifier, instant, role, versionNumber } from './primitives';
import { defineRoute } from './route';

/** Whether the platform knows a time zone by this name. */
function isTimeZone(name: string): boolean {
  try {
    new Intl.DateTimeFormat('en', { timeZone: name });
    return true;
  } catch (error) {
    // An unknown name is a RangeError; nothing else is expected.
    if (error instanceof RangeError) return false;
    throw error;
  }
}

const courseFields = z.object({
  title: z.string({ error: 'Give the course a title.' }).trim().min(1, 'Give the course a title.').max(120),
  term: z.string({ error: 'Name the term.' }).trim().min(1, 'Name the term, for example “autumn term”.').max(60),
  timeZone: z
    .string({ error: 'Choose a time zone.' })
    .refine(isTimeZone, { error: 'Choose a time zone of the IANA list, for example Europe/Vienna.' }),
  convention: convention.default(defaultConvention),
});

/** A course. */
export const course = courseFields.extend({ id: identifier, createdAt: instant, version: versionNumber });
export type Course = z.infer<typeof course>;

/** A person in a course. */
export const member = z.object({
  membershipId: identifier,
  userId: identifier,
  name: z.string(),
  email: z.string(),
  role,
  initials: z.string().nullable(),
  hue: z.number().int().nullable(),
  /** Whether they have accepted the invitation. */
  hasPassword: z.boolean(),
});
export type Member = z.infer<typeof member>;

/** One person to be added. */
export const newMember = z.object({ name: personName, email, role });

/** What a row of a CSV file would do. */
export const rosterRow = z.object({
  /** As a text editor counts lines, the heading being line 1. */
  line: z.number().int(),
  name: z.string(),
  email: z.string(),
  role: z.string(),
  outcome: z.enum(['new person', 'joins with their account', 'already here', 'wrong']),
  /** What is wrong, in a sentence; empty unless `outcome` is wrong. */
  problems: z.array(z.string()),
});
export type RosterRow = z.infer<typeof rosterRow>;

const courseParams = z.object({ courseId: identifier });

export const courseRoutes = {
  courses: defineRoute({
    method: 'GET',
    path: '/courses',
    summary: 'All courses for an administrator, otherwise one’s own',
    response: z.object({ items: z.array(course), total: z.number().int() }),
  }),
  createCourse: defineRoute({
    method: 'POST',
    path: '/courses',
    summary: 'Create a course; whoever creates it is its first lead',
    body: courseFields,
    response: course,
  }),
  course: defineRoute({
    method: 'GET',
    path: '/courses/:courseId',
    summary: 'A course',
    params: courseParams,
    response: course,
  }),
  changeCourse: defineRoute({
    method: 'PUT',
    path: '/courses/:courseId',
    summary: 'Change title, term, time zone or convention',
    params: courseParams,
    body: courseFields,
    response: course,
    versioned: true,
  }),
  people: defineRoute({
    method: 'GET',
    path: '/courses/:courseId/people',
    summary: 'The people of a course',
    params: courseParams,
    query: z.object({
      search: z.string().trim().max(100).default(''),
      role: role.optional(),
      page: z.coerce.number().int().min(1).default(1),
    }),
    response: z.object({ items: z.array(member), total: z.number().int() }),
  }),
  addPerson: defineRoute({
    method: 'POST',
    path: '/courses/:courseId/people',
    summary: 'Add a person; who has no account is invited by mail',
    params: courseParams,
    body: newMember,
    response: member,
  }),
  changePerson: defineRoute({
    method: 'PATCH',
    path: '/courses/:courseId/people/:membershipId',
    summary: 'Change a person’s role',
    params: courseParams.extend({ membershipId: identifier }),
    body: z.object({ role }),
    response: member,
  }),
  removePerson: defineRoute({
    method: 'DELETE',
    path: '/courses/:courseId/people/:membershipId',
    summary: 'Take a person out of the course; their scripts and marks stay',
    params: courseParams.extend({ membershipId: identifier }),
  }),
  restorePerson: defineRoute({
    method: 'POST',
    path: '/courses/:courseId/people/:membershipId/return',
    summary: 'Undo the removal of a person',
    params: courseParams.extend({ membershipId: identifier }),
    response: member,
    status: 200,
  }),
  invitationLink: defineRoute({
    method: 'POST',
    path: '/courses/:courseId/people/:membershipId/invitation',
    summary: 'Invite again by mail; where no mail server is set up, answers with a one-time link to hand over',
    params: courseParams.extend({ membershipId: identifier }),
    response: z.object({ link: z.string().nullable(), expiresAt: instant }),
  }),
  previewRoster: defineRoute({
    method: 'POST',
    path: '/courses/:courseId/roster/preview',
    summary: 'What a CSV file of people would do, row by row; imports nothing',
    params: courseParams,
    body: z.object({ csv: z.string().max(1_000_000, 'At most a million characters at once.') }),
    response: z.object({ rows: z.array(rosterRow), good: z.number().int(), wrong: z.number().int() }),
    status: 200,
  }),
  importRoster: defineRoute({
    method: 'POST',
    path: '/courses/:courseId/roster',
    summary: 'Add the people of a CSV file; refused whole while a row is wrong',
    params: courseParams,
    body: z.object({ csv: z.string().max(1_000_000, 'At most a million characters at once.') }),
    response: z.object({ added: z.number().int(), invited: z.number().int(), unchanged: z.number().int() }),
  }),
};
