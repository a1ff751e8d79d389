import { DOCUMENT, Injectable, inject } from '@angular/core';
import { holdLasts } from '@shared/marking';

/** What is kept, and how. */
interface Keeping {
  readonly holdsSomething: () => boolean;
  readonly renew: () => Promise<void>;
}

/** A third of a hold's life: two renewals may be lost before it ends. */
const every = holdLasts / 3;

/** How long a page counts as used after the last sign of life, in milliseconds. */
const usedFor = 5 * 60_000;

/** Renews what a bench holds while its page is visible and used. */
@Injectable()
export class HoldKeeper {
  private readonly document = inject(DOCUMENT);
  private keeping: Keeping | null = null;
  private timer: ReturnType<typeof setInterval> | undefined;
  private lastUse = Date.now();

  private readonly use = () => {
    const idle = Date.now() - this.lastUse;
    this.lastUse = Date.now();
    // Whoever comes back learns at once whether they still hold it.
    if (idle > every) this.renew();
  };
  private readonly look = () => {
    if (this.document.visibilityState === 'visible') this.use();
  };

  start(keeping: Keeping): void {
    this.keeping = keeping;
    this.lastUse = Date.now();
    this.timer = setInterval(() => {
      if (this.document.visibilityState === 'visible' && Date.now() - this.lastUse < usedFor) this.renew();
    }, every);
    for (const event of ['pointerdown', 'pointermove', 'keydown'] as const)
      this.document.addEventListener(event, this.use, { passive: true });
    this.document.addEventListener('visibilitychange', this.look);
  }

  stop(): void {
    clearInterval(this.timer);
    for (const event of ['pointerdown', 'pointermove', 'keydown'] as const)
      this.document.removeEventListener(event, this.use);
    this.document.removeEventListener('visibilitychange', this.look);
    this.keeping = null;
  }

  private renew(): void {
    if (this.keeping?.holdsSomething()) void this.keeping.renew();
  }
}
