import type { VariantKey } from '@shared/checks';
import type { Convention } from '@shared/primitives';
import type { GivenValues } from '@shared/variants';

/** A value as expressions get it: a number, a complex number, a list, or a number with its unit as text. */
export type ScopeValue = number | string | { readonly re: number; readonly im: number } | readonly unknown[];

/** The names that an expression may use besides the language's own. */
export type Scope = Readonly<Record<string, ScopeValue>>;

/** An expression to be evaluated. */
export interface KeyRequest {
  readonly expression: string;
  readonly givens: Scope;
  readonly convention: Convention;
}

/** What an expression came to, or why it has no value and at which character. */
export type KeyOutcome =
  { readonly key: VariantKey; readonly fault?: undefined } | { readonly key?: undefined; readonly fault: KeyFault };

/** Why an expression has no value. */
export interface KeyFault {
  readonly message: string;
  /** The character, from 0. */
  readonly position?: number;
  readonly length?: number;
}

/** The givens of a variant as expressions get them: with their units. */
export function scopeOf(givens: GivenValues): Scope {
  return Object.fromEntries(
    Object.entries(givens).map(([name, given]) => [name, withUnit(given.value, given.unit)] as const),
  );
}

/** A key's value as a later part's expression gets it. */
export function scopeValueOf(key: Pick<VariantKey, 'value' | 'unit'>): ScopeValue {
  return typeof key.value === 'number' ? withUnit(key.value, key.unit) : (key.value as ScopeValue);
}

function withUnit(value: number, unit: string | undefined): ScopeValue {
  return unit === undefined ? value : `${String(value)} ${unit}`;
}
