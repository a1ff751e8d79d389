import type { DraftAnswer } from '@shared/problem-draft';
import { readTypedNumber } from '@shared/typed-number';
import { rightBand } from './right-band';

interface Complex {
  readonly re: number;
  readonly im: number;
}

function complexOf(value: unknown): Complex | null {
  if (typeof value === 'number') return { re: value, im: 0 };
  if (typeof value === 'object' && value !== null && 're' in value && 'im' in value) {
    const { re, im } = value;
    if (typeof re === 'number' && typeof im === 'number') return { re, im };
  }
  return null;
}

/**
 * Whether a value would pass as right where the key is another: entry by entry for lists and matrices, by total variation
 * for probabilities; states and formulas, of which only the words are known here, where they read the same.
 */
export function passesAsRight(key: unknown, value: unknown, answer: DraftAnswer): boolean {
  if (typeof key === 'string') return key === value;
  if (answer.form === 'distribution') return isWithinVariation(key, value, answer);
  if (Array.isArray(key)) {
    const [entries, others]: [readonly unknown[], unknown] = [key, value];
    if (!Array.isArray(others) || others.length !== entries.length) return false;
    return entries.every((entry, index) => passesAsRight(entry, others[index], answer));
  }
  const [right, given] = [complexOf(key), complexOf(value)];
  if (!right || !given) return false;
  const size = Math.hypot(right.re, right.im);
  const band = rightBand(size, answer.tolerance);
  if (!band) return false;
  const distance =
    answer.form === 'complex' && answer.upToPhase
      ? Math.abs(Math.hypot(given.re, given.im) - size)
      : Math.hypot(given.re - right.re, given.im - right.im);
  return distance <= band.high - size;
}

function isWithinVariation(key: unknown, value: unknown, answer: DraftAnswer): boolean {
  const most = readTypedNumber(answer.tolerance.totalVariation);
  if (most === undefined || !Array.isArray(key) || !Array.isArray(value) || key.length !== value.length) return false;
  const [entries, others]: [readonly unknown[], readonly unknown[]] = [key, value];
  const sum = entries.reduce<number>(
    (total, entry, index) => total + Math.abs(Number(entry) - Number(others[index])),
    0,
  );
  return sum / 2 <= most;
}
