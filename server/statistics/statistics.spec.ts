import * as fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { incompleteBeta, logGamma, normal975, quantileOfF, quantileOfT } from './distributions';
import type { Figure } from './figure';
import { intraclassAbsolute, intraclassConsistent } from './intraclass';
import { correlation, cronbachAlpha, errorOfMeasurement, itemFigures } from './items';
import { cohenKappa, fleissKappa, markScale } from './kappa';
import { krippendorffAlpha, krippendorffWithInterval, type Unit } from './krippendorff';
import { agreementWithin, exactAgreement, limitsOfAgreement, signedDifference, type Pair } from './pairs';
import { severities } from './severity';

const mark = fc.integer({ min: 0, max: 6 });
const manyPairs = fc.array(fc.tuple(mark, mark), { minLength: 2, maxLength: 40 });
const crossed = fc
  .integer({ min: 2, max: 5 })
  .chain((markers) =>
    fc.array(fc.array(mark, { minLength: markers, maxLength: markers }), { minLength: 2, maxLength: 20 }),
  );

const value = (figure: Figure) => ('value' in figure ? figure.value : null);
const reason = (figure: object) => ('undefinedBecause' in figure ? figure.undefinedBecause : null);
const turned = (pairs: readonly Pair[]): Pair[] => pairs.map(([first, second]) => [second, first]);

function same(one: Figure, other: Figure, sign = 1): void {
  const [a, b] = [value(one), value(other)];
  if (a === null || b === null) expect(reason(one)).toBe(reason(other));
  else expect(a).toBeCloseTo(sign * b, 8);
}

describe('distributions', () => {
  it('agree with what is known in closed form', () => {
    expect(logGamma(0.5)).toBeCloseTo(Math.log(Math.PI) / 2, 13);
    expect(logGamma(11)).toBeCloseTo(Math.log(3_628_800), 12);
    expect(incompleteBeta(0.3, 1, 1)).toBeCloseTo(0.3, 14);
    expect(incompleteBeta(0.3, 2, 1)).toBeCloseTo(0.09, 14);
    // One degree of freedom is Cauchy's distribution: t = tan(π(p − ½)).
    expect(quantileOfT(0.975, 1)).toBeCloseTo(Math.tan(Math.PI * 0.475), 9);
    expect(quantileOfT(0.975, 1e7)).toBeCloseTo(normal975, 6);
  });

  it('have the symmetries of F', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 0.01, max: 0.99, noNaN: true }),
        fc.integer({ min: 1, max: 60 }),
        fc.integer({ min: 1, max: 60 }),
        (p, d1, d2) => {
          expect(quantileOfF(p, d1, d2) * quantileOfF(1 - p, d2, d1)).toBeCloseTo(1, 8);
        },
      ),
    );
  });
});

