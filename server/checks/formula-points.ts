import type { VariableRange } from '@shared/answer-forms';

/** How many points a formula is compared at, and how many are drawn in case some must be redrawn. */
export const comparedPoints = 40;
export const drawnPoints = 160;

/** Seed of a name, so that a variable's values depend neither on its order nor on the other variables (FNV-1a). */
function seedOf(name: string): number {
  let hash = 0x811c9dc5;
  for (const character of name) hash = Math.imul(hash ^ (character.codePointAt(0) ?? 0), 0x01000193);
  return hash >>> 0;
}

/** Uniform numbers in (0, 1), never the ends (mulberry32). */
function uniform(seed: number): () => number {
  let state = seed;
  return () => {
    state = (state + 0x6d2b79f5) >>> 0;
    let mixed = Math.imul(state ^ (state >>> 15), 1 | state);
    mixed = (mixed + Math.imul(mixed ^ (mixed >>> 7), 61 | mixed)) ^ mixed;
    return (((mixed ^ (mixed >>> 14)) >>> 0) + 0.5) / 4294967296;
  };
}

/**
 * The points at which a formula is compared, the same for everyone: drawn from the inside of the variables' ranges.
 * The first 40 count; the rest stand in for points where both sides are undefined.
 */
export function formulaPoints(
  variables: Readonly<Record<string, VariableRange>>,
): readonly Readonly<Record<string, number>>[] {
  const draws = Object.entries(variables).map(([name, range]) => {
    const next = uniform(seedOf(name));
    const draw = Array.isArray(range)
      ? () => range[0] + (range[1] - range[0]) * next()
      : () => range.integers[0] + Math.floor((range.integers[1] - range.integers[0] + 1) * next());
    return { name, draw };
  });
  return Array.from({ length: drawnPoints }, () => Object.fromEntries(draws.map(({ name, draw }) => [name, draw()])));
}
