import type { Queryable } from '@drizzle/client';
import { queueLetter } from './letters';

/** Queues the letter by which a new person sets their password. */
export function invite(tx: Queryable, person: { id: string; name: string }, courseTitle: string, now: number): void {
  queueLetter(tx, {
    kind: 'invitation',
    userId: person.id,
    subject: `Your place in ${courseTitle}`,
    text: `Dear ${person.name},\n\nyou have been added to ${courseTitle} on Halfsilver. Set a password and begin here:\n\n{link}\n\nThe link works once and lasts seven days.`,
    now,
  });
}

/** Queues the letter by which somebody sets a new password. */
export function sendReset(tx: Queryable, person: { id: string; name: string }, now: number): void {
  queueLetter(tx, {
    kind: 'password reset',
    userId: person.id,
    subject: 'Set a new password',
    text: `Dear ${person.name},\n\nsomebody, probably you, asked for a new password on Halfsilver. Set it here:\n\n{link}\n\nThe link works once and lasts an hour. If it was not you, there is nothing to do.`,
    now,
  });
}