describe('two markers', () => {
  it('agree in the same way whoever comes first, and differ with the opposite sign', () => {
    fc.assert(
      fc.property(manyPairs, (pairs) => {
        same(exactAgreement(pairs), exactAgreement(turned(pairs)));
        same(signedDifference(pairs), signedDifference(turned(pairs)), -1);
        for (const weights of ['plain', 'linear', 'quadratic'] as const)
          same(cohenKappa(pairs, markScale(6), weights).kappa, cohenKappa(turned(pairs), markScale(6), weights).kappa);
      }),
    );
  });

  it('agree the more the wider the tolerance, and wholly within full marks', () => {
    fc.assert(
      fc.property(manyPairs, (pairs) => {
        expect(value(agreementWithin(pairs, 1))).toBeGreaterThanOrEqual(value(exactAgreement(pairs)) ?? 2);
        expect(value(agreementWithin(pairs, 6))).toBe(1);
      }),
    );
  });

  it('agree within a tenth though 0.3 − 0.2 is not 0.1 in binary', () => {
    expect(agreementWithin([[0.3, 0.2]], 0.1)).toEqual({ value: 1 });
  });

  it('have a κ of at most 1, which is 1 just where they agree throughout', () => {
    fc.assert(
      fc.property(manyPairs, (pairs) => {
        const kappa = value(cohenKappa(pairs, markScale(6), 'quadratic').kappa);
        if (kappa === null) return;
        expect(kappa).toBeLessThanOrEqual(1);
        expect(kappa === 1).toBe(pairs.every(([first, second]) => first === second));
      }),
    );
  });

  it('have plain κ unchanged by a scale with marks that nobody gave', () => {
    fc.assert(
      fc.property(manyPairs, (pairs) => {
        same(cohenKappa(pairs, markScale(6)).kappa, cohenKappa(pairs, markScale(20)).kappa);
      }),
    );
  });

  it('say why a figure is undefined, and refuse what is no mark', () => {
    expect(reason(exactAgreement([]))).toBe('No answer has two marks yet.');
    expect(reason(limitsOfAgreement([[1, 2]]).limits)).toMatch(/at least two/);
    expect(reason(cohenKappa([[3, 3]], markScale(6)).kappa)).toMatch(/one and the same mark/);
    expect(reason(fleissKappa([]))).toBe('No answer has two marks yet.');
    expect(() => exactAgreement([[1, NaN]])).toThrow(RangeError);
    expect(() => cohenKappa([[1, 7]], markScale(6))).toThrow('not on the scale');
    expect(() => markScale(1, 0.3)).toThrow(RangeError);
  });

  it('have scales in steps', () => {
    expect(markScale(1, 0.25)).toEqual([0, 0.25, 0.5, 0.75, 1]);
    expect(markScale(0.3, 0.1)).toHaveLength(4);
  });
});

describe('intraclass correlation', () => {
  it('does not count a constant difference where consistency is asked', () => {
    fc.assert(
      fc.property(crossed, fc.integer({ min: 1, max: 9 }), (marks, offset) => {
        const shifted = marks.map(([first = 0, ...rest]) => [first + offset, ...rest]);
        const [before, after] = [intraclassConsistent(marks).single, intraclassConsistent(shifted).single];
        if (value(before) !== null && value(after) !== null) same(before, after);
      }),
    );
  });

  it('is never above 1, is finite or undefined, and lies in its interval', () => {
    fc.assert(
      fc.property(crossed, (marks) => {
        for (const { single, interval } of [intraclassAbsolute(marks), intraclassConsistent(marks)]) {
          const icc = value(single);
          if (icc === null) continue;
          expect(icc).toBeLessThanOrEqual(1 + 1e-9);
          if (!('low' in interval)) continue;
          expect(interval.low).toBeLessThanOrEqual(icc + 1e-9);
          expect(interval.high).toBeGreaterThanOrEqual(icc - 1e-9);
        }
      }),
      { numRuns: 1000 },
    );
  });

  it('has no interval where less than one degree of freedom is left', () => {
    const { single, interval } = intraclassAbsolute([
      [6, 1],
      [3, 3],
    ]);
    expect(value(single)).toBeCloseTo(-12 / 13, 12);
    expect(reason(interval)).toMatch(/too contrary/);
  });

  it('is undefined where every mark is the same, or nothing is crossed', () => {
    const equal = [
      [3, 3],
      [3, 3],
    ];
    expect(reason(intraclassAbsolute(equal).single)).toMatch(/Every mark is the same/);
    expect(reason(intraclassConsistent(equal).single)).toMatch(/Every mark is the same/);
    expect(reason(intraclassAbsolute([[1, 2]]).single)).toMatch(/At least two answers/);
  });
});

