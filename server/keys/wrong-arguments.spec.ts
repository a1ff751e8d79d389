import { describe, expect, it } from 'vitest';
import { compileKey } from './compile-key';
import { evaluateKey } from './evaluate-key';
import { KeyError } from './key-error';
import { keySignatures } from './signatures';

/**
 * Of each function: arguments that are right, and for each of them some that are not. Where a wrong one is `null`, any
 * number will do.
 */
const state = ['5', '[1]', 'ket(0, 0)'];
const joint = ['5', 'fock(0)'];
const number = ['fock(0)', '[1]', '1 m'];
const anyNumber = ['fock(0)', '1 m'];
const whole = ['-1', '1.5', '16384', ...number];
const mode = ['0', '3', '1.5'];
const unit = ['-0.1', '1.2', ...number];
const notNegative = ['-0.5', ...number];
const amplitude = ['100.1', '80 + 80i', 'fock(0)'];
const squeezing = ['-0.1', '6.1', 'i'];

type Slot = readonly [right: string, wrong: readonly string[]];
type Row = readonly [name: string, ...slots: Slot[]];

const optics: readonly Row[] = [
  ['fock', ['1', whole]],
  ['ket', ['1', whole], ['2', whole]],
  ['coherent', ['1', amplitude]],
  ['thermal', ['1', notNegative]],
  ['squeezed', ['1', squeezing], ['0', ['i', ...number]]],
  ['cat', ['1', amplitude], ['0', ['i', ...number]]],
  ['displaced', ['fock(1)', ['5', '[1]']], ['1', amplitude]],
  ['displaced', ['ket(1, 1)', []], ['1', mode], ['1', amplitude]],
  ['squeeze', ['fock(1)', ['5']], ['1', squeezing], ['0', ['i']]],
  ['squeeze', ['ket(1, 1)', []], ['1', mode], ['1', squeezing], ['0', ['i']]],
  [
    'mixture',
    ['[0.5, 0.5]', ['[0.5, 0.4]', '[1.5, -0.5]', '1', '[1]', '[fock(1), 1]']],
    ['[fock(0), fock(1)]', ['[fock(0)]', 'fock(0)', '[1, 2]', '[fock(0), ket(0, 1)]']],
  ],
  ['phaseAveraged', ['fock(1)', state]],
  ['dephased', ['fock(1)', state], ['1', notNegative]],
  ['photonAdded', ['fock(1)', state], ['1', whole]],
  ['photonSubtracted', ['fock(1)', state], ['1', whole]],
  ['product', ['fock(1)', state], ['fock(1)', state]],
  ['twinBeam', ['1', squeezing], ['0', ['i']]],
  ['noon', ['2', whole], ['0', ['i']]],
  ['twoModeSqueeze', ['ket(0, 0)', joint], ['1', squeezing], ['0', ['i']]],
  ['beamSplitter', ['ket(0, 0)', joint], ['0.5', unit], ['0', ['i']]],
  ['phaseShift', ['fock(1)', ['5']], ['1', ['i', ...number]]],
  ['phaseShift', ['ket(1, 1)', []], ['1', mode], ['1', ['i']]],
  ['machZehnder', ['ket(0, 0)', joint], ['0.5', unit], ['0', ['i']], ['0.5', unit]],
  ['lose', ['fock(1)', ['5']], ['0.5', unit]],
  ['lose', ['ket(1, 1)', []], ['2', mode], ['0.5', unit]],
  ['damp', ['fock(1)', state], ['1', notNegative], ['1', notNegative], ['0', notNegative], ['0', ['i']]],
  ['amplify', ['fock(1)', ['5']], ['2', ['0.9', ...number]], ['0', notNegative]],
  ['amplify', ['ket(1, 1)', []], ['1', mode], ['2', ['0.9']], ['0', notNegative]],
  ['invert', ['fock(1)', state], ['1', notNegative], ['1', notNegative], ['0', notNegative], ['0', ['i']]],
  ['output', ['ket(0, 0)', joint], ['1', mode]],
  ['heralded', ['ket(0, 0)', joint], ['1', mode], ['0', whole]],
  ['heraldProbability', ['ket(0, 0)', joint], ['1', mode], ['0', whole]],
  ['clicked', ['ket(1, 1)', joint], ['1', mode], ['0.5', unit], ['0', notNegative]],
  ['clickProbability', ['ket(1, 1)', joint], ['1', mode], ['0.5', unit], ['0', notNegative]],
  ['bathAmplitude', ['1', number], ['1', number], ['[1]', ['1', '[fock(0)]']], ['[1]', ['1', '[1, 2]', '[fock(0)]']]],
  [
    'invertedBathAmplitude',
    ['1', number],
    ['1', number],
    ['[1]', ['1', '[fock(0)]']],
    ['[1]', ['1', '[1, 2]', '[fock(0)]']],
  ],
  ['photonProbability', ['fock(1)', state], ['1', whole]],
  ['photonDistribution', ['fock(1)', state], ['1', ['-1', '10000', '0.5']]],
  ...[
    'meanPhotons',
    'photonVariance',
    'mandelQ',
    'fanoFactor',
    'parity',
    'amplitude',
    'wignerNegativity',
    'entropy',
  ].map((name): Row => [name, ['fock(1)', state]]),
  ['g2', ['fock(1)', ['5', 'ket(0, 0)']]],
  ['sampleCounts', ['fock(1)', ['5', 'ket(0, 0)']], ['3', ['0', '1.5', '10001']], ['1', unit], ['0', notNegative]],
  ['gN', ['fock(1)', state], ['1', ['0', '1.5', '33']]],
  ['countProbability', ['fock(1)', state], ['1', whole], ['0.5', unit], ['0', notNegative]],
  ['quadratureMean', ['fock(1)', state], ['0', ['i', ...number]]],
  ['quadratureVariance', ['fock(1)', state], ['0', ['i', ...number]]],
  ['quadratureDensity', ['fock(1)', state], ['0', ['i']], ['0', ['i', ...number]]],
  ['wigner', ['fock(1)', state], ['0', ['i']], ['0', ['i', ...number]]],
  ['husimi', ['fock(1)', state], ['0', anyNumber]],
  ['pFunction', ['thermal(1)', state], ['0', anyNumber]],
  ['characteristic', ['fock(1)', state], ['0', anyNumber], ['0', ['-1.1', '1.1', 'i']]],
  ['purity', ['fock(1)', ['5', '[1]']]],
  ['fidelity', ['fock(1)', ['5']], ['fock(1)', ['5', 'ket(0, 1)']]],
  ['overlap', ['fock(1)', ['5', 'thermal(1)']], ['fock(1)', ['5', 'ket(0, 1)', 'thermal(1)']]],
  ['matrixElement', ['fock(1)', state], ['0', whole], ['0', whole]],
  ['densityMatrix', ['fock(1)', state], ['1', ['-1', '100']]],
  ['covariance', ['fock(1)', ['5', '[1]']]],
  ['atomInversion', ['fock(1)', state], ['1', ['i', ...number]], ['1', notNegative]],
  ['jointProbability', ['ket(0, 0)', joint], ['0', whole], ['0', whole]],
  ...['coincidence', 'g2Cross', 'visibility', 'fieldCorrelation', 'logNegativity'].map((name): Row => [
    name,
    ['ket(1, 1)', joint],
  ]),
  ['thermalOccupation', ['1 GHz', ['1', '1 m', '-1 GHz']], ['1 K', ['1', '1 m', '-1 K']]],
  ['photonEnergy', ['500 nm', ['1', '1 kg', '-5 nm']]],
  ['photonFlux', ['1 mW', ['1', '1 nm', '-1 mW']], ['500 nm', ['1', '1 W', '0 nm']]],
  ['spontaneousRate', ['1 rad/s', ['1', '1 Hz', '1 m']], ['1e-29 C m', ['1', '1 C']]],
  ['laguerre', ['2', whole], ['0', number], ['1', number]],
  ['hermite', ['2', whole], ['1', number]],
  ['besselI', ['2', ['1.5', '20000', 'i']], ['1', number]],
  ['besselJ', ['2', ['1.5', '20000', 'i']], ['1', number]],
];

