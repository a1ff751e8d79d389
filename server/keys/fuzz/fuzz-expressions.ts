import { seededSource, type RandomSource } from './seeded-source';
import { keySignatures } from '../signatures';

const snippets = [
  ...[
    'nbar',
    'eta',
    'alpha',
    'i',
    'pi',
    'e',
    '0',
    '1',
    '2',
    '-1',
    '0.5',
    '1e-9',
    '1e9',
    '1e300',
    '3.7',
    '400',
    '16383',
  ],
  ...['kg', 'MHz', 'rad', 'nm', 'K', 'constructor', '__proto__', 'this', 'process', 'evaluate', 'import', 'NaN'],
  ...[
    '+',
    '-',
    '*',
    '/',
    '^',
    '!',
    ',',
    '(',
    ')',
    '[',
    ']',
    '?',
    ':',
    '<',
    '==',
    '=',
    ';',
    '.',
    '"',
    "'",
    '{',
    '}',
    'to',
  ],
];

const pick = <T>(source: RandomSource, items: readonly T[]): T => items[source.below(items.length)] as T;

/** A random tree of calls, mostly of the right kinds, sometimes not. */
function expression(source: RandomSource, depth: number): string {
  const choice = source.below(depth <= 0 ? 3 : 9);
  if (choice < 2) return pick(source, snippets.slice(0, 17));
  if (choice === 2) return String(source.below(40) / 8);
  if (choice < 7) {
    const { signature, name } = pick(source, keySignatures);
    const inner = signature.slice(name.length + 1, -1);
    const count = inner === '' ? 0 : inner.split(',').length;
    const given = Math.max(0, count - (source.below(5) === 0 ? 1 : 0) + (source.below(25) === 0 ? 1 : 0));
    return `${name}(${Array.from({ length: given }, () => expression(source, depth - 1)).join(', ')})`;
  }
  if (choice === 7)
    return `[${Array.from({ length: source.below(4) }, () => expression(source, depth - 1)).join(', ')}]`;
  const operator = pick(source, ['+', '-', '*', '/', '^', ' < ', ' ']);
  return `(${expression(source, depth - 1)}${operator}${expression(source, depth - 1)})`;
}

/** Breaks an expression in one to three places. */
function mutated(source: RandomSource, text: string): string {
  let result = text;
  for (let times = 1 + source.below(3); times > 0; times -= 1) {
    const at = source.below(result.length + 1);
    const gone = source.below(4);
    result = result.slice(0, at) + (source.below(2) === 0 ? pick(source, snippets) : '') + result.slice(at + gone);
  }
  return result;
}

/** Random and mutated expressions, the same for the same seed. */
export function* fuzzExpressions(seed: number, count: number): Generator<string> {
  const source = seededSource(seed);
  for (let made = 0; made < count; made += 1) {
    const text = expression(source, 1 + source.below(4));
    yield source.below(3) === 0 ? mutated(source, text) : text;
  }
}
