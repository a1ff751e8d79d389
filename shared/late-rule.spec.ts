import { describe, expect, it } from 'vitest';
import { deductionFor, lateDays, lateRule, type LateRule } from './late-rule';
import { instantAt } from './times';

const zone = 'Europe/Vienna';
const at = (wallClock: string, timeZone = zone) => instantAt(wallClock, timeZone);

/** Friday 27 November 2026, 18:00. */
const friday = at('2026-11-27T18:00');

describe('late days', () => {
  it.each([
    ['2026-11-27T18:00', 0, 0],
    ['2026-11-27T18:01', 1, 1],
    ['2026-11-28T18:00', 1, 1],
    ['2026-11-28T18:01', 2, 1],
    ['2026-11-29T23:59', 3, 1],
    ['2026-11-30T18:00', 3, 1],
    ['2026-11-30T18:01', 4, 2],
    ['2026-12-01T18:00', 4, 2],
    ['2026-12-04T18:01', 8, 6],
  ])('from Friday 18:00 until %s: %i days, %i working days', (until, days, workingDays) => {
    expect(lateDays(at(until), friday, 'started day', zone)).toBe(days);
    expect(lateDays(at(until), friday, 'started working day', zone)).toBe(workingDays);
  });

  it.each([
    ['closing on a Saturday: the weekend costs nothing', '2026-11-28T12:00', '2026-11-29T23:00', 2, 0],
    ['and Monday begins the first working day', '2026-11-28T12:00', '2026-11-30T00:01', 2, 1],
    ['Thursday to Friday is one', '2026-11-26T18:00', '2026-11-27T17:59', 1, 1],
    ['Sunday night to Monday night is one', '2026-11-29T23:00', '2026-11-30T23:59', 2, 1],
  ])('%s', (_, due, handedIn, days, workingDays) => {
    expect(lateDays(at(handedIn), at(due), 'started day', zone)).toBe(days);
    expect(lateDays(at(handedIn), at(due), 'started working day', zone)).toBe(workingDays);
  });

  it('counts by the clock on the wall where it is put forward or back', () => {
    // Forward on 28 March 2027: 23 hours lie between the two.
    const spring = at('2027-03-27T18:00');
    expect(at('2027-03-28T18:00') - spring).toBe(23 * 3_600_000);
    expect(lateDays(at('2027-03-28T18:00'), spring, 'started day', zone)).toBe(1);
    expect(lateDays(at('2027-03-28T18:01'), spring, 'started day', zone)).toBe(2);
    // Back on 25 October 2026: 25 hours.
    const autumn = at('2026-10-24T18:00');
    expect(at('2026-10-25T18:00') - autumn).toBe(25 * 3_600_000);
    expect(lateDays(at('2026-10-25T18:00'), autumn, 'started day', zone)).toBe(1);
    expect(lateDays(autumn + 25 * 3_600_000 + 1000, autumn, 'started day', zone)).toBe(2);
    // In the hour that comes twice something later is later still.
    const twice = at('2026-10-25T02:50');
    expect(lateDays(twice + 3_000_000, twice, 'started day', zone)).toBe(1);
  });

  it('takes weekends where the course is', () => {
    // Friday 20:00 in Honolulu is Saturday in Vienna.
    const due = at('2026-11-27T20:00', 'Pacific/Honolulu');
    const later = at('2026-11-27T23:00', 'Pacific/Honolulu');
    expect(lateDays(later, due, 'started working day', 'Pacific/Honolulu')).toBe(1);
    expect(lateDays(later, due, 'started working day', zone)).toBe(0);
  });
});

describe('a deduction', () => {
  const rule = (overrides: Partial<LateRule> = {}): LateRule => ({
    percent: 10,
    of: 'awarded',
    per: 'started day',
    until: at('2026-12-11T18:00'),
    ...overrides,
  });
  const on = (wallClock: string) => ({ at: at(wallClock), due: friday, timeZone: zone });

  it.each([
    ['awarded', 10, '2026-11-28T10:00', 17.5, 20, 1.75],
    ['awarded', 10, '2026-11-29T10:00', 17.5, 20, 3.5],
    ['available', 10, '2026-11-29T10:00', 17.5, 20, 4],
    ['available', 10, '2026-11-29T10:00', 3, 20, 3],
    ['awarded', 33, '2026-12-04T10:00', 12, 20, 12],
    ['awarded', 5, '2026-11-28T10:00', 6.65, 20, 0.33],
    ['awarded', 0, '2026-11-28T10:00', 12, 20, 0],
  ] as const)(
    'of the marks %s, %i %% a day, at %s: of %d out of %d it takes %d',
    (of, percent, when, has, all, off) => {
      expect(deductionFor(rule({ of, percent }), on(when), has, all)?.marks).toBe(off);
    },
  );

  it('says what it is', () => {
    expect(deductionFor(rule(), on('2026-11-29T10:00'), 17.5, 20)?.sentence).toBe(
      'Handed in late: 2 started days after the closing time. 20 % of the marks awarded, 3.5 marks, are taken off.',
    );
    expect(deductionFor(rule({ per: 'started working day' }), on('2026-11-28T10:00'), 10, 20)?.sentence).toBe(
      'Handed in late: 1 started working day after the closing time. 10 % of the marks awarded, 1 mark, is taken off.',
    );
    expect(deductionFor(rule(), on('2026-11-27T18:00'), 17.5, 20)).toBeNull();
  });

  it('takes no percentage beyond 100', () => {
    expect(lateRule.safeParse({ ...rule(), percent: 101 }).success).toBe(false);
    expect(lateRule.safeParse({ ...rule(), percent: -1 }).success).toBe(false);
  });
});