describe('Krippendorff’s α', () => {
  const units = fc.array(fc.array(fc.option(mark, { nil: null }), { minLength: 1, maxLength: 4 }), { maxLength: 25 });

  it('does not depend on the order of answers or markers, nor on answers with one mark', () => {
    fc.assert(
      fc.property(
        units,
        fc.constantFrom('nominal' as const, 'ordinal' as const, 'interval' as const),
        (all, metric) => {
          const mixed: Unit[] = [...all].reverse().map((unit) => [...unit].reverse());
          same(krippendorffAlpha(all, metric), krippendorffAlpha([...mixed, [5], [null, 2]], metric));
        },
      ),
    );
  });

  it('does not depend on the unit of marks, and for ranks on any rising change of them', () => {
    fc.assert(
      fc.property(units, (all) => {
        const changed = (to: (each: number) => number): Unit[] =>
          all.map((unit) => unit.map((each) => (each === null ? null : to(each))));
        same(
          krippendorffAlpha(all, 'interval'),
          krippendorffAlpha(
            changed((each) => 2 * each + 3),
            'interval',
          ),
        );
        same(
          krippendorffAlpha(all, 'ordinal'),
          krippendorffAlpha(
            changed((each) => each ** 3),
            'ordinal',
          ),
        );
      }),
    );
  });

  it('has the same interval for the same seed, around it', () => {
    const all: Unit[] = Array.from({ length: 40 }, (_, index) => [index % 7, (index % 7) + (index % 3 === 0 ? 1 : 0)]);
    const once = krippendorffWithInterval(all, 'interval', { seed: 7 });
    expect(krippendorffWithInterval(all, 'interval', { seed: 7 })).toEqual(once);
    expect(krippendorffWithInterval(all, 'interval', { seed: 8 })).not.toEqual(once);
    expect('low' in once.interval && once.interval.low < (value(once.alpha) ?? 0)).toBe(true);
    expect('high' in once.interval && once.interval.high > (value(once.alpha) ?? 2)).toBe(true);
  });

  it('gives no interval of too few answers, and says so', () => {
    const { alpha, interval } = krippendorffWithInterval(
      [
        [1, 2],
        [3, 3],
      ],
      'interval',
      { seed: 1 },
    );
    expect(value(alpha)).not.toBeNull();
    expect(reason(interval)).toMatch(/at least 5 answers/);
  });
});

describe('severity', () => {
  const by = (first: [string, number], second: [string, number], probability = 1) => ({
    marks: [
      { marker: first[0], mark: first[1] },
      { marker: second[0], mark: second[1] },
    ] as const,
    probability,
  });

  it('weighs an answer by how many it stands for', () => {
    // Two borderline answers always drawn (difference −1), one of ten ordinary ones (difference 0).
    const [ada] = severities([by(['Ada', 2], ['Ben', 3]), by(['Ben', 3], ['Ada', 2]), by(['Ada', 2], ['Ben', 2], 0.1)]);
    expect(value(ada?.difference ?? { undefinedBecause: '' })).toBeCloseTo(-2 / 12, 12);
  });

  it('is the plain mean and its usual error where all are drawn alike', () => {
    fc.assert(
      fc.property(manyPairs, (pairs) => {
        const answers = pairs.map(([first, second]) => by(['Ada', first], ['Ben', second], 0.25));
        const [ada, ben] = severities(answers);
        const usual = limitsOfAgreement(pairs);
        if (!ada || !ben) throw new Error('Both markers occur.');
        same(ada.difference, usual.bias);
        same(ben.difference, usual.bias, -1);
        same(ada.standardError, usual.standardErrorOfBias);
      }),
    );
  });

  it('says that one answer has no spread, and refuses chances that are none', () => {
    const [ada] = severities([by(['Ada', 2], ['Ben', 3])]);
    expect(ada).toMatchObject({ answers: 1, difference: { value: -1 } });
    expect(reason(ada?.interval ?? {})).toMatch(/at least two/);
    expect(severities([])).toEqual([]);
    expect(() => severities([by(['Ada', 2], ['Ben', 3], 0)])).toThrow(RangeError);
    expect(() => severities([by(['Ada', 2], ['Ada', 3])])).toThrow(RangeError);
  });
});

describe('parts', () => {
  it('have no discrimination where everybody has the same mark', () => {
    const figures = itemFigures(
      [
        [1, 0],
        [1, 2],
      ],
      [1, 2],
    );
    expect(value(figures[0]?.facility ?? { undefinedBecause: '' })).toBe(1);
    expect(reason(figures[0]?.withRest ?? {})).toMatch(/same marks/);
    expect(reason(correlation([1], [2]))).toMatch(/two scripts/);
    expect(reason(cronbachAlpha([[1], [2]]))).toMatch(/two parts/);
    expect(reason(errorOfMeasurement(3, { value: -0.2 }))).toMatch(/negative/);
    expect(reason(itemFigures([], [0])[0]?.facility ?? {})).toMatch(/No script/);
  });
});
