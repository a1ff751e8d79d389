import { emptyAnswer } from '@shared/problem-draft';
import { rightBand, slipStanding } from './right-band';
import { passesAsRight } from './value-match';

const tolerance = (change: object) => ({ ...emptyAnswer().tolerance, relative: '', ...change });

describe('rightBand', () => {
  it('is the widest of what is given', () => {
    expect(rightBand(0.5, tolerance({ relative: '2%' }))).toEqual({ low: 0.49, high: 0.51 });
    expect(rightBand(0.5, tolerance({ relative: '2%', absolute: '0.1' }))).toEqual({ low: 0.4, high: 0.6 });
    const half = rightBand(0.3012, tolerance({ significantFigures: '2' }));
    expect(half?.low).toBeCloseTo(0.2962, 12);
    expect(half?.high).toBeCloseTo(0.3062, 12);
  });

  it('lies around a negative key the right way round', () => {
    expect(rightBand(-2, tolerance({ relative: '10%' }))).toEqual({ low: -2.2, high: -1.8 });
  });

  it('is not there without a tolerance', () => {
    expect(rightBand(1, tolerance({}))).toBeNull();
    expect(rightBand(0, tolerance({ significantFigures: '2' }))).toBeNull();
  });
});

describe('slipStanding', () => {
  const answer = { ...emptyAnswer(), tolerance: tolerance({ relative: '2%' }) };
  const passes = (key: unknown, value: unknown) => passesAsRight(key, value, answer);

  it('names a slip that passes as right', () => {
    const standing = slipStanding(0.5, [{ name: 'T for R', value: 0.505 }], passes);
    expect(standing).toEqual({ words: '“T for R” passes as right', needsLook: true });
  });

  it('believes the server, which compares states and formulas', () => {
    const standing = slipStanding('i |2⟩', [{ name: 'no phase', value: '|2⟩', passes: true }], passes);
    expect(standing).toEqual({ words: '“no phase” passes as right', needsLook: true });
  });

  it('names two slips that coincide', () => {
    const slips = [
      { name: 'one', value: 0.2 },
      { name: 'other', value: 0.201 },
    ];
    expect(slipStanding(0.5, slips, passes)?.words).toBe('“one” equals “other”');
  });

  it('says that all is well, or that a slip has no value', () => {
    expect(slipStanding(0.5, [{ name: 'one', value: 0.2 }], passes)?.words).toBe('well apart');
    expect(slipStanding(0.5, [{ name: 'one', value: null }], passes)?.needsLook).toBe(true);
    expect(slipStanding(0.5, [], passes)).toBeNull();
  });
});
