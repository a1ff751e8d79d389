import { dictionary } from '@zxcvbn-ts/language-common';

const common = new Set(dictionary['passwords-common']);

/**
 * Whether a password is on the list of common ones, or is made of one of them (or of any single piece) said over and
 * over, as `passwordpassword` and `aaaaaaaaaaaaaaa` are. The list is that of the zxcvbn project, some 49,000 entries.
 */
export function isCommonPassword(password: string): boolean {
  const plain = password.toLowerCase();
  if (common.has(plain) || common.has(plain.replace(/[\d\W_]+$/, ''))) return true;
  for (let length = 1; length <= plain.length / 2; length += 1) {
    const piece = plain.slice(0, length);
    if (!piece.repeat(Math.ceil(plain.length / length)).startsWith(plain)) continue;
    return length < 8 || common.has(piece);
  }
  return false;
}
