import { answerSpecification, answerField } from '@shared/answer-forms';
import { printComplex, printNumber } from '@shared/reading/print';
import { readAnswer } from '@shared/reading/read-answer';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { checkAnswer } from './check-answer';
import { fuzzReading } from './fuzz/fuzz-reading';

const options = { seed: 20_260_101, numRuns: 500 } as const;

const numberPart = (tolerance: Record<string, number>, slips = 0) => {
  const part = answerSpecification.parse({
    form: 'number',
    key: 'k',
    tolerance,
    slips: Array.from({ length: slips }, () => ({ expression: 's', feedback: '', fraction: 0.5 })),
  });
  if (part.form !== 'number') throw new Error('Not a number.');
  return part;
};

const sizes = fc.double({ min: -30, max: 30, noNaN: true });
const keys = fc
  .tuple(fc.double({ min: 1, max: 10, noNaN: true }), sizes, fc.boolean())
  .map(([mantissa, exponent, negative]) => {
    const value = mantissa * 10 ** exponent;
    return negative ? -value : value;
  });

describe('properties of checking', () => {
  it('a key printed to s figures and read back is right at s significant figures', () => {
    fc.assert(
      fc.property(keys, fc.integer({ min: 1, max: 12 }), (key, figures) => {
        const part = numberPart({ significantFigures: figures });
        for (const text of [key.toPrecision(figures), key.toExponential(figures - 1), printNumber(key, figures)]) {
          expect(checkAnswer({ part, text, keys: { key: { value: key } } }).verdict).toBe('right');
        }
      }),
      options,
    );
  });

  it('reads the same with a decimal comma, as a product with a power of ten, and with other spacing', () => {
    const field = answerField(numberPart({ relative: 0.01 }));
    fc.assert(
      fc.property(
        fc.integer({ min: 0, max: 9 }),
        fc.integer({ min: 0, max: 9999 }),
        fc.integer({ min: -20, max: 20 }),
        (whole, decimals, power) => {
          const digits = String(decimals).padStart(4, '0');
          const plain = readAnswer(`${whole}.${digits}e${power}`, field);
          const forms = [
            `${whole},${digits}e${power}`,
            `${whole}.${digits} × 10^${power}`,
            `${whole}.${digits}x10^{${power}}`,
            ` ${whole}.${digits}  ·  10 ^ ${power} `,
            `${whole}.${digits}*10**(${power})`,
            `x = ${whole}.${digits}E${power}`,
          ];
          for (const form of forms) {
            const reading = readAnswer(form, field);
            expect(reading.kind).toBe('number');
            if (reading.kind === 'number' && plain.kind === 'number') {
              expect(Math.abs(reading.value - plain.value)).toBeLessThanOrEqual(1e-15 * Math.abs(plain.value));
            }
          }
        },
      ),
      options,
    );
  });

  it('does not depend on the order of equal forms: sums, products, kets of a sum', () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 99 }), fc.integer({ min: 1, max: 99 }), (a, b) => {
        const part = numberPart({ relative: 1e-9 });
        const key = { key: { value: a / (a + b) } };
        for (const text of [`${a}/(${a}+${b})`, `${a}/(${b}+${a})`, `(${a}+${b})^-1*${a}`]) {
          expect(checkAnswer({ part, text, keys: key }).verdict).toBe('right');
        }
        const states = [`${a}|0> + ${b}i|1>`, `${b}i|1> + ${a}|0>`, `i(${b}|1> - ${a}i|0>)`].map((text) =>
          readAnswer(text, { form: 'state' }),
        );
        expect(new Set(states.map((state) => (state.kind === 'state' ? state.norm.toFixed(9) : state.kind))).size).toBe(
          1,
        );
      }),
      options,
    );
  });

  it('what a number is read as reads back as the same number', () => {
    const field = { form: 'complex' } as const;
    fc.assert(
      fc.property(keys, keys, (re, im) => {
        const first = readAnswer(printComplex({ re, im }, 12), field);
        expect(first.kind).toBe('complex');
        if (first.kind !== 'complex') return;
        const again = readAnswer(first.readAs, field);
        expect(again.kind).toBe('complex');
        if (again.kind !== 'complex') return;
        const size = Math.hypot(first.value.re, first.value.im);
        expect(Math.hypot(again.value.re - first.value.re, again.value.im - first.value.im)).toBeLessThanOrEqual(
          1e-6 * size,
        );
      }),
      options,
    );
  });

  it('right is never taken from an answer by adding a slip', () => {
    fc.assert(
      fc.property(keys, fc.array(keys, { minLength: 1, maxLength: 5 }), fc.boolean(), (key, others, same) => {
        const values = same ? others.map(() => ({ value: key })) : others.map((value) => ({ value }));
        const text = key.toPrecision(8);
        const plain = checkAnswer({ part: numberPart({ relative: 0.01 }), text, keys: { key: { value: key } } });
        const part = numberPart({ relative: 0.01 }, values.length);
        const withSlips = checkAnswer({ part, text, keys: { key: { value: key }, slips: values } });
        expect(plain.verdict).toBe('right');
        expect(withSlips).toMatchObject({ verdict: 'right', fraction: 1 });
      }),
      options,
    );
  });

  it('a wider tolerance never takes a right away', () => {
    fc.assert(
      fc.property(
        keys,
        fc.double({ min: 0.9, max: 1.1, noNaN: true }),
        fc.double({ min: 1e-6, max: 0.1, noNaN: true }),
        (key, factor, relative) => {
          const judge = (tolerance: Record<string, number>) =>
            checkAnswer({ part: numberPart(tolerance), text: String(key * factor), keys: { key: { value: key } } })
              .verdict;
          if (judge({ relative }) === 'right') {
            expect(judge({ relative: Math.min(1, relative * 2) })).toBe('right');
            expect(judge({ relative, significantFigures: 1 })).toBe('right');
          }
        },
      ),
      options,
    );
  });

  it('reads ten thousand random strings without a crash, a NaN or a pause', () => {
    const { faults, slowest } = fuzzReading(10_000, 4_742);
    expect(faults).toEqual([]);
    expect(slowest.milliseconds).toBeLessThan(20);
  });
});
