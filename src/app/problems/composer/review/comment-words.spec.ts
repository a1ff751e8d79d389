import { describe, expect, it } from 'vitest';
import { emptyDraft, emptyPart } from '@shared/problem-draft';
import { defaultConvention } from '@shared/primitives';
import type { ProblemComment } from '@shared/review';
import { initialsOf, notedLines, placeOfComment } from './comment-words';

const part = emptyPart('p', 'c');
const draft = { ...emptyDraft('A splitter', defaultConvention), statement: 'one\ntwo', parts: [part] };
const line = { kind: 'line', line: 2, text: 'two' } as const;

describe('placeOfComment', () => {
  it('follows a line while the author types, and says when it reads otherwise', () => {
    expect(placeOfComment(line, draft.statement, draft)).toEqual({ words: 'line 2', line: 2, tab: null, change: '' });
    const typed = { ...draft, statement: 'zero\none\ntwo' };
    expect(placeOfComment(line, draft.statement, typed)).toMatchObject({ words: 'line 3', change: '' });
    const reworded = { ...draft, statement: 'one\nboth' };
    expect(placeOfComment(line, draft.statement, reworded).change).toBe('The line has changed since.');
  });

  it('names parts, keys and criteria, and says when they are gone', () => {
    const at = (anchor: Parameters<typeof placeOfComment>[0]) => placeOfComment(anchor, draft.statement, draft);
    expect(at({ kind: 'part', partId: 'p' })).toMatchObject({ words: '(a)', tab: 'a' });
    expect(at({ kind: 'key', partId: 'p' }).words).toBe('(a) key');
    expect(at({ kind: 'criterion', partId: 'p', criterionId: 'c' }).words).toBe('(a) A1');
    expect(at({ kind: 'criterion', partId: 'p', criterionId: 'x' }).change).toBe('The criterion is gone since.');
    expect(at({ kind: 'key', partId: 'x' }).change).toBe('The part is gone since.');
  });
});

describe('notedLines', () => {
  const comment = (id: string, name: string, settled = false): ProblemComment => ({
    id,
    anchor: line,
    by: { id: name, name },
    at: 0,
    text: '',
    suggestion: null,
    settled: settled ? { by: { id: name, name }, at: 0 } : null,
    replies: [],
  });
  const place = placeOfComment(line, draft.statement, draft);

  it('gathers initials at a line, without settled comments', () => {
    const comments = [comment('1', 'Anselm Voss'), comment('2', 'Mei Arden'), comment('3', 'Ada Quist', true)];
    expect(
      notedLines(
        comments.map((each) => ({ comment: each, place })),
        '2',
      ),
    ).toEqual([{ line: 2, initials: 'AV MA', isShown: true }]);
    expect(initialsOf('Plato')).toBe('PL');
    expect(initialsOf('Ida van der Berg')).toBe('IB');
  });
});
