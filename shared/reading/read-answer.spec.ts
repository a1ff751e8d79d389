import { describe, expect, it } from 'vitest';
import { readAnswer } from './read-answer';
import type { AnswerField } from './reading';

const complex = (text: string) => readAnswer(text, { form: 'complex' });
const list = (text: string) => readAnswer(text, { form: 'list' });
const distribution = (text: string) => readAnswer(text, { form: 'distribution' });
const matrix = (text: string) => readAnswer(text, { form: 'matrix' });
const choice = (text: string) => readAnswer(text, { form: 'choice', labels: ['a', 'b', 'C'], several: true });

describe('reading a complex number', () => {
  it.each([
    ['1 + 2i', 1, 2],
    ['1+2 i', 1, 2],
    ['i', 0, 1],
    ['-i/sqrt(2)', 0, -Math.SQRT1_2],
    ['2*exp(i*pi/4)', Math.SQRT2, Math.SQRT2],
    ['2 e^{i pi/4}', Math.SQRT2, Math.SQRT2],
    ['2e^(iπ/4)', Math.SQRT2, Math.SQRT2],
    ['i*exp(-i*pi/4)', Math.SQRT1_2, Math.SQRT1_2],
    ['0,5 - 0,5i', 0.5, -0.5],
    ['z = 3', 3, 0],
    ['sqrt(-4)', 0, 2],
    ['conj(1+i)', 1, -1],
  ])('reads %s', (text, re, im) => {
    const reading = complex(text);
    expect(reading.kind).toBe('complex');
    if (reading.kind !== 'complex') return;
    expect(reading.value.re).toBeCloseTo(re, 14);
    expect(reading.value.im).toBeCloseTo(im, 14);
  });

  it('explains that j is written i, and asks about a comma', () => {
    expect(complex('1+2j')).toMatchObject({ problem: '“j” is not known here; write i for the imaginary unit.', at: 4 });
    expect(complex('1,234 + i').kind).toBe('question');
  });
});

describe('reading a list', () => {
  it.each([
    ['[1, 2, 3.5]', [1, 2, 3.5]],
    ['(1, 2, 3.5)', [1, 2, 3.5]],
    ['{1; 2; 3.5}', [1, 2, 3.5]],
    ['1; 2; 3.5', [1, 2, 3.5]],
    ['1;2;3,5;', [1, 2, 3.5]],
    ['1\n2\n3.5', [1, 2, 3.5]],
    ['1, 2, 3.5', [1, 2, 3.5]],
    ['1,2,3.5', [1, 2, 3.5]],
    ['p = [1, 2, 3.5]', [1, 2, 3.5]],
    ['[1,234]', [1, 234]],
    ['1,2', [1.2]],
    ['7', [7]],
    ['(1+2)/3; 50%', [1, 0.5]],
  ])('reads %j', (text, entries) => {
    expect(list(text)).toMatchObject({ kind: 'list', entries: entries.map((re) => ({ re, im: 0 })) });
  });

  it('asks about an entry with an ambiguous comma', () => expect(list('1,234; 2').kind).toBe('question'));

  it.each([
    ['[1, 2', 'The bracket “[” is never closed.'],
    ['[]', 'There are no entries in the brackets.'],
    ['1;;2', 'An entry is missing here.'],
    ['1 2 3', 'Two numbers stand side by side; write × between them, or only one number.'],
  ])('says what is wrong with %s', (text, problem) =>
    expect(list(text)).toMatchObject({ kind: 'unreadable', problem }),
  );

  it('adds a distribution up, and takes no complex probability', () => {
    expect(distribution('0.51; 0.49; 0')).toMatchObject({ kind: 'list', note: '3 values, sum 1' });
    expect(distribution('0.5; i')).toMatchObject({ problem: 'Entry 2 is a complex number; probabilities are real.' });
  });
});

describe('reading a matrix', () => {
  it.each([
    '1, 2; 3, 4',
    '[1, 2; 3, 4]',
    '[[1, 2], [3, 4]]',
    '[1, 2], [3, 4]',
    '[[1,2][3,4]]',
    '((1, 2), (3, 4))',
    '{{1, 2}, {3, 4}}',
    'M = [[1, 2]; [3, 4]]',
    '1, 2\n3, 4',
    '\\begin{pmatrix} 1 & 2 \\\\ 3 & 4 \\end{pmatrix}',
  ])('reads %j', (text) => {
    const rows = [
      [1, 2],
      [3, 4],
    ].map((row) => row.map((re) => ({ re, im: 0 })));
    expect(matrix(text)).toMatchObject({ kind: 'matrix', rows, note: '2 × 2', readAs: '1, 2; 3, 4' });
  });

  it('keeps brackets that belong to an entry', () => {
    expect(matrix('(1+i)/2, 0; 0, 1')).toMatchObject({ readAs: '0.5 + 0.5 i, 0; 0, 1' });
  });

  it.each([
    ['1, 2; 3', 'Row 2 has 1 entry, and row 1 has 2.'],
    ['0.625, x; 0, 0', '“x” is neither a unit nor a name that is known here.'],
    ['[[1, 2], 3]', 'Rows and single entries are mixed.'],
    ['1,, 2', 'An entry is missing here.'],
  ])('says what is wrong with %s', (text, problem) =>
    expect(matrix(text)).toMatchObject({ kind: 'unreadable', problem }),
  );
});

describe('reading a choice', () => {
  it.each([
    ['b', ['b']],
    ['B', ['b']],
    ['c, A', ['a', 'C']],
    ['(a)', ['a']],
    ['a) b', ['a', 'b']],
    ['a, a', ['a']],
  ])('reads %s', (text, labels) => expect(choice(text)).toMatchObject({ kind: 'choice', labels }));

  it('names the options where a label is unknown', () => {
    expect(choice('e')).toMatchObject({ kind: 'unreadable', problem: '“e” is none of the options a, b, C.', at: 1 });
    expect(choice(',')).toMatchObject({ kind: 'unreadable' });
  });
});

it('reads every form of a blank as empty, and a worked part as it is', () => {
  const fields: readonly AnswerField[] = [{ form: 'list' }, { form: 'state' }, { form: 'worked' }];
  for (const field of fields) expect(readAnswer('  ', field)).toEqual({ kind: 'empty' });
  expect(readAnswer(' see page ', { form: 'worked' })).toMatchObject({ kind: 'worked', readAs: 'see page' });
});
