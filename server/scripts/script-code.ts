import { randomInt } from 'node:crypto';

/** Digits and capitals that nobody mistakes for another; without vowels, so that no code is a word. */
const alphabet = '234679CDFHJKMNPQRTVWXY';

const codeLength = 4;

/**
 * A script's code: four characters drawn at random, so that it tells nothing of whose script it is.
 *
 * @param taken codes of the same set
 */
export function drawScriptCode(taken: ReadonlySet<string>): string {
  // Past half of all codes the draw would take long; a set has a few hundred scripts.
  if (taken.size > alphabet.length ** codeLength / 2) throw new Error('There are too few script codes for this set.');
  for (;;) {
    const code = Array.from({ length: codeLength }, () => alphabet.charAt(randomInt(alphabet.length))).join('');
    if (!taken.has(code)) return code;
  }
}
