import type { RandomSource } from '../server/keys/random-source';

/** The mistakes that simulated students make, and what is no mistake. */
export const mistakes = [
  'none',
  'slip',
  'twice',
  'half',
  'sign',
  'square root',
  'too coarse',
  'power of ten',
  'unreadable',
  'nothing',
] as const;
export type Mistake = (typeof mistakes)[number];

/** What one simulated student writes for one part. */
export interface SimulatedAnswer {
  readonly mistake: Mistake;
  /** Which slip, where it is one. */
  readonly slip?: number;
  readonly text: string;
}

/** Shares of a hundred, for a student of middling ability. */
const shares: readonly (readonly [Mistake, number])[] = [
  ['slip', 17],
  ['twice', 8],
  ['half', 4],
  ['sign', 2],
  ['square root', 4],
  ['too coarse', 4],
  ['power of ten', 2],
  ['unreadable', 3],
  ['nothing', 4],
];

const unreadable = ['see page', 'about 1/', '0.3 or 0.4', 'P(n) =', '3,,2', 'n bar'];

/**
 * What a student writes who is after a certain value.
 *
 * @param source decides everything
 * @param ability 0 (makes every mistake twice as often) to 1 (makes none)
 * @param key the value that is right, given what the student found before
 * @param slips values of the anticipated wrong answers
 */
export function simulateAnswer(
  source: RandomSource,
  ability: number,
  key: number,
  slips: readonly number[],
): SimulatedAnswer {
  const mistake = drawMistake(source, ability);
  const write = (value: number) => written(source, value);
  switch (mistake) {
    case 'slip': {
      const slip = slips.length > 0 ? source.below(slips.length) : -1;
      const value = slips[slip];
      return value === undefined ? { mistake: 'none', text: write(key) } : { mistake, slip, text: write(value) };
    }
    case 'twice':
      return { mistake, text: write(2 * key) };
    case 'half':
      return { mistake, text: write(key / 2) };
    case 'sign':
      return { mistake, text: write(-key) };
    case 'square root':
      return { mistake, text: write(Math.sqrt(Math.abs(key))) };
    case 'power of ten':
      return { mistake, text: write(key * (source.below(2) === 0 ? 10 : 0.1)) };
    case 'too coarse':
      return { mistake, text: key.toPrecision(1) };
    case 'unreadable':
      return { mistake, text: unreadable[source.below(unreadable.length)] ?? '' };
    case 'nothing':
      return { mistake, text: '' };
    case 'none':
      return { mistake, text: write(key) };
  }
}

function drawMistake(source: RandomSource, ability: number): Mistake {
  let drawn = source.below(10_000) / 100;
  for (const [mistake, share] of shares) {
    drawn -= share * 2 * (1 - ability);
    if (drawn < 0) return mistake;
  }
  return 'none';
}

/** A number as people write it: three to five figures, now and then with a power of ten or a decimal comma. */
function written(source: RandomSource, value: number): string {
  const figures = 3 + source.below(3);
  const plain = Number(value.toPrecision(figures));
  const magnitude = Math.abs(plain);
  const style = source.below(12);
  if (style === 0 && magnitude > 0) return plain.toExponential(figures - 1).replace('e+', 'e');
  if (style === 1 && magnitude < 1) return String(plain).replace('.', ',');
  if (style === 2 && magnitude > 0 && magnitude < 0.1) {
    const [mantissa, exponent] = plain.toExponential(figures - 1).split('e');
    return `${mantissa ?? ''} x 10^${exponent ?? ''}`;
  }
  return String(plain);
}
