import type { KeyOutcome } from '../key-task';
import type { PlainValue } from '../value';

/** What is wrong with an outcome; null where nothing is. Every value is finite, and every fault is a sentence. */
export function objectionTo(outcome: KeyOutcome): string | null {
  if (outcome.key)
    return typeof outcome.key.value === 'string' || isFinitePlain(outcome.key.value)
      ? null
      : 'a value that is not finite';
  const { message, position } = outcome.fault;
  if (message.length < 8) return `no sentence: ${message}`;
  if (/undefined|\[object|NaN|is not a function|Cannot read/.test(message.replace(/[“`].*?[”`]/g, '')))
    return `a sentence from the inside: ${message}`;
  return position === undefined || position >= 0 ? null : `a place before the beginning: ${message}`;
}

function isFinitePlain(value: PlainValue): boolean {
  if (typeof value === 'number') return Number.isFinite(value);
  return 're' in value ? Number.isFinite(value.re) && Number.isFinite(value.im) : value.every(isFinitePlain);
}
