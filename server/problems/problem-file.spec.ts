import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { ProblemContent } from '@shared/problems';
import { draftOf, readDraft } from '@shared/read-draft';
import { ProblemFileError, readProblemFile } from './problem-file';
import { writeProblemFile } from './write-problem-file';

const file = `---
title: "A splitter: a counter"
tags: beam splitters, counting
safety: Local laser rules come first.
givens:
  nbar: { symbol: \\bar n, spellings: n, from: 2, to: 8, step: 0.5 }
  T: { symbol: T, one of: 0.35; 0.5; 0.7 }
  kappa: { symbol: \\kappa, spellings: "kappa, κ, \\\\kappa", unit: MHz, value: 3.0 }
  R: { symbol: R, derived: 1 - T, figures: 3 }
parts:
  a:
    heading: mean photons
    form: number
    key: R*nbar
    tolerance: { relative: 1% }
    stands alone: right, unanswered
    mark scheme:
      - { name: A1, kind: A, marks: 1, text: The right value., awarded by: right }
  b:
    heading: nothing recorded
    form: number
    key: photonProbability(output(beamSplitter(product(coherent(sqrt(nbar)), vacuum()), T), 2), 0)
    tolerance: { relative: 2%, significant figures: 3 }
    slips:
      - name: T for R
        expression: exp(-T*nbar)
        feedback: Output 2 is the reflected port.
        fraction: 0.5
    follow-through: 0.75
    worked page: true
    mark scheme:
      - name: M1
        kind: M
        marks: 1
        text: Takes the Poisson weight at 0.
        guidance: |-
          Any route will do:
          a table too.
      - { name: A1, kind: A, marks: 1, text: The right value., awarded by: "right, follow-through" }
---
A beam of $\\bar n = \\val{nbar}$ meets a splitter.
(a) How many?
(b) With what probability none?
`;

let counter = 0;
const nextId = () => `00000000-0000-4000-8000-${String(counter++).padStart(12, '0')}`;

function withoutIds(content: ProblemContent) {
  const parts = content.parts.map(({ id: _, criteria, ...part }) => ({
    ...part,
    criteria: criteria.map(({ id: __, ...criterion }) => criterion),
  }));
  return { ...content, parts };
}

describe('readProblemFile', () => {
  it('reads every key', () => {
    const content = readProblemFile(file, { nextId });
    expect(content).toMatchObject({
      title: 'A splitter: a counter',
      tags: ['beam splitters', 'counting'],
      statement: 'A beam of $\\bar n = \\val{nbar}$ meets a splitter.\n(a) How many?\n(b) With what probability none?',
      givens: [
        { name: 'nbar', kind: 'uniform', low: 2, high: 8, step: 0.5, symbol: '\\bar n', spellings: ['n'] },
        { name: 'T', kind: 'choice', values: [0.35, 0.5, 0.7] },
        { name: 'kappa', kind: 'fixed', value: 3, decimals: 1, unit: 'MHz', spellings: ['kappa', 'κ', '\\kappa'] },
        { name: 'R', kind: 'derived', expression: '1 - T', significantFigures: 3 },
      ],
      parts: [
        { heading: 'mean photons', standsAlone: ['right', 'unanswered'], workedPage: false },
        {
          workedPage: true,
          answer: { form: 'number', tolerance: { relative: 0.02, significantFigures: 3 }, followThrough: 0.75 },
          criteria: [
            { name: 'M1', kind: 'M', guidance: 'Any route will do:\na table too.' },
            { awardedBy: ['right', 'follow-through'] },
          ],
        },
      ],
    });
  });

  it('writes back the same text', () => {
    expect(writeProblemFile(readProblemFile(file))).toBe(file);
  });

  it('tells a criterion’s kind by its name', () => {
    const short = file.replace(
      '{ name: A1, kind: A, marks: 1, text: The right value., awarded by: right }',
      '{ name: ft1, text: Follows. }',
    );
    expect(readProblemFile(short).parts[0]?.criteria[0]).toMatchObject({ kind: 'ft', marks: 1 });
  });

  it('reads line ends and a byte order mark of any system', () => {
    expect(withoutIds(readProblemFile(`\uFEFF${file.replaceAll('\n', '\r\n')}`))).toEqual(
      withoutIds(readProblemFile(file)),
    );
  });

  it.each([
    ['', 'begins with a line “---”'],
    ['---\ntitle: x\n', 'begins with a line “---”'],
    [file.replace('heading: mean photons', 'headline: mean photons'), 'Line 12: There is no “headline” in “a”'],
    [file.replace('  b:\n', '  c:\n'), 'Parts are called a, b, c … in order; here comes b'],
    [file.replace('from: 2,', ''), 'A given has “value”'],
    [file.replace('step: 0.5', 'step: 0.35'), 'givens › nbar › step: Steps of 0.35 from 2 do not meet 8'],
    [file.replace('worked page: true', 'worked page: perhaps'), '“worked page” is yes or no'],
    [file.replace('awarded by: right }', 'awarded by: correct }'), '“correct” is none of them'],
    [file.replace('title: "A splitter: a counter"', 'title: "A splitter'), 'Line '],
    [file.replace('key: R*nbar', 'key: [R, nbar]'), '“key” is one value'],
    [file.replace('form: number', 'form: numeral'), '“form” is one of number, complex'],
  ])('says what is wrong with a file (%#)', (text, words) => {
    expect(() => readProblemFile(text)).toThrow(ProblemFileError);
    expect(() => readProblemFile(text)).toThrow(words);
  });
});

