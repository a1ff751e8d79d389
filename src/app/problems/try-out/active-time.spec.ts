import { describe, expect, it } from 'vitest';
import { ActiveTime } from './active-time';

describe('ActiveTime', () => {
  it('counts from sign to sign, and a minute at most where there is none', () => {
    const time = new ActiveTime(10, 0);
    time.sign(5_000);
    expect(time.seconds(8_000)).toBe(18);
    expect(time.seconds(600_000)).toBe(75);
    time.sign(600_000);
    expect(time.seconds(601_500)).toBe(76);
  });

  it('never runs backwards', () => {
    const time = new ActiveTime(0, 5_000);
    time.sign(1_000);
    expect(time.seconds(1_000)).toBe(0);
  });
});
