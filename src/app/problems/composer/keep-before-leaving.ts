import type { CanDeactivateFn } from '@angular/router';

/** A page that has something to keep before it goes. */
interface Keeping {
  /** Keeps what is typed; true when it is safe to go. */
  keep(): Promise<boolean>;
}

/** Keeps the draft before the page goes; where that cannot be done the page stays and says why. */
export const keepBeforeLeaving: CanDeactivateFn<Keeping> = (page) => page.keep();
