import { describe, expect, it } from 'vitest';
import {
  emptyDraft,
  emptyGiven,
  emptyOption,
  emptyPart,
  emptySlip,
  emptyVariable,
  type DraftAnswer,
  type DraftVariable,
  type ProblemDraft,
} from './problem-draft';
import { defaultConvention } from './primitives';
import { draftOf, readDraft } from './read-draft';
import { readTypedList, readTypedNumber, typedDecimals } from './typed-number';

const ids = ['8f9c1b6e-0a1d-4a67-9c11-0d3a2c7b5e10', '1d2f3a4b-5c6d-4e7f-8a9b-0c1d2e3f4a5b'] as const;

function buildDraft(overrides: Partial<ProblemDraft> = {}): ProblemDraft {
  const part = emptyPart(...ids);
  return {
    ...emptyDraft('A splitter', defaultConvention),
    statement: '$\\bar n = \\val{nbar}$\n(a) How many?',
    tags: 'splitters, counting',
    givens: [{ ...emptyGiven('nbar'), symbol: '\\bar n', low: '2.0', high: '8.0', step: '0,5' }],
    parts: [
      {
        ...part,
        answer: {
          ...part.answer,
          key: 'nbar/2',
          tolerance: { ...part.answer.tolerance, relative: '2%' },
          slips: [{ ...emptySlip(), name: 'all', expression: 'nbar', feedback: 'Half is lost.', fraction: '1/2' }],
        },
      },
    ],
    ...overrides,
  };
}

describe('readDraft', () => {
  it('makes content of a draft that is in order', () => {
    const { content, faults } = readDraft(buildDraft());
    expect(faults).toEqual([]);
    expect(content).toMatchObject({
      tags: ['splitters', 'counting'],
      givens: [{ kind: 'uniform', low: 2, high: 8, step: 0.5 }],
      parts: [{ answer: { form: 'number', tolerance: { relative: 0.02 }, slips: [{ fraction: 0.5 }] } }],
    });
  });

  it('reads the draft of a content as that content', () => {
    const { content } = readDraft(buildDraft());
    expect(readDraft(draftOf(content!)).content).toEqual(content);
  });

  it('takes a fixed value’s decimals from how it is typed', () => {
    const given = { ...emptyGiven('nbar'), kind: 'fixed' as const, value: '4.0' };
    expect(readDraft(buildDraft({ givens: [given] })).content?.givens[0]).toMatchObject({ value: 4, decimals: 1 });
  });

  it('names what is no number at its field, once', () => {
    const given = { ...emptyGiven('nbar'), low: 'two', high: '8', step: '0.5' };
    expect(readDraft(buildDraft({ givens: [given] })).faults).toEqual([
      { path: ['givens', 0, 'low'], message: '“two” is not a number.' },
    ]);
  });

  it.each([
    ['high', { low: '8', high: '2', step: '1' }, 'lies below'],
    ['step', { low: '0', high: '1', step: '0.3' }, 'the last would be 0.9'],
    ['step', { low: '0', high: '1', step: '1e-9' }, 'larger step'],
    ['step', { low: '0', high: '1', step: '0' }, 'above 0'],
    ['low', { low: '', high: '1', step: '1' }, 'Give a number'],
  ])('finds a range that does not fit at %s', (field, range, words) => {
    const [fault] = readDraft(buildDraft({ givens: [{ ...emptyGiven('nbar'), ...range }] })).faults;
    expect(fault?.path).toEqual(['givens', 0, field]);
    expect(fault?.message).toContain(words);
  });

  it('finds names that the statement uses and nobody gives, with their place', () => {
    const [fault] = readDraft(buildDraft({ statement: 'For $\\val{eta}$ …' })).faults;
    expect(fault).toEqual({ path: ['statement'], message: 'No given is called “eta”.', position: 5, length: 9 });
  });

  it('finds parts without a line, and lines without a part', () => {
    const two = buildDraft();
    const messages = (statement: string, parts = two.parts) =>
      readDraft(buildDraft({ statement, parts, givens: [] })).faults.map((fault) => fault.message);
    expect(messages('(a) One.\n(b) Two.')[0]).toContain('there is no such part');
    expect(messages('(b) Two.')[0]).toContain('(a) comes next');
    expect(messages('No letter.')).toEqual([]);
    expect(messages('(a) One.', [...two.parts, ...two.parts])[0]).toContain('No line begins with (b)');
  });

  it('refuses a key that uses its own or a later part', () => {
    const draft = buildDraft();
    draft.parts[0]!.answer.key = 'part_a + 1';
    expect(readDraft(draft).faults[0]).toMatchObject({ path: ['parts', 0, 'answer', 'key'], position: 0, length: 6 });
  });

  it('still yields the givens that are in order', () => {
    const read = readDraft(buildDraft({ givens: [emptyGiven('broken'), buildDraft().givens[0]!] }));
    expect(read.content).toBeUndefined();
    expect(read.givens.map(({ index, given }) => [index, given.name])).toEqual([[1, 'nbar']]);
  });
});

