import { describe, expect, it } from 'vitest';
import { linesOfPart, moveLine, placeOfLine, replaceLines } from './comment-place';

const text = (...lines: string[]) => lines.join('\n');

describe('moveLine', () => {
  it('keeps what stands before a change, and moves what stands after it', () => {
    expect(moveLine(text('a', 'b', 'c'), text('a', 'new', 'b', 'c'), 1)).toBe(1);
    expect(moveLine(text('a', 'b', 'c'), text('a', 'new', 'b', 'c'), 3)).toBe(4);
    expect(moveLine(text('a', 'b', 'c'), text('a', 'c'), 3)).toBe(2);
  });

  it('follows the words of a line within a change', () => {
    expect(moveLine(text('a', 'b', 'c', 'd'), text('a', 'C', 'b', 'D', 'd'), 2)).toBe(3);
  });

  it('stays at a line that was reworded, and near one that is gone', () => {
    expect(moveLine(text('a', 'b', 'c'), text('a', 'b, with words', 'c'), 2)).toBe(2);
    expect(moveLine(text('a', 'b', 'c'), text('a', 'c'), 2)).toBe(2);
    expect(moveLine(text('a', 'b'), '', 2)).toBe(1);
  });

  it('takes the nearest of equal lines, and never a blank for another blank', () => {
    expect(moveLine(text('x', 'b', 'y'), text('b', 'p', 'b', 'q'), 2)).toBe(1);
    expect(moveLine(text('x', '', 'y'), text('p', 'q', 'r', ''), 2)).toBe(2);
  });
});

describe('placeOfLine', () => {
  it('says whether a line reads as it did', () => {
    expect(placeOfLine(text('a', 'b'), { line: 2, text: 'b' })).toEqual({ line: 2, hasChanged: false });
    expect(placeOfLine(text('a', 'B'), { line: 2, text: 'b' })).toEqual({ line: 2, hasChanged: true });
    expect(placeOfLine('a', { line: 9, text: 'b' })).toEqual({ line: 1, hasChanged: true });
  });
});

describe('linesOfPart', () => {
  const statement = text('Stem.', '(a) One?', '    more', '', '(b) Two?');

  it('gives the lines of a part without the blank ones after it', () => {
    expect(linesOfPart(statement, 'a')).toEqual({ from: 1, to: 3, text: text('(a) One?', '    more') });
    expect(linesOfPart(statement, 'b')).toEqual({ from: 4, to: 5, text: '(b) Two?' });
    expect(linesOfPart(statement, 'c')).toBeNull();
  });

  it('replaces lines with as many as are wanted', () => {
    expect(replaceLines(statement, 1, 3, '(a) Which?')).toBe(text('Stem.', '(a) Which?', '', '(b) Two?'));
  });
});
