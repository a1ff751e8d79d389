import type { Role } from '@shared/primitives';
import { notAllowed } from '../http/errors';

/** Somebody who is signed in, with their roles. */
export interface SignedIn {
  readonly id: string;
  readonly name: string;
  readonly isAdministrator: boolean;
  /** The hashed session, so that sign-out everywhere else can spare it. */
  readonly sessionId: string;
  /** Present memberships, by course. */
  readonly memberships: ReadonlyMap<string, Membership>;
}

/** A person's place in one course. */
export interface Membership {
  readonly id: string;
  readonly courseId: string;
  readonly role: Role;
}

/**
 * Who, in words of the table below. `lead of any course` is the teaching team that owns the bank; `marker of any course`
 * is a marker who was asked to look at one problem of it.
 */
type Who = Role | 'administrator' | 'lead of any course' | 'marker of any course';

/**
 * Who may do what. The one table that decides; whether a thing is in a state in which it can be done, and whether a
 * sheet is one's own, is for the subject's rules.
 */
export const policy = {
  'read accounts': ['administrator'],
  'change accounts': ['administrator'],
  'read the outbox': ['administrator'],
  'create a course': ['administrator', 'lead of any course'],
  'read a desk': ['lead', 'marker', 'student'],
  'read a course': ['lead', 'marker', 'student', 'administrator'],
  'change a course': ['lead', 'administrator'],
  'read people': ['lead', 'administrator'],
  'change people': ['lead', 'administrator'],
  'read problems': ['lead of any course'],
  'write problems': ['lead of any course'],
  'review problems': ['lead of any course', 'marker of any course'],
  'overrule reviews': ['lead'],
  'read sets': ['lead', 'marker'],
  'change sets': ['lead'],
  'give allowances': ['lead'],
  'preview sheets': ['lead'],
  'answer a sheet': ['student'],
  'read piles': ['lead', 'marker'],
  mark: ['lead', 'marker'],
  'see all marks': ['lead'],
  'decide rulings': ['lead'],
  'verify receipts': ['lead', 'marker'],
  'query a mark': ['student'],
  'answer mark queries': ['lead', 'marker'],
  'set terms of mark queries': ['lead'],
  'correct keys': ['lead'],
  release: ['lead'],
  'read the record': ['lead'],
} as const satisfies Readonly<Record<string, readonly Who[]>>;

/** Something that can be allowed. */
export type Action = keyof typeof policy;

/** Whether a person may do something, in a course where the action belongs to one. */
export function can(person: SignedIn, action: Action, courseId?: string): boolean {
  const allowed: readonly Who[] = policy[action];
  if (person.isAdministrator && allowed.includes('administrator')) return true;
  const memberships = [...person.memberships.values()];
  if (allowed.includes('lead of any course') && memberships.some((each) => each.role === 'lead')) return true;
  if (allowed.includes('marker of any course') && memberships.some((each) => each.role === 'marker')) return true;
  const here = courseId === undefined ? undefined : person.memberships.get(courseId);
  return here !== undefined && allowed.includes(here.role);
}

/** @throws RequestError 403 where `can` says no */
export function demand(person: SignedIn, action: Action, courseId?: string): void {
  if (!can(person, action, courseId)) throw notAllowed();
}

/** The person's membership in a course, where the action is theirs by role. @throws RequestError 403 otherwise */
export function membershipFor(person: SignedIn, action: Action, courseId: string): Membership {
  const here = person.memberships.get(courseId);
  if (!here || !can(person, action, courseId)) throw notAllowed();
  return here;
}
