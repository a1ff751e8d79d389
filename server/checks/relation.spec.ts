import { answerSpecification } from '@shared/answer-forms';
import { describe, expect, it } from 'vitest';
import { checkAnswer, type PartKeys } from './check-answer';

function relation(key: number, text: string, more: Partial<PartKeys> & { readonly unit?: string } = {}) {
  const { unit, ...keys } = more;
  const part = answerSpecification.parse({
    form: 'number',
    key: 'k',
    tolerance: { relative: 0.005 },
    ...(unit ? { unit } : {}),
  });
  if (part.form !== 'number') throw new Error('Not a number.');
  return checkAnswer({ part, text, keys: { key: { value: key }, ...keys } }).relation;
}

describe('the relation of an answer to its key', () => {
  const key = 0.3713;
  it.each([
    [key, 'equal to the key', undefined],
    [-key, 'the key with the other sign', -1],
    [2 * key, 'twice the key', 2],
    [key / 2, 'half the key', 0.5],
    [Math.SQRT2 * key, '√2 times the key', Math.SQRT2],
    [key / Math.SQRT2, 'the key over √2', Math.SQRT1_2],
    [2 * Math.PI * key, '2π times the key', 2 * Math.PI],
    [key / (2 * Math.PI), 'the key over 2π', 1 / (2 * Math.PI)],
    [10 * key, 'ten times the key', 10],
    [1e-3 * key, '10⁻³ times the key', 1e-3],
    [1e6 * key, '10⁶ times the key', 1e6],
    [1 - key, 'one minus the key', undefined],
    [key ** 2, 'the square of the key', undefined],
    [Math.sqrt(key), 'the square root of the key, an amplitude for an intensity', undefined],
    [1 / key, 'the reciprocal of the key', undefined],
    [(key * 180) / Math.PI, 'the key in degrees instead of radians', 180 / Math.PI],
    [4 * key, 'four times the key', 4],
    [0.8117, 'no known relation', undefined],
  ])('%d', (answer, name, factor) => {
    expect(relation(key, answer.toPrecision(4))).toEqual(factor === undefined ? { name } : { name, factor });
  });

  it('names the key of another part', () => {
    expect(relation(0.3713, '7.53', { others: [{ label: 'a', key: { value: 7.53 } }] })).toEqual({
      name: 'the key of part (a)',
    });
  });

  it('names units that do not fit', () => {
    expect(relation(3, '3 Hz', { unit: 'rad/s' }).name).toBe('hertz in place of radians per second');
    expect(relation(3, '3 rad/s', { unit: 'Hz' }).name).toBe('radians per second in place of hertz');
    expect(relation(3, '3 m', { unit: 'Hz' }).name).toBe('a unit of another dimension');
    expect(relation(3, '3 m').name).toBe('a unit where none is asked for');
    expect(relation(3, '3e6 kHz', { unit: 'MHz' }).name).toBe('10³ times the key');
  });

  it('does not invent a relation for a key of zero or one', () => {
    expect(relation(0, '0.2').name).toBe('no known relation');
    expect(relation(1, '0.7').name).toBe('no known relation');
  });
});