describe('answer forms', () => {
  const withAnswer = (answer: Partial<DraftAnswer>) => {
    const draft = buildDraft();
    return { ...draft, parts: [{ ...draft.parts[0]!, answer: { ...draft.parts[0]!.answer, slips: [], ...answer } }] };
  };
  const answerOf = (answer: Partial<DraftAnswer>) => readDraft(withAnswer(answer)).content?.parts[0]?.answer;
  const faultsOf = (answer: Partial<DraftAnswer>) =>
    readDraft(withAnswer(answer)).faults.map(({ path, message }) => [path.slice(3).join('.'), message]);
  const variable = (change: Partial<DraftVariable>): DraftVariable => ({ ...emptyVariable(), ...change });

  it('reads each form, and the draft of it as the same', () => {
    const forms: Partial<DraftAnswer>[] = [
      { form: 'complex', upToPhase: true },
      { form: 'list' },
      { form: 'matrix' },
      { form: 'distribution', tolerance: { ...buildDraft().parts[0]!.answer.tolerance, totalVariation: '2%' } },
      { form: 'state', minimumFidelity: '0.99' },
      {
        form: 'formula',
        variables: [
          variable({ name: 'kappa', low: '0', high: '2', symbol: '\\kappa', spellings: 'k, κ' }),
          variable({ name: 'n', low: '0', high: '5', integers: true }),
        ],
      },
      { form: 'choice', options: [emptyOption('A'), { label: 'B', text: 'thermal', correct: true }] },
      { form: 'worked' },
    ];
    for (const answer of forms) {
      const { content, faults } = readDraft(withAnswer(answer));
      expect(faults, answer.form).toEqual([]);
      expect(readDraft(draftOf(content!)).content, answer.form).toEqual(content);
    }
    expect(answerOf(forms[5]!)).toMatchObject({
      variables: { kappa: [0, 2], n: { integers: [0, 5] } },
      symbols: { kappa: { symbol: '\\kappa', spellings: ['k', 'κ'] } },
    });
    expect(answerOf(forms[6]!)).toMatchObject({ options: ['A', { label: 'B', text: 'thermal' }], correct: ['B'] });
  });

  it.each<[Partial<DraftAnswer>, string, string]>([
    [{ form: 'formula', variables: [variable({ name: 'x', high: '1' })] }, 'variables.0.low', 'lowest value of x'],
    [
      { form: 'formula', variables: [variable({ name: 'x', low: '2', high: '1' })] },
      'variables.0.high',
      'below its high',
    ],
    [
      { form: 'formula', variables: [variable({ name: '2x', low: '0', high: '1' })] },
      'variables.0.name',
      'by a letter',
    ],
    [{ form: 'formula', variables: [variable({ low: '0', high: '1' })] }, 'variables.0.name', 'Name the variable'],
    [{ form: 'formula', variables: [] }, 'variables', 'at least one variable'],
    [{ form: 'choice', options: [emptyOption('A'), emptyOption('B C')] }, 'options.1.label', 'no spaces'],
    [{ form: 'choice', options: [emptyOption('A'), emptyOption('B')] }, 'correct', 'Name the correct option'],
    [{ form: 'state', minimumFidelity: 'much' }, 'minimumFidelity', 'is not a number'],
    [{ form: 'state', minimumFidelity: '2' }, 'minimumFidelity', 'above 1'],
    [{ form: 'distribution' }, 'tolerance.totalVariation', 'must be a number'],
  ])('names what is wrong at its field: %j', (answer, path, words) => {
    const faults = faultsOf(answer);
    expect(faults.map(([at]) => at)).toContain(path);
    expect(faults.find(([at]) => at === path)?.[1]).toContain(words);
  });

  it('names a variable that is there twice', () => {
    const twice = [variable({ name: 'x', low: '0', high: '1' }), variable({ name: 'x', low: '0', high: '2' })];
    expect(faultsOf({ form: 'formula', variables: twice })).toEqual([
      ['variables.1.name', 'Another variable is called x already.'],
    ]);
  });

  it('lets no worked answer stand without a person, and keeps the box', () => {
    const draft = withAnswer({ form: 'worked' });
    expect(draft.parts[0]?.standsAlone).toContain('right');
    expect(readDraft(draft).content?.parts[0]?.standsAlone).toEqual(['unanswered']);
  });
});

describe('typed numbers', () => {
  it.each([
    ['0.5', 0.5],
    ['0,5', 0.5],
    ['−2', -2],
    ['1e-3', 0.001],
    ['2%', 0.02],
    ['0,1 %', 0.001],
    ['7%', 0.07],
    ['1/2', 0.5],
    ['1 of 4', 0.25],
    ['.5', 0.5],
  ])('reads %s', (text, value) => {
    expect(readTypedNumber(text)).toBe(value);
  });

  it.each(['', 'two', '1/0', '1..2', '--1', 'Infinity', '0x10'])('does not read “%s”', (text) => {
    expect(readTypedNumber(text)).toBeUndefined();
  });

  it('reads lists, decimal commas only between semicolons', () => {
    expect(readTypedList('0,35; 0,5')).toEqual({ values: [0.35, 0.5] });
    expect(readTypedList('0.35, 0.5 0.7')).toEqual({ values: [0.35, 0.5, 0.7] });
    expect(readTypedList('0.35; half')).toEqual({ wrong: 'half' });
  });

  it('counts decimals as typed', () => {
    expect(['4', '4.0', '0,50', '1e3', '1/2'].map(typedDecimals)).toEqual([0, 1, 2, undefined, undefined]);
  });
});
