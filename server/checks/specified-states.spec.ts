import { describe, expect, it } from 'vitest';
import { judgeLine, verdictOf, type LinePart } from './testing/judge-line';

type Case = readonly [text: string, verdict: string];
const right = 'right 1';
const wrong = 'wrong 0';
const unreadable = 'unreadable 0';

const stateWith = (key: string, minimumFidelity = 0.999): LinePart => ({ form: 'state', key, minimumFidelity });

function judged(key: string, cases: readonly Case[], minimumFidelity?: number, more: LinePart = {}): void {
  describe(`a key of ${key}`, () => {
    it.each(cases)('%s: %s', (text, verdict) =>
      expect(verdictOf(stateWith(key, minimumFidelity), text, more)).toBe(verdict),
    );
  });
}

judged('(ket(0) - i*ket(2))/sqrt(2)', [
  ['(|0> - i|2>)/sqrt(2)', right],
  ['(|0⟩ - i|2⟩)/√2', right],
  ['1/√2 (|0⟩ − i|2⟩)', right],
  ['1/sqrt(2) |0> - i/sqrt(2) |2>', right],
  ['|0> - i|2>', right],
  ['0.7071|0> - 0.7071i|2>', right],
  ['0,7071|0> - 0,7071i|2>', right],
  ['-|0> + i|2>', right],
  ['i|0> + |2>', right],
  ['e^{iπ/3}(|0⟩ - i|2⟩)', right],
  ['|0> + e^{-i pi/2}|2>', right],
  ['(|0〉 - i|2〉)/√2', right],
  ['|psi> = (|0> - i|2>)/sqrt(2)', right],
  ['|ψ⟩ = (|0⟩ - i|2⟩)/√2', right],
  ['ψ = |0⟩ - i|2⟩', right],
  ['\\frac{1}{\\sqrt{2}}\\left(|0\\rangle - i|2\\rangle\\right)', right],
  ['\\frac{|0\\rangle - i|2\\rangle}{\\sqrt 2}', right],
  ['\\ket{0} - i\\ket{2}', right],
  ['ket(0) - i*ket(2)', right],
  ['ket(0) - i ket(2)', right],
  ['fock(0) - i*fock(2)', right],
  ['vacuum() - i*fock(2)', right],
  ['7(|0> - i|2>)', right],
  ['2|0> - |0> - i|2>', right],
  ['|0> + i|2>', wrong],
  ['|0> - |2>', wrong],
  ['|0>', wrong],
  ['|0> - i|2> + 0.1|1>', wrong],
  ['|0,2>', wrong],
  ['|0,0> - i|2,0>', wrong],
  ['|02>', unreadable],
  ['|0> - i|02>', unreadable],
  ['0.7', unreadable],
  ['|0> - |0>', unreadable],
  ['0|0>', unreadable],
  ['|0', unreadable],
  ['|0> + 1', unreadable],
  ['<0|', unreadable],
  ['<0|2>', unreadable],
  ['|0><0|', unreadable],
  ['|-1>', unreadable],
  ['|1.5>', unreadable],
  ['|n>', unreadable],
  ['sqrt(|0>)', unreadable],
  ['|0>/|2>', unreadable],
  ['|0> + |1,0>', unreadable],
  ['|0>, |2>', unreadable],
  ['', 'unanswered 0'],
]);

judged('beamSplitter(ket(1,1), 0.5)', [
  ['(|2,0> + |0,2>)/sqrt(2)', right],
  ['i(|2,0⟩+|0,2⟩)/√2', right],
  ['|2, 0⟩ + |0, 2⟩', right],
  ['|2⟩|0⟩ + |0⟩|2⟩', right],
  ['|2>⊗|0> + |0>⊗|2>', right],
  ['ket(2,0) + ket(0,2)', right],
  ['(|2,0> - |0,2>)/sqrt(2)', wrong],
  ['|1,1>', wrong],
  ['|2>', wrong],
  ['|2,0,0> + |0,2,0>', wrong],
  ['|20> + |02>', unreadable],
  ['|02> + |20>', unreadable],
  ['|2;0>', unreadable],
  ['|2 0>', unreadable],
]);

judged('coherent(2)', [
  ['coherent(2)', right],
  ['e^{0.3i} coherent(2)', right],
  ['coherent(2.02)', right],
  ['coherent(-2)', wrong],
  ['coherent(2i)', wrong],
  ['|2>', wrong],
]);

judged('cat(1.5)', [
  ['coherent(1.5) + coherent(-1.5)', right],
  ['(coherent(1.5) + coherent(-1.5))/sqrt(2)', right],
  ['cat(1.5)', right],
  ['cat(-1.5)', right],
  ['coherent(1.5) - coherent(-1.5)', wrong],
  ['cat(1.5, pi)', wrong],
  ['cat(1.5i)', wrong],
]);

judged(
  'mixture([0.75, 0.25], [ket(0), ket(1)])',
  [
    ['|0>', right],
    ['|1>', wrong],
  ],
  0.7,
);
judged(
  'lose(noon(2), 1, 0.9)',
  [
    ['|2,0> + |0,2>', right],
    ['|2,0> - |0,2>', wrong],
  ],
  0.8,
);
judged(
  'lose(ket(1), 0.9)',
  [
    ['|1>', right],
    ['|0>', wrong],
  ],
  0.85,
);
judged('product(ket(1), ket(2))', [
  ['|1,2>', right],
  ['|2,1>', wrong],
  ['|1>|2>', right],
  ['|12>', wrong],
]);
judged('twinBeam(0.5)', [
  ['|0,0> + tanh(0.5)|1,1> + tanh(0.5)^2|2,2> + tanh(0.5)^3|3,3> + tanh(0.5)^4|4,4> + tanh(0.5)^5|5,5>', right],
  ['|0,0> - tanh(0.5)|1,1> + tanh(0.5)^2|2,2>', wrong],
]);
judged('alpha*ket(0) + ket(1)', [['2|0> + |1>', right]], 0.999, { givens: { alpha: 2 } });

describe('phases that a convention decides', () => {
  const part = stateWith('beamSplitter(ket(1,0), 0.5)');
  it('the default splitter reflects with i', () => {
    expect(verdictOf(part, '|1,0> + i|0,1>')).toBe(right);
    expect(verdictOf(part, '|1,0> - |0,1>')).toBe(wrong);
  });
  it('another convention has its own sign', () => {
    const more = { convention: { splitterPhase: 0 } };
    expect(verdictOf(part, '|1,0> - |0,1>', more)).toBe(right);
    expect(verdictOf(part, '|1,0> + i|0,1>', more)).toBe(wrong);
  });
});

describe('what a wrong state is, for the marker', () => {
  it('another number of modes is wrong, with the reason', () => {
    expect(judgeLine(stateWith('ket(1,0)'), '|1>')).toMatchObject({
      verdict: 'wrong',
      problem: 'The answer is a state of one mode, the key one of 2 modes.',
    });
  });
  it('the read-back prints what was written, not what the key is', () => {
    expect(judgeLine(stateWith('ket(1,0)'), '(|0> - i|2>)/sqrt(2)')).toMatchObject({
      readAs: '0.7071|0⟩ − 0.7071 i|2⟩',
    });
  });
  it('a key that is no state is the author’s mistake', () => {
    expect(judgeLine(stateWith('3'), '|1>')).toHaveProperty('error');
  });
});
