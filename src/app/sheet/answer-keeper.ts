import { computed, signal } from '@angular/core';
import { type Observable, firstValueFrom } from 'rxjs';
import { type SavedAnswer, savedAnswer } from '@shared/scripts';
import { newIdempotencyKey } from '../core/api/api-client';
import { RequestFailure, sentenceOf } from '../core/api/request-failure';
import type { AnswerSave } from '../core/api/scripts-api';
import type { KeptCopies } from './kept-copies';

/** What a keeper needs of the page around it. */
export interface KeeperPlace {
  readonly copies: KeptCopies;
  readonly save: (save: AnswerSave) => Observable<SavedAnswer>;
  readonly saveInPassing: (save: AnswerSave) => void;
  /** The sheet does not take anything any more. */
  readonly closed: () => void;
}

/**
 * `kept`: the server has it. `waiting`: typed, on its way soon. `saving`: on its way. `offline`: tried in vain, tried again by
 * itself. `clash`: another window saved something else. `refused`: the server does not take it.
 */
export type Keeping = 'kept' | 'waiting' | 'saving' | 'offline' | 'clash' | 'refused';

/** How long the typing must pause before it is sent, in milliseconds. */
const pause = 900;

/** Longest time between two tries, in milliseconds. */
const longestWait = 30_000;

/**
 * Keeps one answer: every letter in this browser at once, and every pause on the server. Saves go one after another, so that
 * they arrive in order; one that gets no answer is sent again under the same key.
 */
export class AnswerKeeper {
  private readonly typed = signal('');
  private readonly state = signal<Keeping>('kept');
  private readonly lastSavedAt = signal<number | null>(null);
  private readonly other = signal<SavedAnswer | null>(null);
  private readonly refusalText = signal('');
  private saved: string;
  private version: number;
  private key = '';
  private keyedText: string | null = null;
  private sent: readonly string[] = [];
  private timer: ReturnType<typeof setTimeout> | undefined;
  private tries = 0;
  private inFlight: Promise<void> | null = null;
  /** Nothing is taken any more, whatever is typed. */
  private isOver = false;

  readonly text = this.typed.asReadonly();
  readonly keeping = this.state.asReadonly();
  readonly savedAt = this.lastSavedAt.asReadonly();
  /** What another window saved meanwhile. */
  readonly theirs = this.other.asReadonly();
  readonly refusal = this.refusalText.asReadonly();
  readonly isKept = computed(() => this.state() === 'kept');

  constructor(
    readonly answerId: string,
    from: { readonly answer: string; readonly version: number; readonly savedAt: number | null },
    private readonly place: KeeperPlace,
  ) {
    this.saved = from.answer;
    this.version = from.version;
    this.typed.set(from.answer);
    this.lastSavedAt.set(from.savedAt);
  }

  /** Takes up what this browser kept from before. */
  recover(isOpen: boolean): void {
    const copy = this.place.copies.all()[this.answerId];
    if (!copy) return;
    if (copy.text === this.saved) {
      this.place.copies.forget(this.answerId);
      return;
    }
    this.typed.set(copy.text);
    this.sent = copy.sent;
    if (!isOpen) {
      this.isOver = true;
      this.state.set('refused');
      this.refusalText.set('The sheet closed before this reached the server. It is kept in this browser only.');
    } else if (copy.version === this.version) {
      this.key = copy.key;
      this.keyedText = copy.text;
      this.saveSoon(0);
    } else if (copy.sent.includes(this.saved)) this.saveSoon(0);
    else
      this.clashWith({
        answerId: this.answerId,
        answer: this.saved,
        version: this.version,
        savedAt: this.lastSavedAt(),
      });
  }

  /** Takes what is typed. */
  type(text: string): void {
    if (text === this.typed()) return;
    this.typed.set(text);
    if (text === this.saved && !this.inFlight && this.state() !== 'clash') {
      clearTimeout(this.timer);
      this.place.copies.forget(this.answerId);
      this.state.set('kept');
      return;
    }
    this.keepHere();
    if (this.state() === 'clash' || this.isOver) return;
    this.saveSoon(this.state() === 'offline' ? 0 : pause);
  }

