import type { VariantKey } from '@shared/checks';
import type { GivenValues } from '@shared/variants';
import type { GivenValue, KeyResult, WrittenKey } from '../keys';

export type { KeyFault, KeyOutcome, KeyRequest } from '../keys';

/** The names that an expression may use besides the language's own. */
export type Scope = Readonly<Record<string, GivenValue>>;

/** The givens of a variant as expressions get them: with their units. */
export function scopeOf(givens: GivenValues): Scope {
  return Object.fromEntries(
    Object.entries(givens).map(([name, given]) => [name, given.counts ?? withUnit(given.value, given.unit)] as const),
  );
}

/** A key's value as a later part's expression gets it; undefined for a state or a formula, which no expression can name. */
export function scopeValueOf(key: Pick<KeyResult | WrittenKey, 'value' | 'unit'>): GivenValue | undefined {
  if (typeof key.value === 'string') return undefined;
  return typeof key.value === 'number' ? withUnit(key.value, key.unit) : key.value;
}

/** A key as it is kept and shown: of a state or a formula in words, without what answers are compared with. */
export function presentKey(key: KeyResult | WrittenKey): VariantKey {
  if (typeof key.value !== 'string') return { ...key, value: key.value };
  const { value, method, dimension, agreesTo } = key;
  return {
    value,
    method,
    ...(dimension === undefined ? {} : { dimension }),
    ...(agreesTo === undefined ? {} : { agreesTo }),
  };
}

function withUnit(value: number, unit: string | undefined): GivenValue {
  return unit === undefined ? value : `${String(value)} ${unit}`;
}
