import type { VariantKey } from '@shared/checks';
import type { GivenValues } from '@shared/variants';
import type { GivenValue } from '../keys';

export type { KeyFault, KeyOutcome, KeyRequest } from '../keys';

/** The names that an expression may use besides the language's own. */
export type Scope = Readonly<Record<string, GivenValue>>;

/** The givens of a variant as expressions get them: with their units. */
export function scopeOf(givens: GivenValues): Scope {
  return Object.fromEntries(
    Object.entries(givens).map(([name, given]) => [name, withUnit(given.value, given.unit)] as const),
  );
}

/** A key's value as a later part's expression gets it. */
export function scopeValueOf(key: Pick<VariantKey, 'value' | 'unit'>): GivenValue {
  return typeof key.value === 'number' ? withUnit(key.value, key.unit) : key.value;
}

function withUnit(value: number, unit: string | undefined): GivenValue {
  return unit === undefined ? value : `${String(value)} ${unit}`;
}