describe('writeProblemFile', () => {
  it('loses nothing, whatever the texts are', () => {
    const text = fc.string({ unit: 'grapheme', minLength: 1, maxLength: 40 }).map((each) => each.trim() || 'x');
    const content = readProblemFile(file, { nextId });
    fc.assert(
      fc.property(
        text,
        text,
        text,
        fc.constantFrom('yes', '4.0', '- a', '# b', '"', "'", 'null', '{', '1e5', '0x1F'),
        (title, feedback, guidance, odd) => {
          const [first, second] = content.parts;
          const changed = readDraft(
            draftOf({
              ...content,
              title: title.slice(0, 100),
              safety: odd,
              parts: [
                {
                  ...first!,
                  heading: odd,
                  criteria: first!.criteria.map((each) => ({ ...each, guidance, text: odd })),
                },
                {
                  ...second!,
                  answer: {
                    ...second!.answer,
                    slips: [{ expression: 'nbar', feedback, fraction: 1 / 3, name: odd }],
                  } as never,
                },
              ],
            }),
          ).content!;
          const read = readProblemFile(writeProblemFile(changed));
          expect(withoutIds(read)).toEqual(withoutIds(changed));
          expect(writeProblemFile(read)).toBe(writeProblemFile(changed));
        },
      ),
      { numRuns: 200, seed: 20261124 },
    );
  });

  it('keeps every answer form', () => {
    const content = readProblemFile(file);
    const answers = [
      { form: 'complex', key: 'i', tolerance: { absolute: 0.001 }, upToPhase: true },
      { form: 'distribution', key: '[0.5, 0.5]', tolerance: { totalVariation: 0.01 } },
      { form: 'state', key: 'ket(1)', minimumFidelity: 0.99 },
      { form: 'formula', key: 'x^2', variables: { x: [0, 2], n: { integers: [1, 5] } }, tolerance: { relative: 1e-6 } },
      { form: 'choice', options: ['A', { label: 'B', text: 'both' }], correct: ['B'], several: true },
      { form: 'worked' },
    ] as const;
    for (const answer of answers) {
      const one = { ...content, parts: [{ ...content.parts[0]!, answer, standsAlone: [] }], statement: 'One.' };
      const changed = readDraft(draftOf(one as never));
      expect(changed.faults).toEqual([]);
      expect(withoutIds(readProblemFile(writeProblemFile(changed.content!)))).toEqual(withoutIds(changed.content!));
    }
  });
});
