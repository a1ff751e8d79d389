/** How long after the last sign of a person the time still counts, in milliseconds. */
const idleAfter = 60_000;

/** Counts the time that somebody is at a page: it stands still while nothing is typed, pointed at or scrolled. */
export class ActiveTime {
  private counted: number;
  private lastSign: number;

  /** @param seconds what was counted before @param now milliseconds */
  constructor(seconds: number, now: number) {
    this.counted = seconds * 1000;
    this.lastSign = now;
  }

  /** Says that the person did something. */
  sign(now: number): void {
    this.counted += Math.min(Math.max(0, now - this.lastSign), idleAfter);
    this.lastSign = now;
  }

  /** Whole seconds up to a moment. */
  seconds(now: number): number {
    return Math.floor((this.counted + Math.min(Math.max(0, now - this.lastSign), idleAfter)) / 1000);
  }
}
