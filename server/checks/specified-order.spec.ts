import { describe, expect, it } from 'vitest';
import { checkLine } from './check-line';
import { judgeLine, numberWith, verdictOf, type LinePart } from './testing/judge-line';

const slip = (expression: string, fraction: number): LinePart => ({ expression, feedback: 'Look again.', fraction });
const earlier = (key: number | string, answer?: number | string, right?: boolean): LinePart => ({
  earlier: { part_a: { key, ...(answer === undefined ? {} : { answer }), ...(right === undefined ? {} : { right }) } },
});

describe('follow-through', () => {
  const part = numberWith('part_a/(1+part_a)', { followThrough: 0.75, slips: [slip('1/(1+part_a)', 0.3)] });

  it.each([
    ['the key of the part itself', '0.8', earlier(4, 2), 'right 1'],
    ['from the own earlier answer', '0.6667', earlier(4, 2), 'follow-through 0.75'],
    ['a slip with the earlier key', '0.2', earlier(4, 2), 'slip 0.3 #0'],
    ['a slip with the own earlier answer', '0.3333', earlier(4, 2), 'slip 0.3 #0'],
    ['neither', '0.9', earlier(4, 2), 'wrong 0'],
    ['honest rounding of an earlier right answer', '0.826', earlier(4, 4.75, true), 'right 1'],
    ['the same where the earlier was not right', '0.826', earlier(4, 4.75, false), 'follow-through 0.75'],
    ['the same where nothing says so', '0.826', earlier(4, 4.75), 'follow-through 0.75'],
    ['the key where the earlier was right', '0.8', earlier(4, 4.75, true), 'right 1'],
    ['no earlier answer', '0.6667', earlier(4), 'wrong 0'],
    ['an earlier answer equal to its key', '0.8', earlier(4, 4), 'right 1'],
    ['an earlier answer where the key has no value', '1', earlier(4, -1), 'wrong 0'],
  ] as const)('%s', (_what, text, more, verdict) => expect(verdictOf(part, text, more)).toBe(verdict));

  it('needs the part to allow it, unless the earlier answer was right', () => {
    const strict = numberWith('2*part_a');
    expect(verdictOf(strict, '6', earlier(4, 3))).toBe('wrong 0');
    expect(verdictOf(strict, '8.4', earlier(4, 4.2, true))).toBe('right 1');
  });

  it('may give nothing', () => {
    expect(verdictOf(numberWith('2*part_a', { followThrough: 0 }), '6', earlier(4, 3))).toBe('follow-through 0');
  });

  it('goes over chains; one earlier answer that was not right is enough to be a follow-through', () => {
    const chain = numberWith('part_a + part_b', { followThrough: 0.5 });
    const both = (first: boolean, second: boolean): LinePart => ({
      earlier: { part_a: { key: 1, answer: 1.1, right: first }, part_b: { key: 2, answer: 5, right: second } },
    });
    expect(verdictOf(chain, '6.1', both(true, false))).toBe('follow-through 0.5');
    expect(verdictOf(chain, '6.1', both(true, true))).toBe('right 1');
    expect(verdictOf(chain, '3', both(false, false))).toBe('right 1');
    // All earlier answers are the student's own; a mixture of key and own answer is no follow-through.
    expect(verdictOf(chain, '6', both(true, false))).toBe('wrong 0');
  });

  it('looks only at the earlier parts that the key uses', () => {
    const second = numberWith('2*part_b', { followThrough: 0.5 });
    const more = {
      earlier: { part_a: { key: 1, answer: 9, right: false }, part_b: { key: 2, answer: 2.1, right: true } },
    };
    expect(verdictOf(second, '4.2', more)).toBe('right 1');
  });

  it('works with units and complex numbers', () => {
    const rate = numberWith('2*part_a', { unit: 'MHz', followThrough: 0.5 });
    expect(verdictOf(rate, '6 MHz', earlier('3 MHz', '2 MHz'))).toBe('right 1');
    expect(verdictOf(rate, '4 MHz', earlier('3 MHz', '2 MHz'))).toBe('follow-through 0.5');
    expect(verdictOf(rate, '4000 kHz', earlier('3 MHz', 2))).toBe('follow-through 0.5');
    const field = { form: 'complex', key: 'i*part_a', tolerance: { relative: 0.01 }, followThrough: 0.5 };
    const more = { earlier: { part_a: { key: { re: 1, im: 1 }, answer: { re: 2, im: 0 } } } };
    expect(verdictOf(field, '-1 + i', more)).toBe('right 1');
    expect(verdictOf(field, '2i', more)).toBe('follow-through 0.5');
  });

  it('works for lists, states and formulas', () => {
    const list = { form: 'list', key: '[part_a, 2*part_a]', tolerance: { absolute: 0.01 }, followThrough: 0.5 };
    expect(verdictOf(list, '3; 6', earlier(4, 3))).toBe('follow-through 0.5');
    const state = { form: 'state', key: 'ket(0) + part_a*ket(1)', minimumFidelity: 0.999, followThrough: 0.5 };
    expect(verdictOf(state, '|0> + 3|1>', earlier(1, 3))).toBe('follow-through 0.5');
    const formula = {
      form: 'formula',
      key: 'part_a*x',
      variables: { x: [1, 2] },
      tolerance: { relative: 1e-6 },
      followThrough: 0.5,
    };
    expect(verdictOf(formula, '3x', earlier(1, 3))).toBe('follow-through 0.5');
  });

  it('uses lists of earlier parts by their entries', () => {
    const part2 = numberWith('part_a[2]', { followThrough: 0.5 });
    const more = { earlier: { part_a: { key: [1, 2], answer: [1, 3] } } };
    expect(verdictOf(part2, '2', more)).toBe('right 1');
    expect(verdictOf(part2, '3', more)).toBe('follow-through 0.5');
  });
});

