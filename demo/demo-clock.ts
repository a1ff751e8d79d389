import type { Clock } from '../server/context';
import { instantAt, wallClockOf } from '@shared/times';

export const hour = 3_600_000;
export const day = 24 * hour;

/** The course's time zone. */
export const timeZone = 'Europe/Oslo';

/** A clock that the demonstration moves through six weeks, so that everything bears the date on which it would have happened. */
export class DemoClock implements Clock {
  private moment: number;

  constructor(private readonly present: number) {
    this.moment = present;
  }

  now(): number {
    return this.moment;
  }

  /** Moves to a moment. */
  moveTo(moment: number): void {
    this.moment = Math.round(moment);
  }

  /** Moves on, never past the present. */
  moveOn(milliseconds: number): void {
    this.moment = Math.min(this.present, this.moment + milliseconds);
  }

  /** The moment at which the clock on the wall shows a time, some days before (or, below 0, after) today. */
  daysAgo(days: number, wallTime: string): number {
    const date = wallClockOf(this.present - days * day, timeZone).slice(0, 10);
    return instantAt(`${date}T${wallTime}`, timeZone);
  }
}
