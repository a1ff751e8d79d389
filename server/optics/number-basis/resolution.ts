import { DEFAULT_LOG_WEIGHT, levelsFor } from '../photon-bounds';
import type { State } from '../state';
import { StateMemo } from '../state-memo';

/** How finely a state is to be built. */
export interface Resolution {
  /** ln of the weight that may be left outside. */
  readonly logWeight: number;
  /** Levels that are wanted at least, for figures far out. */
  readonly least: number;
}

export const defaultResolution: Resolution = { logWeight: DEFAULT_LOG_WEIGHT, least: 1 };

/**
 * How finely a state is to be built that a displacement or squeezer then mixes over all numbers: an amplitude that is
 * left out shows in the result in proportion to itself, not to its square.
 */
export const beforeMixing = ({ logWeight }: Resolution): Resolution => ({ logWeight: 2 * logWeight, least: 1 });

/** The weight that may be hidden in a result by what was left outside before it was mixed. */
export const mixedIn = (outside: number): number => Math.sqrt(outside);

/** Levels of a state at a resolution, with the bound on the weight outside. */
export function resolve(
  state: State,
  { logWeight, least }: Resolution,
): { readonly levels: number; readonly outside: number } {
  // Entries that stand alone need no more levels than are asked for.
  if (logWeight >= 0) return { levels: least, outside: 0 };
  const { levels, outsideWeight } = levelsFor(state, logWeight);
  return { levels: Math.max(levels, least), outside: outsideWeight };
}

interface Built<Basis> extends Resolution {
  readonly basis: Basis;
}

/** Remembers what a state is in numbers, for each resolution that it was asked for. */
export function builtOnce<Basis>(
  build: (state: State, resolution: Resolution) => Basis,
): (state: State, resolution?: Resolution) => Basis {
  const memo = new StateMemo<Built<Basis>[]>();
  return (state, resolution = defaultResolution) => {
    const { logWeight, least } = resolution;
    let known = memo.get(state);
    const same = known?.find((built) => built.logWeight === logWeight && built.least === least);
    if (same !== undefined) return same.basis;
    const basis = build(state, resolution);
    known = memo.get(state);
    if (known === undefined) memo.set(state, (known = []));
    known.push({ logWeight, least, basis });
    return basis;
  };
}