describe('slips', () => {
  const part = numberWith('exp(-nbar*T)', { slips: [slip('exp(-nbar*(1-T))', 0.5), slip('exp(-nbar*sqrt(T))', 0.25)] });

  it.each([
    ['0.3012', { nbar: 4, T: 0.3 }, 'right 1'],
    ['0.0608', { nbar: 4, T: 0.3 }, 'slip 0.5 #0'],
    ['0.1118', { nbar: 4, T: 0.3 }, 'slip 0.25 #1'],
    ['0.5', { nbar: 4, T: 0.3 }, 'wrong 0'],
    ['0.1353', { nbar: 4, T: 0.5 }, 'right 1'],
    ['0.0183156', { nbar: 4, T: 1 }, 'right 1'],
    ['1', { nbar: 4, T: 1 }, 'slip 0.5 #0'],
  ])('%s in %j is %s', (text, givens, verdict) => expect(verdictOf(part, text, { givens })).toBe(verdict));

  it('are tried in their order, the first that matches is named', () => {
    const twins = numberWith('1', { slips: [slip('2', 0.1), slip('2', 0.9)] });
    expect(verdictOf(twins, '2')).toBe('slip 0.1 #0');
  });

  it('are all tried with the keys of earlier parts before any is tried with own answers', () => {
    const both = numberWith('part_a', { slips: [slip('3*part_a', 0.1), slip('2*part_a', 0.9)] });
    // 6 is three times the own 2, and twice the key 3.
    expect(verdictOf(both, '6', earlier(3, 2))).toBe('slip 0.9 #1');
  });

  it('that have no value are passed over', () => {
    const broken = numberWith('1', { slips: [slip('ln(0)', 0.1), slip('foo', 0.2), slip('2', 0.9)] });
    expect(verdictOf(broken, '2')).toBe('slip 0.9 #2');
  });

  it('come after right, unit and follow-through', () => {
    const all = numberWith('2*part_a MHz', {
      unit: 'MHz',
      followThrough: 0.75,
      unitFraction: 0.4,
      slips: [slip('2*part_a MHz', 0.1), slip('4 MHz', 0.2), slip('5 MHz', 0.3)],
    });
    expect(verdictOf(all, '6 MHz', earlier(3, 2))).toBe('right 1');
    expect(verdictOf(all, '6', earlier(3, 2))).toBe('unit 0.4');
    expect(verdictOf(all, '4 MHz', earlier(3, 2))).toBe('follow-through 0.75');
    expect(verdictOf(all, '5 MHz', earlier(3, 2))).toBe('slip 0.3 #2');
  });

  it('need no feedback in a line', () => {
    expect(verdictOf(numberWith('1', { slips: [{ expression: '2', fraction: 0.5 }] }), '2')).toBe('slip 0.5 #0');
  });

  it('may be of every form', () => {
    const list = { form: 'list', key: '[1, 2]', tolerance: { absolute: 0.01 }, slips: [slip('[2, 1]', 0.5)] };
    expect(verdictOf(list, '2; 1')).toBe('slip 0.5 #0');
    const state = { form: 'state', key: 'ket(1,0)', minimumFidelity: 0.99, slips: [slip('ket(0,1)', 0.5)] };
    expect(verdictOf(state, '|0,1>')).toBe('slip 0.5 #0');
    const modes = { ...state, slips: [slip('ket(1)', 0.5)] };
    expect(verdictOf(modes, '|1>')).toBe('slip 0.5 #0');
    const matrix = {
      form: 'matrix',
      key: '[[1, 0], [0, 0]]',
      tolerance: { absolute: 0.01 },
      slips: [slip('[[0, 0], [0, 1]]', 0.5)],
    };
    expect(verdictOf(matrix, '0, 0; 0, 1')).toBe('slip 0.5 #0');
    const distribution = {
      form: 'distribution',
      key: '[0.25, 0.75]',
      tolerance: { totalVariation: 0.01 },
      slips: [slip('[0.75, 0.25]', 0.5)],
    };
    expect(verdictOf(distribution, '0.75; 0.25')).toBe('slip 0.5 #0');
    const complex = { form: 'complex', key: '1+i', tolerance: { relative: 0.01 }, slips: [slip('1-i', 0.5)] };
    expect(verdictOf(complex, '1 - i')).toBe('slip 0.5 #0');
  });
});