function sentenceOf(expression: string): string {
  try {
    return JSON.stringify(evaluateKey(compileKey(expression, { names: [] }), new Map()));
  } catch (error) {
    if (error instanceof KeyError) return error.toFault().message;
    throw error;
  }
}

const form = (name: string): RegExp => new RegExp(`^\`${name}\`: .+, got .+ \\(at character \\d+\\)$`, 'u');

describe('wrong arguments', () => {
  it('has a row for every function that knows of light', () => {
    const rows = new Set(optics.map(([name]) => name));
    const upTo = keySignatures.findIndex(({ name }) => name === 'abs');
    const missing = keySignatures.slice(0, upTo).filter(({ name }) => !rows.has(name) && name !== 'vacuum');
    expect(missing).toEqual([]);
  });

  const cases = optics.flatMap(([name, ...slots]) =>
    slots.flatMap(([, wrongs], slot) =>
      wrongs.map((wrong) => ({
        name,
        expression: `${name}(${slots.map(([right], index) => (index === slot ? wrong : right)).join(', ')})`,
      })),
    ),
  );

  it.each(cases)('$expression says what is wrong, what was given and where', ({ name, expression }) => {
    expect(sentenceOf(expression)).toMatch(form(name));
  });

  it.each(optics.map(([name, ...slots]) => ({ name, slots })))(
    '$name says how many arguments it takes',
    ({ name, slots }) => {
      const many = [...slots.map(([right]) => right), '1', '1', '1', '1', '1'].join(', ');
      expect(sentenceOf(`${name}(${many})`)).toMatch(form(name));
      expect(sentenceOf(`${name}()`)).toMatch(form(name));
    },
  );

  it.each(['sqrt(fock(1))', 'sin(coherent(1))', 'exp(ket(0, 1))', 'log(fock(1))', 'abs(thermal(1))'])(
    '%s asks for a figure first',
    (expression) => {
      expect(sentenceOf(expression)).toMatch(/^`\w+`: cannot take a state .+ \(at character 1\)$/u);
    },
  );
});
