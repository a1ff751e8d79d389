import { Injectable, signal } from '@angular/core';

/** The time, as a signal that moves every ten seconds: for "in 2 d 3 h" and the like. */
@Injectable({ providedIn: 'root' })
export class Now {
  private readonly moment = signal(Date.now());

  readonly now = this.moment.asReadonly();

  constructor() {
    setInterval(() => {
      this.moment.set(Date.now());
    }, 10_000);
  }
}