describe('conventions', () => {
  const part = numberWith('quadratureVariance(squeezed(r), 0)');
  const givens = { r: 0.5 };
  it.each([
    [{}, Math.exp(-1) / 2],
    [{ vacuumVariance: 0.25 }, Math.exp(-1) / 4],
    [{ vacuumVariance: 1 }, Math.exp(-1)],
    [{ squeezingSign: -1 }, Math.E / 2],
    [{ vacuumVariance: 0.25, squeezingSign: -1, splitterPhase: 0 }, Math.E / 4],
  ])('%j', (convention, value) => {
    expect(verdictOf(part, value.toPrecision(5), { givens, convention })).toBe('right 1');
  });
});

describe('lines of the tool', () => {
  it('answers the example of the specification', () => {
    const line = {
      part: { form: 'number', key: 'nbar*eta', tolerance: { relative: 0.01 } },
      givens: { nbar: 4, eta: 0.5 },
      answer: '2.01',
      earlier: { part_a: { key: 4, answer: 4.1 } },
    };
    expect(checkLine(JSON.stringify(line))).toMatchObject({ verdict: 'right', fraction: 1, readAs: '2.01' });
  });

  it.each([
    'not json',
    '',
    '[]',
    'null',
    '3',
    '{}',
    '{"part": {}, "answer": "1"}',
    '{"part": {"form": "number", "key": "1"}, "answer": "1"}',
    '{"part": {"form": "number", "key": "1", "tolerance": {"relative": -1}}, "answer": "1"}',
    '{"part": {"form": "number", "key": "1", "tolerance": {"relative": 0.1}}}',
    '{"part": {"form": "number", "key": "1", "tolerance": {"relative": 0.1}}, "answer": 1}',
    '{"part": {"form": "number", "key": "1/0", "tolerance": {"relative": 0.1}}, "answer": "1"}',
    '{"part": {"form": "number", "key": "lose(ket(1), 1.2)", "tolerance": {"relative": 0.1}}, "answer": "1"}',
    '{"part": {"form": "number", "key": "foo", "tolerance": {"relative": 0.1}}, "answer": "1"}',
    '{"part": {"form": "number", "key": "i", "tolerance": {"relative": 0.1}}, "answer": "1"}',
    '{"part": {"form": "number", "key": "ket(1)", "tolerance": {"relative": 0.1}}, "answer": "1"}',
    '{"part": {"form": "list", "key": "1", "tolerance": {"relative": 0.1}}, "answer": "1"}',
    '{"part": {"form": "number", "key": "part_a", "tolerance": {"relative": 0.1}}, "answer": "1"}',
    '{"part": {"form": "number", "key": "x", "tolerance": {"relative": 0.1}}, "givens": {"x": "3 foo"}, "answer": "1"}',
    '{"part": {"form": "worked"}, "answer": "1"}',
    '{"part": {"form": "essay"}, "answer": "1"}',
    '{"part": {"form": "choice", "options": ["a", "b"], "correct": ["c"]}, "answer": "a"}',
  ])('%s gives an error in a sentence', (text) => {
    const checked = checkLine(text);
    expect(checked).toHaveProperty('error');
    expect('error' in checked && checked.error).toMatch(/\S{2,} .*\S/);
  });

  it('carries what the marker sees: relation, compared values', () => {
    const part = numberWith('0.5893 um', { unit: 'nm' });
    const checked = judgeLine(part, '1178.6 nm');
    expect(checked).toMatchObject({ verdict: 'wrong', relation: 'twice the key' });
    if (!('value' in checked) || checked.value === null || !('re' in checked.value)) throw new Error('No value.');
    expect(checked.value.re).toBeCloseTo(1178.6, 9);
    expect(checked.keyValue).toMatchObject({ im: 0 });
  });

  it('judges without looking at the key how the text is read', () => {
    for (const key of ['1', '1234', '2', '0']) {
      expect(judgeLine(numberWith(key), '1,234')).toMatchObject({ verdict: 'unreadable' });
      expect(judgeLine({ form: 'list', key: `[${key}, ${key}]`, tolerance: { absolute: 1 } }, '1, 2, 3')).toMatchObject(
        {
          readAs: '1; 2; 3',
        },
      );
    }
  });
});
