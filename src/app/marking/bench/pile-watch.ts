import { DestroyRef, Injectable, computed, inject, signal } from '@angular/core';
import { takeUntilDestroyed } from '@angular/core/rxjs-interop';
import { firstValueFrom } from 'rxjs';
import type { CurrentAnswer, Pile } from '@shared/marking';
import type { Ruling } from '@shared/rulings';
import { MarkingApi } from '../../core/api/marking-api';
import { LiveConnection } from '../../core/live-connection';
import { withRuling } from '../rulings/ruling-lists';
import { change, takeFact } from './pile-facts';

/** A pile as it is now: fetched, then kept up by the facts that the server tells. One for each bench. */
@Injectable()
export class PileWatch {
  private readonly api = inject(MarkingApi);
  private readonly live = inject(LiveConnection);
  private readonly state = signal<Pile | null>(null);
  private readonly failure = signal<unknown>(null);
  private leave: (() => void) | null = null;
  private fetching: Promise<void> | null = null;
  private fetchOnceMore = false;

  /** The pile; null until it has come. */
  readonly pile = this.state.asReadonly();
  /** Why it could not be fetched; null where it could. */
  readonly problem = this.failure.asReadonly();
  readonly isLive = this.live.isLive;
  readonly notLiveSince = this.live.notLiveSince;
  /** Names this bench to the server. */
  readonly benchId: string = crypto.randomUUID();

  readonly answers = computed(() => new Map((this.state()?.answers ?? []).map((answer) => [answer.id, answer])));
  readonly team = computed(() => new Map((this.state()?.team ?? []).map((each) => [each.membershipId, each])));
  readonly patterns = computed(() => new Map((this.state()?.patterns ?? []).map((each) => [each.key, each])));

  /** Each answer's place in its pattern, from 1. */
  readonly places = computed(() => {
    const counts = new Map<string, number>();
    const places = new Map<string, number>();
    for (const { id, pattern } of this.state()?.answers ?? []) {
      const place = (counts.get(pattern) ?? 0) + 1;
      counts.set(pattern, place);
      places.set(id, place);
    }
    return places;
  });

  constructor() {
    this.live.all.pipe(takeUntilDestroyed()).subscribe((fact) => {
      const pile = this.state();
      if (!pile) return;
      const after = takeFact(pile, fact);
      if (after === 'fetch again') void this.fetch(pile.id);
      else this.state.set(after.pile);
    });
    inject(DestroyRef).onDestroy(() => {
      this.close();
    });
  }

  /** Opens a pile: watches first, then fetches, so that nothing happens unseen in between. */
  async open(pileId: string): Promise<void> {
    this.close();
    this.state.set(null);
    let first = true;
    this.leave = this.live.watchPile(pileId, this.benchId, () => {
      // After a break, and where the connection was slower than the first answer: facts may have been missed.
      if (!first || this.state() !== null) void this.fetch(pileId);
      first = false;
    });
    await this.fetch(pileId);
  }

  /** Fetches the pile again; several wishes at once are one. */
  async fetch(pileId: string): Promise<void> {
    if (this.fetching) {
      this.fetchOnceMore = true;
      return this.fetching;
    }
    this.fetching = this.fetchNow(pileId);
    await this.fetching;
    this.fetching = null;
    if (this.fetchOnceMore) {
      this.fetchOnceMore = false;
      await this.fetch(pileId);
    }
  }

  /** Takes in what the answer to one's own request says of an answer. */
  learn(current: CurrentAnswer): void {
    const { sequence: _sequence, ...answer } = current;
    this.state.update((pile) => pile && { ...pile, answers: change(pile, answer.id, () => answer) });
  }

  /** Takes in what the answer to one's own request says of a ruling. */
  learnRuling(ruling: Ruling): void {
    this.state.update((pile) => pile && { ...pile, rulings: withRuling(pile.rulings, ruling) });
  }

  private async fetchNow(pileId: string): Promise<void> {
    try {
      const pile = await firstValueFrom(this.api.pile(pileId));
      const before = this.state();
      if (before?.id !== pile.id || before.sequence <= pile.sequence) this.state.set(pile);
      this.failure.set(null);
    } catch (error) {
      // Whatever it is, the page says it where the pile would be.
      this.failure.set(error);
    }
  }

  private close(): void {
    this.leave?.();
    this.leave = null;
  }
}
