import { emptyAnswer, type DraftAnswer } from '@shared/problem-draft';
import { passesAsRight } from './value-match';

const answer = (change: Partial<DraftAnswer> = {}): DraftAnswer => ({ ...emptyAnswer(), ...change });

describe('passesAsRight', () => {
  it('compares complex numbers by their distance, or by size alone up to a phase', () => {
    const complex = answer({ form: 'complex' });
    expect(passesAsRight({ re: 0, im: 1 }, { re: 0.005, im: 1 }, complex)).toBe(true);
    expect(passesAsRight({ re: 0, im: 1 }, 1, complex)).toBe(false);
    expect(passesAsRight({ re: 0, im: 1 }, 1, { ...complex, upToPhase: true })).toBe(true);
  });

  it('compares lists entry by entry', () => {
    const list = answer({ form: 'list' });
    expect(passesAsRight([1, 2], [1.005, 2], list)).toBe(true);
    expect(passesAsRight([1, 2], [2, 1], list)).toBe(false);
    expect(passesAsRight([1, 2], [1, 2, 3], list)).toBe(false);
    expect(
      passesAsRight(
        [
          [1, 0],
          [0, 1],
        ],
        [
          [1, 0],
          [0, 1.001],
        ],
        answer({ form: 'matrix' }),
      ),
    ).toBe(true);
  });

  it('compares probabilities by total variation', () => {
    const tolerance = { ...emptyAnswer().tolerance, totalVariation: '2%' };
    const distribution = answer({ form: 'distribution', tolerance });
    expect(passesAsRight([0.5, 0.5], [0.51, 0.49], distribution)).toBe(true);
    expect(passesAsRight([0.5, 0.5], [0.53, 0.47], distribution)).toBe(false);
  });

  it('takes states and formulas as the same where they read the same', () => {
    expect(passesAsRight('|1⟩', '|1⟩', answer({ form: 'state' }))).toBe(true);
    expect(passesAsRight('|1⟩', '|0⟩', answer({ form: 'state' }))).toBe(false);
  });
});
