import { describe, expect, it } from 'vitest';
import { fullMomentOf, instantAt, momentOf, secondOf, spanOf, wallClockOf } from './times';

const afternoon = Date.UTC(2026, 10, 24, 14, 36, 8);

describe('times', () => {
  it('are written in the course’s zone', () => {
    expect(momentOf(afternoon, 'Europe/London')).toBe('Tue 24 Nov, 14:36 GMT');
    expect(fullMomentOf(afternoon, 'Europe/Vienna')).toMatch(/^Tue 24 Nov 2026, 15:36 (CET|GMT\+1)$/);
    expect(secondOf(afternoon, 'Europe/London')).toBe('14:36:08');
  });

  it('say how long there is left', () => {
    expect(spanOf(((2 * 24 + 3) * 60 + 5) * 60_000)).toBe('2 d 3 h');
    expect(spanOf((3 * 60 + 24) * 60_000)).toBe('3 h 24 min');
    expect(spanOf(59_000)).toBe('under a minute');
  });

  it('come back from a wall clock, over both changes of the clock', () => {
    for (const instant of [
      afternoon - 8000,
      Date.UTC(2026, 2, 29, 3, 0),
      Date.UTC(2026, 9, 24, 22, 30),
      Date.UTC(2026, 9, 26, 3, 0),
    ])
      expect(instantAt(wallClockOf(instant, 'Europe/Vienna'), 'Europe/Vienna')).toBe(instant);
    // 02:30 does not exist on the last Sunday of March.
    expect(wallClockOf(instantAt('2026-03-29T02:30', 'Europe/Vienna'), 'Europe/Vienna')).toBe('2026-03-29T03:30');
    // 02:30 exists twice on the last Sunday of October: the first is summer time.
    expect(instantAt('2026-10-25T02:30', 'Europe/Vienna')).toBe(Date.UTC(2026, 9, 25, 0, 30));
    expect(instantAt('soon', 'Europe/Vienna')).toBeNaN();
  });
});
