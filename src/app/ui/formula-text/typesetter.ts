import { DOCUMENT, Injectable, PendingTasks, type Signal, computed, inject, signal } from '@angular/core';
import type * as typeset from './typeset';

type Typesetting = typeof typeset;

/** The faces that nearly every statement is set in, as `document.fonts` asks for them. */
const facesOfStatements = ['17px Stix', '17px KaTeX_Main', 'italic 17px KaTeX_Math'];

/** How long a page waits for its faces before it shows in others, in milliseconds. */
const longestWait = 2_000;

/** Fetches what typesetting needs once the first text asks for it: the program and KaTeX's style sheet. */
@Injectable({ providedIn: 'root' })
export class Typesetter {
  private readonly document = inject(DOCUMENT);
  private readonly pendingTasks = inject(PendingTasks);
  private readonly loaded = signal<Typesetting | undefined>(undefined);
  private readonly styled = signal(false);
  private readonly unavailable = signal(false);
  private readonly faced = signal(false);
  private asked = false;

  /** The program, once it is there. */
  readonly typesetting: Signal<Typesetting | undefined> = this.loaded.asReadonly();
  /** Whether formulas can be shown: before, they would appear twice, as text and as MathML. */
  readonly stylesReady: Signal<boolean> = this.styled.asReadonly();
  /** Whether the program could not be fetched. */
  readonly failed: Signal<boolean> = this.unavailable.asReadonly();

  /** Whether a page of statements can be shown without moving once its formulas and faces arrive. */
  readonly ready: Signal<boolean> = computed(
    () => this.unavailable() || (this.loaded() !== undefined && this.styled() && this.faced()),
  );

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
    const whenStyled = (): void => {
      this.styled.set(true);
      void this.loadFaces();
    };
    const link = this.document.createElement('link');
    link.rel = 'stylesheet';
    link.href = new URL('katex.css', this.document.baseURI).href;
    link.setAttribute('data-formulas', '');
    link.addEventListener('load', whenStyled);
    link.addEventListener('error', () => {
      whenStyled();
      link.remove();
    });
    this.document.head.append(link);
  }

  private async loadFaces(): Promise<void> {
    // Absent where tests run without a browser.
    const faces = 'fonts' in this.document ? facesOfStatements.map((face) => this.document.fonts.load(face)) : [];
    const tooLong = new Promise((resolve) => setTimeout(resolve, longestWait));
    await Promise.race([Promise.allSettled(faces), tooLong]);
    this.faced.set(true);
  }
}