  /** Sends what is not sent yet, and waits until it is kept or cannot be. */
  async flush(): Promise<void> {
    clearTimeout(this.timer);
    await this.inFlight;
    if (this.typed() !== this.saved && this.state() !== 'clash' && this.state() !== 'refused') await this.send();
  }

  /** Tries again now: the connection is back. */
  tryNow(): void {
    if (this.state() === 'offline') this.saveSoon(0);
  }

  /** The page is going. */
  leave(): void {
    if (this.typed() === this.saved || this.state() === 'clash' || this.state() === 'refused') return;
    const save = this.nextSave();
    this.keepHere();
    this.place.saveInPassing(save);
  }

  /** The student decides between two windows. */
  settle(which: 'mine' | 'theirs'): void {
    const theirs = this.other();
    if (!theirs) return;
    this.other.set(null);
    this.saved = theirs.answer;
    this.version = theirs.version;
    this.lastSavedAt.set(theirs.savedAt);
    if (which === 'theirs') {
      this.typed.set(theirs.answer);
      this.place.copies.forget(this.answerId);
      this.state.set('kept');
    } else this.saveSoon(0);
  }

  /** Ends everything that would happen later. */
  stop(): void {
    clearTimeout(this.timer);
  }

  private saveSoon(delay: number): void {
    clearTimeout(this.timer);
    if (!this.inFlight) this.state.set('waiting');
    this.timer = setTimeout(() => void this.send(), delay);
  }

  private nextSave(): AnswerSave {
    const text = this.typed();
    if (this.keyedText !== text) {
      this.key = newIdempotencyKey();
      this.keyedText = text;
    }
    this.sent = [...this.sent.filter((each) => each !== text), text].slice(-20);
    return { answerId: this.answerId, text, version: this.version, idempotencyKey: this.key };
  }

  private keepHere(): void {
    const key = this.keyedText === this.typed() ? this.key : newIdempotencyKey();
    this.place.copies.keep(this.answerId, {
      text: this.typed(),
      version: this.version,
      key,
      sent: [...this.sent],
      at: Date.now(),
    });
  }

  private send(): Promise<void> {
    this.inFlight ??= this.sendNow().finally(() => {
      this.inFlight = null;
      const state = this.state();
      if (this.typed() !== this.saved && (state === 'kept' || state === 'saving')) this.saveSoon(pause);
    });
    return this.inFlight;
  }

  private async sendNow(): Promise<void> {
    if (this.typed() === this.saved) {
      this.state.set('kept');
      return;
    }
    const save = this.nextSave();
    this.keepHere();
    this.state.set('saving');
    try {
      this.take(await firstValueFrom(this.place.save(save)));
    } catch (error) {
      this.fail(error);
    }
  }

  private take(answer: SavedAnswer): void {
    this.tries = 0;
    this.saved = answer.answer;
    this.version = answer.version;
    this.keyedText = null;
    this.lastSavedAt.set(answer.savedAt);
    this.state.set('kept');
    if (this.typed() === this.saved) this.place.copies.forget(this.answerId);
    else this.keepHere();
  }

  private fail(error: unknown): void {
    const status = error instanceof RequestFailure ? error.details.status : -1;
    if (status === 412 && error instanceof RequestFailure) {
      const theirs = savedAnswer.parse(error.details.current);
      // A save of our own of which we never heard: go on from there.
      if (this.sent.includes(theirs.answer)) this.take(theirs);
      else this.clashWith(theirs);
      return;
    }
    if (status === 400 || status === 404 || status === 409) {
      this.isOver = status !== 400;
      this.state.set('refused');
      this.refusalText.set(sentenceOf(error));
      if (status === 409) this.place.closed();
      return;
    }
    this.state.set('offline');
    this.tries += 1;
    clearTimeout(this.timer);
    this.timer = setTimeout(() => void this.send(), Math.min(longestWait, 1_000 * 2 ** this.tries));
  }

  private clashWith(theirs: SavedAnswer): void {
    this.other.set(theirs);
    this.state.set('clash');
    this.keepHere();
  }
}
