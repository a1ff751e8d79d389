import { renderToString } from 'katex';
import { describe, expect, it } from 'vitest';
import { readAnswer } from './read-answer';

const read = (text: string) => readAnswer(text, { form: 'state' });

describe('reading a state', () => {
  it.each([
    ['(|0> - i|2>)/sqrt(2)', '0.7071|0⟩ − 0.7071 i|2⟩'],
    ['1/√2 (|0⟩+|1⟩)', '0.7071|0⟩ + 0.7071|1⟩'],
    ['\\frac{1}{\\sqrt{2}}\\left(|0\\rangle + |1\\rangle\\right)', '0.7071|0⟩ + 0.7071|1⟩'],
    ['|ψ⟩ = (|1,0> + i|0,1>)/sqrt(2)', '0.7071|1,0⟩ + 0.7071 i|0,1⟩'],
    ['i(|2,0>+|0,2>)/sqrt(2)', '0.7071 i|2,0⟩ + 0.7071 i|0,2⟩'],
    ['|1,0⟩', '|1,0⟩'],
    ['\\ket{1,0}', '|1,0⟩'],
    ['|1⟩|0⟩', '|1,0⟩'],
    ['|1⟩⊗|0⟩', '|1,0⟩'],
    ['ket(1, 0)', '|1,0⟩'],
    ['0,6|0> + 0,8|1>', '0.6|0⟩ + 0.8|1⟩'],
    ['|0> + |0> - |1>', '2|0⟩ − |1⟩'],
    ['e^{iπ/4}|1>', '(0.7071 + 0.7071 i)|1⟩'],
    ['|12⟩', '|12⟩'],
    ['vacuum()', '|0⟩'],
    ['coherent(2)', '|α = 2⟩'],
    ['coherent(2) + coherent(-2)', '|α = 2⟩ + |α = −2⟩'],
    ['-|1>', '−|1⟩'],
  ])('reads %s', (text, readAs) => expect(read(text)).toMatchObject({ kind: 'state', readAs }));

  it.each([
    ['|02>', 'Separate the modes by commas: |0,2⟩.', 2],
    ['0.7', 'There is no ket; write a state such as (|0⟩ + i|1⟩)/√2.', 1],
    ['|0> + 1', 'A number cannot be added to a ket.', 7],
    ['|0> + |1,0>', 'The kets of a sum must have the same number of modes.', 7],
    ['|0', 'The ket is never closed; write it as |0⟩ or |0>.', 1],
    ['|a>', 'A ket holds photon numbers, such as |2⟩ or |1,0⟩.', 2],
    ['|1.5>', 'A photon number is a whole number, such as 0, 1 or 2.', 2],
    ['|0> - |0>', 'The state is zero or too large to be compared.', 1],
    ['|0>^2', 'A ket cannot be raised to a power.', 5],
    ['1/|0>', 'A ket cannot stand below a fraction line.', 3],
    ['exp(|0>)', 'A ket has no place inside a function, a power or a factorial.', 1],
    ['|0>/0', 'An amplitude of the state is not finite.', 1],
    ['coherent()', '“coherent” takes 1 values in its brackets.', 1],
    ['coherent(200)', 'The amplitude of a coherent state is too large to be compared.', 10],
    ['cat(0, pi)', 'This cat state vanishes.', 1],
    ['⟨0|', 'A bra has no place here; write kets such as |0⟩.', 1],
  ])('says what is wrong with %s', (text, problem, at) => {
    expect(read(text)).toEqual({ kind: 'unreadable', problem, at });
  });

  it('knows that coherent states are normalised and not orthogonal', () => {
    const reading = read('coherent(0.5) + coherent(-0.5)');
    // ⟨α|−α⟩ = exp(−2|α|²), so the norm is √(2 + 2 e^{−1/2}).
    if (reading.kind === 'state') expect(reading.norm).toBeCloseTo(Math.sqrt(2 + 2 * Math.exp(-0.5)), 14);
    expect(reading.kind).toBe('state');
  });

  it('is typeset without complaint', () => {
    for (const text of ['(|0> - i|2>)/sqrt(2)', '(1+i)|1,0> + 1e-9|0,1>', 'cat(2, pi)', '-3e7 i|0>']) {
      const reading = read(text);
      if (reading.kind !== 'state') throw new Error(text);
      expect(() => renderToString(reading.typeset, { throwOnError: true, strict: 'error' })).not.toThrow();
    }
  });
});
