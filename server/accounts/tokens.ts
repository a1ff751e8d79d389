import { and, eq, isNull } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import { tokens } from '@drizzle/schema';
import { gone } from '../http/errors';
import { newId } from '../http/new-id';
import { hashSecret, newSecret } from './secrets';

const hour = 3_600_000;

/** How long a link lasts, in milliseconds. */
export const lifetimes = {
  invitation: 7 * 24 * hour,
  'password reset': hour,
  'first administrator': 24 * hour,
} as const;

/** What a link is for. */
export type TokenKind = keyof typeof lifetimes;

/** Makes a single-use secret; only its hash is kept. Earlier ones of the same kind for the same person end. */
export function makeToken(tx: Queryable, kind: TokenKind, userId: string | null, now: number) {
  const earlier = and(
    eq(tokens.kind, kind),
    userId === null ? isNull(tokens.userId) : eq(tokens.userId, userId),
    isNull(tokens.usedAt),
  );
  tx.update(tokens).set({ usedAt: now }).where(earlier).run();
  const secret = newSecret();
  const expiresAt = now + lifetimes[kind];
  tx.insert(tokens)
    .values({ id: newId(), kind, hash: hashSecret(secret), userId, createdAt: now, expiresAt })
    .run();
  return { secret, expiresAt };
}

/** A link's row, while it can be used. @throws RequestError 410 otherwise */
export function findToken(tx: Queryable, secret: string, now: number) {
  const row = tx
    .select()
    .from(tokens)
    .where(eq(tokens.hash, hashSecret(secret)))
    .get();
  if (!row) throw gone('This link is not known here. Ask for a new one.');
  if (row.usedAt !== null) throw gone('This link was used already, or a newer one took its place. Ask for a new one.');
  if (row.expiresAt <= now) throw gone('This link has expired. Ask for a new one.');
  return row;
}

/** Uses a link up. */
export function useUpToken(tx: Queryable, tokenId: string, now: number): void {
  tx.update(tokens).set({ usedAt: now }).where(eq(tokens.id, tokenId)).run();
}

/** The address at which a link from a letter is used; the secret stands behind the #, which no server log sees. */
export function linkWith(origin: string, secret: string): string {
  return `${origin}/welcome#${secret}`;
}
