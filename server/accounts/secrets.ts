import { createHash, randomBytes } from 'node:crypto';
import { hash, verify } from '@node-rs/argon2';

/**
 * Argon2id at OWASP's minimum of 19 MiB, two passes, one lane (OWASP Password Storage Cheat Sheet). `2` is Argon2id; the
 * library's enum cannot be used with isolated modules.
 */
const argon2id = { algorithm: 2, memoryCost: 19_456, timeCost: 2, parallelism: 1 } as const;

/** Hashes a password in Argon2's own notation. */
export function hashPassword(password: string): Promise<string> {
  return hash(password.normalize('NFKC'), argon2id);
}

/** Verified against when there is no such account, so that an unknown address takes as long as a wrong password. */
const decoy = hashPassword(randomBytes(24).toString('base64'));

/** Whether a password fits a hash; takes as long where there is no hash. */
export async function passwordFits(passwordHash: string | null, password: string): Promise<boolean> {
  const fits = await verify(passwordHash ?? (await decoy), password.normalize('NFKC'));
  return passwordHash !== null && fits;
}

/** A secret for a link or a cookie: 256 random bits in base64url. */
export function newSecret(): string {
  return randomBytes(32).toString('base64url');
}

/** How secrets are stored. They are random and long, so a plain SHA-256 cannot be turned back. */
export function hashSecret(secret: string): string {
  return createHash('sha256').update(secret).digest('hex');
}
