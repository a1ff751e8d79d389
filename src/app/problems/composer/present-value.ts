import type { SampledKey } from '@shared/problem-routes';

/** A key that has a value. */
export type ValuedKey = Extract<SampledKey, { readonly method: string }>;

/** The key, where it has a value. */
export function valued(key: SampledKey | null | undefined): ValuedKey | null {
  return key && 'method' in key ? key : null;
}

/** What a key came to; null where it has no value. */
export function valueOf(key: SampledKey | null | undefined): unknown {
  return valued(key)?.value ?? null;
}

/** The number that a key came to; null for anything else. */
export function numberOf(key: SampledKey | null | undefined): number | null {
  const value = valued(key)?.value;
  return typeof value === 'number' ? value : null;
}

/**
 * A value as text: numbers to a number of significant figures, complex numbers as `a + bi`, lists in brackets.
 *
 * @param figures significant figures
 */
export function textOfValue(value: unknown, figures: number): string {
  if (typeof value === 'number') return textOfNumber(value, figures);
  if (Array.isArray(value)) {
    const entries: readonly unknown[] = value;
    const few = entries.slice(0, 6).map((entry) => textOfValue(entry, Math.min(figures, 4)));
    return `[${few.join(', ')}${entries.length > 6 ? ', …' : ''}]`;
  }
  if (typeof value === 'object' && value !== null && 're' in value && 'im' in value) {
    const { re, im } = value as { re: number; im: number };
    const shorter = Math.min(figures, 7);
    if (re === 0) return `${textOfNumber(im, shorter)}i`;
    return `${textOfNumber(re, shorter)} ${im < 0 ? '−' : '+'} ${textOfNumber(Math.abs(im), shorter)}i`;
  }
  return String(value);
}

function textOfNumber(value: number, figures: number): string {
  if (value === 0) return '0';
  const size = Math.abs(value);
  if (size >= 1e6 || size < 1e-4) {
    const [digits = '', exponent = ''] = value.toExponential(Math.max(0, figures - 4)).split('e');
    return `${minus(digits.replace(/\.?0+$/, ''))}e${minus(exponent.replace('+', ''))}`;
  }
  // Whole numbers stay whole; other numbers show all their figures, so that columns line up.
  return minus(Number.isInteger(value) ? String(value) : value.toPrecision(figures));
}

function minus(text: string): string {
  return text.replace('-', '−');
}
