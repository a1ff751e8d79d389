import { describe, expect, it } from 'vitest';
import { resultsAsCsv, sumOf } from './set-results';

const table = (name: string) => ({
  setId: 'ad0c8a1f-9f3e-4d0e-8b56-0a4d9a5f9b11',
  number: 4,
  title: 'Losses',
  stage: 'released' as const,
  parts: [],
  outOf: 3,
  takesLateWork: false,
  items: [{ code: 'K7QF', name, email: 'n@northmere.example', marks: [], late: null, total: 2.5 }],
  total: 1,
});

describe('results as CSV', () => {
  it.each(['=1+1', '+1', '-1', '@SUM(A1)', '\tx'])(
    'take the edge off %j, which a spreadsheet would calculate',
    (name) => {
      expect(resultsAsCsv(table(name))).toContain(`K7QF,'${name},`);
    },
  );

  it('quote commas, quotes and lines', () => {
    expect(resultsAsCsv(table('Fair"weather, Noor\n'))).toContain('K7QF,"Fair""weather, Noor\n",');
  });
});

describe('sums of marks', () => {
  it('add up as on paper, and take nothing for what is missing', () => {
    expect(sumOf([0.1, 0.2, null])).toBe(0.3);
  });
});
