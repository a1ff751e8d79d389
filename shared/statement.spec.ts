import { describe, expect, it } from 'vitest';
import { namedGivens, splitStatement } from './statement';

describe('splitStatement', () => {
  it('opens a part at each line that begins with its label', () => {
    const split = splitStatement(
      [
        'A beam meets a splitter.',
        '(a) How many photons?',
        '(b) With what probability',
        '    is nothing recorded?',
      ].join('\n'),
    );
    expect(split).toEqual({
      stem: 'A beam meets a splitter.',
      parts: [
        { label: 'a', text: 'How many photons?', line: 1 },
        { label: 'b', text: 'With what probability\nis nothing recorded?', line: 2 },
      ],
    });
  });

  it('keeps a statement without parts whole', () => {
    expect(splitStatement('One.\n\nTwo (a) three.')).toEqual({ stem: 'One.\n\nTwo (a) three.', parts: [] });
  });

  it('lets a label stand alone on its line, and a statement begin with a part', () => {
    expect(splitStatement('(a)\nText.\n\nMore.\n(b)').parts).toEqual([
      { label: 'a', text: 'Text.\n\nMore.', line: 0 },
      { label: 'b', text: '', line: 4 },
    ]);
  });

  it('opens nothing inside a fenced block or a displayed formula', () => {
    const text = '```\n(a) code\n```\n$$\n(b) x\n$$\n(c) Real.';
    expect(splitStatement(text).parts.map((part) => part.label)).toEqual(['c']);
  });

  it('takes no other brackets for labels', () => {
    expect(splitStatement('(ab) no\n(1) no\n(A) no\n(a)no\n     (a) code').parts).toEqual([]);
  });

  it('keeps the indentation of what is nested deeper', () => {
    expect(splitStatement('(a) List:\n    - one\n      - two').parts[0]?.text).toBe('List:\n- one\n  - two');
  });

  it('reads line ends of any kind', () => {
    expect(splitStatement('Stem\r\n(a) One\r\n(b) Two').parts.map((part) => part.text)).toEqual(['One', 'Two']);
  });
});

describe('namedGivens', () => {
  it('lists each name once, in order', () => {
    expect(namedGivens('$T = \\val{T}$, \\val{nbar} and \\val{T}; \\val{1} is none')).toEqual(['T', 'nbar']);
  });
});
