import { DOCUMENT, Injectable, PendingTasks, type Signal, inject, signal } from '@angular/core';
import type * as typeset from './typeset';

type Typesetting = typeof typeset;

/** Fetches what typesetting needs once the first text asks for it: the program and KaTeX's style sheet. */
@Injectable({ providedIn: 'root' })
export class Typesetter {
  private readonly document = inject(DOCUMENT);
  private readonly pendingTasks = inject(PendingTasks);
  private readonly loaded = signal<Typesetting | undefined>(undefined);
  private readonly styled = signal(false);
  private readonly unavailable = signal(false);
  private asked = false;

  /** The program, once it is there. */
  readonly typesetting: Signal<Typesetting | undefined> = this.loaded.asReadonly();
  /** Whether formulas can be shown: before, they would appear twice, as text and as MathML. */
  readonly stylesReady: Signal<boolean> = this.styled.asReadonly();
  /** Whether the program could not be fetched. */
  readonly failed: Signal<boolean> = this.unavailable.asReadonly();

  /** Begins to fetch; asking again does nothing, unless the first time failed. */
  load(): void {
    if (this.asked) return;
    this.asked = true;
    this.unavailable.set(false);
    this.addStyles();
    const done = this.pendingTasks.add();
    import('./typeset')
      .then(
        (module) => this.loaded.set(module),
        () => {
          this.asked = false;
          this.unavailable.set(true);
        },
      )
      .finally(done);
  }

  private addStyles(): void {
    if (this.document.querySelector('link[data-formulas]')) return;
    const link = this.document.createElement('link');
    link.rel = 'stylesheet';
    link.href = new URL('katex.css', this.document.baseURI).href;
    link.setAttribute('data-formulas', '');
    link.addEventListener('load', () => this.styled.set(true));
    link.addEventListener('error', () => {
      this.styled.set(true);
      link.remove();
    });
    this.document.head.append(link);
  }
}
