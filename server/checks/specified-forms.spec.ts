import { describe, expect, it } from 'vitest';
import { judgeLine, verdictOf, type LinePart } from './testing/judge-line';

type Case = readonly [text: string, verdict: string];
const right = 'right 1';
const wrong = 'wrong 0';
const unreadable = 'unreadable 0';

function judged(name: string, part: LinePart, cases: readonly Case[], more: LinePart = {}): void {
  describe(name, () => {
    it.each(cases)('%s: %s', (text, verdict) => expect(verdictOf(part, text, more)).toBe(verdict));
  });
}

const complexWith = (key: string, more: LinePart = {}): LinePart => ({
  form: 'complex',
  key,
  tolerance: { relative: 0.001 },
  ...more,
});

judged('complex numbers', complexWith('1 + 2i'), [
  ['1 + 2i', right],
  ['1+2i', right],
  ['1 + 2 i', right],
  ['1 + i 2', right],
  ['1 + i*2', right],
  ['2i + 1', right],
  ['1,0 + 2,0 i', right],
  ['(1 + 2i)', right],
  ['alpha = 1 + 2i', right],
  ['i(2 - i)', right],
  ['sqrt(5)*exp(i*atan(2))', right],
  ['√5 e^{i·1.10715}', right],
  ['2.23607 e^(1.10715i)', right],
  ['1 - 2i', wrong],
  ['2 + i', wrong],
  ['1', wrong],
  ['(1 + 2i) m', wrong],
  ['1 + 2i m', unreadable],
  ['1 + 2', wrong],
  ['1 + 2j', unreadable],
  ['1; 2', unreadable],
  ['|1> + 2i|0>', unreadable],
  ['1/(1-1)', unreadable],
  ['', 'unanswered 0'],
]);

judged('complex numbers in exponential form', complexWith('sqrt(2) + i*sqrt(2)'), [
  ['2*exp(i*pi/4)', right],
  ['2 e^{i pi/4}', right],
  ['2e^{iπ/4}', right],
  ['2 e^(iπ/4)', right],
  ['2 exp(i π / 4)', right],
  ['2 \\exp(i\\pi/4)', right],
  ['2(cos(pi/4) + i sin(pi/4))', right],
  ['√2(1+i)', right],
  ['2 i^0.5', right],
  ['2 e^{-i pi/4}', wrong],
  ['2 e^i pi/4', wrong],
]);

judged('imaginary keys', complexWith('-i/sqrt(2)'), [
  ['-i/sqrt(2)', right],
  ['−i/√2', right],
  ['-0.7071i', right],
  ['-i 0.7071', right],
  ['1/(i√2)', right],
  ['i/√2', wrong],
  ['0.7071', wrong],
]);

judged('up to a phase', complexWith('0.6i', { upToPhase: true }), [
  ['0.6', right],
  ['-0.6', right],
  ['0.6 e^{1.3i}', right],
  ['0.36 + 0.48i', right],
  ['0.61', wrong],
]);

judged('real keys of complex parts', complexWith('0.25'), [
  ['0.25', right],
  ['25%', right],
  ['0.25 + 0i', right],
]);

const listWith = (key: string): LinePart => ({ form: 'list', key, tolerance: { absolute: 0.01 } });

judged('lists', listWith('[1, 2, 3.5]'), [
  ['1; 2; 3.5', right],
  ['1;2;3.5', right],
  ['1; 2; 3,5', right],
  ['[1, 2, 3.5]', right],
  ['[1,2,3.5]', right],
  ['(1, 2, 3.5)', right],
  ['{1, 2, 3.5}', right],
  ['[1; 2; 3,5]', right],
  ['1, 2, 3.5', right],
  ['x = 1; 2; 3.5', right],
  ['1; 2; 7/2', right],
  ['1; √4; 3½', right],
  ['1\n2\n3.5', right],
  ['2; 1; 3.5', wrong],
  ['1; 2', wrong],
  ['1; 2; 3.5; 4', wrong],
  ['1', wrong],
  ['1; 2; 3.6', wrong],
  ['1; 2 m; 3.5', wrong],
  ['1; ; 3.5', unreadable],
  ['1; 2; x', unreadable],
  ['1; 2; 1/0', unreadable],
  ['[1, 2, 3.5', unreadable],
  ['[1, 2], 3.5', unreadable],
  ['[]', unreadable],
  [';', unreadable],
  ['', 'unanswered 0'],
]);

judged('lists of complex numbers', listWith('[i, 1 - i]'), [
  ['i; 1-i', right],
  ['[i, 1 - i]', right],
  ['[e^(i pi/2), √2 e^{-iπ/4}]', right],
  ['-i; 1+i', wrong],
]);

