import { ordinalOf } from './answer-card';
import { printValue } from './print-value';

describe('the light table', () => {
  it.each([
    [1, '1st'],
    [2, '2nd'],
    [3, '3rd'],
    [11, '11th'],
    [12, '12th'],
    [22, '22nd'],
    [113, '113th'],
  ])('counts %i as %s', (number, words) => {
    expect(ordinalOf(number)).toBe(words);
  });

  it('prints whatever a key can be', () => {
    expect(printValue(0.203008)).toBe('0.203008');
    expect(printValue([0.1, 0.9])).toBe('[0.1, 0.9]');
    expect(printValue({ re: 1, im: -2 })).toBe('1 − 2 i');
    expect(printValue('a')).toBe('a');
  });
});
