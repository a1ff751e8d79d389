import { and, asc, eq, isNull, lt, lte } from 'drizzle-orm';
import { createTransport } from 'nodemailer';
import { letters, users } from '@drizzle/schema';
import type { Context } from '../context';
import { letterAsHtml } from './letters';

const mostAttempts = 8;
const batch = 50;

/** Sends a letter that has its link already. */
export type Transport = (letter: { to: string; subject: string; text: string; html: string }) => Promise<void>;

/** A transport over SMTP. */
export function smtpTransport(smtpUrl: string, from: string): Transport {
  const mailer = createTransport(smtpUrl, { from });
  return async (letter) => {
    await mailer.sendMail(letter);
  };
}

/**
 * Sends what is due. Without a mail server letters stay in the outbox, marked as sent when they fall due, and their
 * secret links are never made. A letter that fails is tried again, later each time, up to eight times.
 *
 * @param makeLink makes the secret link of a letter at the moment it leaves, so that no outbox ever holds it
 * @returns how many left
 */
export async function sendDueLetters(
  context: Context,
  transport: Transport | null,
  makeLink: (kind: string, userId: string) => string,
): Promise<number> {
  const { db, clock, log } = context;
  const due = db
    .select({ letter: letters, email: users.email })
    .from(letters)
    .innerJoin(users, eq(users.id, letters.userId))
    .where(
      and(
        isNull(letters.sentAt),
        isNull(letters.cancelledAt),
        lte(letters.dueAt, clock.now()),
        lt(letters.attempts, mostAttempts),
      ),
    )
    .orderBy(asc(letters.dueAt))
    .limit(batch)
    .all();
  let sent = 0;
  for (const { letter, email } of due) {
    const attempts = letter.attempts + 1;
    try {
      if (transport) {
        const text = letter.text.replace('{link}', () => makeLink(letter.kind, letter.userId));
        await transport({ to: email, subject: letter.subject, text, html: letterAsHtml(text) });
      }
      db.update(letters).set({ sentAt: clock.now(), attempts, lastError: null }).where(eq(letters.id, letter.id)).run();
      sent += 1;
    } catch (error) {
      // Whatever the mail server objects to; the letter waits, and the outbox shows why.
      const lastError = error instanceof Error ? error.message : String(error);
      const dueAt = clock.now() + 30_000 * 2 ** letter.attempts;
      db.update(letters).set({ attempts, lastError, dueAt }).where(eq(letters.id, letter.id)).run();
      log.warn({ letterId: letter.id, attempts }, 'letter could not be sent');
    }
  }
  return sent;
}