judged('lists of one', listWith('[2]'), [
  ['[2]', right],
  ['2', right],
  ['2;', right],
]);

const distributionWith = (key: string, totalVariation = 0.02): LinePart => ({
  form: 'distribution',
  key,
  tolerance: { totalVariation },
});

judged('distributions', distributionWith('photonDistribution(ket(0) + ket(1), 2)'), [
  ['0.5; 0.5; 0', right],
  ['[0.5, 0.5, 0]', right],
  ['0,5; 0,5; 0', right],
  ['50%; 50%; 0%', right],
  ['1/2; 1/2; 0', right],
  ['½; ½; 0', right],
  ['0.52; 0.48; 0', right],
  ['0.521; 0.479; 0', wrong],
  ['0.48; 0.48; 0', right],
  ['0.46; 0.49; 0', wrong],
  ['0.5; 0.5', wrong],
  ['0.5; 0.5; 0; 0', wrong],
  ['0.51; 0.51; -0.01', wrong],
  ['0.51; 0.51; 0', wrong],
  ['0.5; 0.5000005; 0', right],
  ['0.5; 0.5 i; 0', unreadable],
  ['0.5; 0.5; a', unreadable],
]);

it('says why a distribution is none, for the marker', () => {
  const part = distributionWith('[0.5, 0.5, 0]');
  expect(judgeLine(part, '0.51; 0.5; -0.01')).toMatchObject({ problem: 'Entry 3 is a negative probability.' });
  expect(judgeLine(part, '0.6; 0.6; 0')).toMatchObject({ problem: 'The probabilities add to more than 1.' });
  expect(judgeLine(part, '0.5; 0.5')).toMatchObject({ problem: 'The distribution has 2 entries where the key has 3.' });
});

judged('matrices', { form: 'matrix', key: '[[0.625, -0.375i], [0.375i, 0.375]]', tolerance: { absolute: 0.01 } }, [
  ['0.625, -0.375i; 0.375i, 0.375', right],
  ['0.625,-0.375i;0.375i,0.375', right],
  ['[0.625, -0.375i; 0.375i, 0.375]', right],
  ['[[0.625, -0.375i], [0.375i, 0.375]]', right],
  ['((0.625, -0.375i), (0.375i, 0.375))', right],
  ['[0.625, -0.375i], [0.375i, 0.375]', right],
  ['rho = 0.625, -0.375i; 0.375i, 0.375', right],
  ['5/8, -3i/8; 3i/8, 3/8', right],
  ['0.625, -0.375i\n0.375i, 0.375', right],
  ['\\begin{pmatrix} 0.625 & -0.375i \\\\ 0.375i & 0.375 \\end{pmatrix}', right],
  ['0.625, 0.375i; -0.375i, 0.375', wrong],
  ['0.625, -0.375i', wrong],
  ['0.625; -0.375i; 0.375i; 0.375', wrong],
  ['0.625, -0.375i, 0; 0.375i, 0.375, 0; 0, 0, 0', wrong],
  ['0.625, -0.375i; 0.375i', unreadable],
  ['0.625, x; 0, 0', unreadable],
  ['[[0.625, -0.375i], [0.375i, 0.375]', unreadable],
  ['0.625, ; 0.375i, 0.375', unreadable],
  ['', 'unanswered 0'],
]);

judged('choices', { form: 'choice', options: ['a', 'b', 'c', 'd'], correct: ['b'] }, [
  ['b', right],
  ['B', right],
  [' b ', right],
  ['(b)', right],
  ['b)', right],
  ['b.', right],
  ['a', wrong],
  ['a, b', wrong],
  ['b, a', wrong],
  ['b, b', right],
  ['e', unreadable],
  ['ab', unreadable],
  ['b, e', unreadable],
  ['2', unreadable],
  ['', 'unanswered 0'],
]);

judged('several choices', { form: 'choice', options: ['a', 'b', 'c', 'd'], correct: ['a', 'C'], several: true }, [
  ['a, c', right],
  ['A,C', right],
  ['c, a', right],
  ['a c', right],
  ['a; c', right],
  ['a', wrong],
  ['a, b, c', wrong],
  ['a, b', wrong],
  ['a, x', unreadable],
]);

judged(
  'options with their texts',
  {
    form: 'choice',
    options: [
      { label: 'I', text: 'laser' },
      { label: 'II', text: 'lamp' },
    ],
    correct: ['II'],
  },
  [
    ['ii', right],
    ['II', right],
    ['I', wrong],
    ['lamp', unreadable],
  ],
);
