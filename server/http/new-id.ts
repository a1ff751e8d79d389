import { randomUUID } from 'node:crypto';

/** A new random identifier (UUIDv4): it tells neither time nor order. */
export function newId(): string {
  return randomUUID();
}
