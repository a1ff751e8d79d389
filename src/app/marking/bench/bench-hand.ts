import { LiveAnnouncer } from '@angular/cdk/a11y';
import { takeUntilDestroyed } from '@angular/core/rxjs-interop';
import { DestroyRef, Injectable, computed, effect, inject, signal, untracked } from '@angular/core';
import { firstValueFrom, type Observable } from 'rxjs';
import { currentAnswer, type BenchAnswer, type BenchOutcome, type CurrentAnswer, type Held } from '@shared/marking';
import { MarkingApi, type TakeWish } from '../../core/api/marking-api';
import { LiveConnection } from '../../core/live-connection';
import { RequestFailure, sentenceOf } from '../../core/api/request-failure';
import { dropDraft, firstDraft, keepDraft, keptDraft, totalOf, type BenchDraft } from './bench-draft';
import { BenchNotices } from './bench-notices';
import { HoldKeeper } from './hold-keeper';
import { PileWatch } from './pile-watch';

/** A save that was done, and can be taken back. */
export interface LastSave {
  readonly answerId: string;
  readonly code: string;
  readonly total: number;
  readonly at: number;
  readonly version: number;
  readonly markId: string;
  /** What was put down, so that taking it back loses nothing. */
  readonly draft: BenchDraft | null;
}

const nothingHeld: Held = { sequence: 0, inHand: null, reserved: [], expiresAt: null };

/**
 * What a bench has in hand: the answer that is marked now, the two kept ready behind it, and the drafts. A save shows the
 * next answer at once, which is there already, and is sent meanwhile; what is refused comes back with its draft.
 */
@Injectable()
export class BenchHand {
  private readonly api = inject(MarkingApi);
  private readonly announcer = inject(LiveAnnouncer);
  private readonly live = inject(LiveConnection);
  private readonly watch = inject(PileWatch);
  private readonly keeper = inject(HoldKeeper);
  private readonly notices = inject(BenchNotices);
  private readonly heldNow = signal<Held>(nothingHeld);
  private readonly details = signal<ReadonlyMap<string, BenchAnswer>>(new Map());
  private readonly drafts = signal<ReadonlyMap<string, BenchDraft>>(new Map());
  private readonly lookedAt = signal<string | null>(null);
  private readonly last = signal<LastSave | null>(null);
  private readonly underWay = signal(0);
  /** Acts at one bench happen one after the other. */
  private queue: Promise<unknown> = Promise.resolve();
  private readonly fetching = new Set<string>();

  readonly inHand = computed(() => this.heldNow().inHand);
  /** What the light table shows: what is in hand and kept ready; or one answer that is only looked at. */
  readonly shown = computed<readonly string[]>(() => {
    const looked = this.lookedAt();
    if (looked) return [looked];
    const { inHand, reserved } = this.heldNow();
    return inHand ? [inHand, ...reserved] : [];
  });
  /** The answer that is only looked at; null where the one in hand is shown. */
  readonly looking = this.lookedAt.asReadonly();
  readonly lastSave = this.last.asReadonly();
  readonly isSaving = computed(() => this.underWay() > 0);

  /** The answer that the dock is about: the one in hand, unless another is looked at. */
  readonly current = computed(() => {
    const id = this.lookedAt() ?? this.inHand();
    return id === null ? null : (this.details().get(id) ?? null);
  });
  readonly canMark = computed(() => this.lookedAt() === null && this.inHand() !== null);
  readonly draft = computed<BenchDraft | null>(() => {
    const answer = this.current();
    if (!answer) return null;
    // A mark that is not this person's to see is not guessed at.
    if (this.lookedAt() !== null && answer.standing === null) return null;
    return this.drafts().get(answer.id) ?? firstDraft(answer);
  });
  readonly total = computed(() => totalOf(this.draft()?.awarded ?? [], this.watch.pile()?.criteria ?? []));
  /** Whether the mark that stands is not this person's, so that a change needs a reason. */
  readonly needsReason = computed(() => {
    const standing = this.current()?.standing;
    return standing !== undefined && standing !== null && standing.markerId !== this.watch.pile()?.me;
  });

  constructor() {
    this.keeper.start({
      holdsSomething: () => this.inHand() !== null,
      renew: () => this.renew(),
    });
    // Others' deeds reach what is shown: a returned or newly marked answer is fetched again.
    effect(() => {
      const answers = this.watch.answers();
      const details = this.details();
      untracked(() => {
        for (const [id, detail] of details)
          if ((answers.get(id)?.version ?? 0) > detail.version && this.shown().includes(id)) void this.fetch(id);
      });
    });
    this.live.rejoined.pipe(takeUntilDestroyed()).subscribe(() => {
      this.notices.retryAll();
      void this.renew();
    });
    inject(DestroyRef).onDestroy(() => {
      this.keeper.stop();
    });
  }

  /** What is known of an answer; undefined while it is on its way. */
  detail(answerId: string): BenchAnswer | undefined {
    return this.details().get(answerId);
  }

  /** Takes an answer in hand: a named one, the next of a pattern, or simply the next. */
  take(wish: TakeWish = {}): Promise<void> {
    const { answerId } = wish;
    if (answerId !== undefined && !this.isForMe(answerId)) return this.lookAt(answerId);
    return this.inTurn(async () => {
      const pileId = this.watch.pile()?.id;
      if (!pileId) return;
      try {
        this.hold(await firstValueFrom(this.api.take(pileId, this.watch.benchId, wish)));
        this.lookedAt.set(null);
        this.notices.close(this.inHand());
        this.notices.close(null);
        this.announce();
      } catch (error) {
        this.notices.tell({ text: sentenceOf(error) });
        if (answerId !== undefined) await this.lookAt(answerId);
      }
    });
  }

  /** Takes in what the bench holds after an act that changed more than the answer in hand. */
  takeOver(held: Held): void {
    this.hold(held);
  }

  /** Goes back from an answer that was looked at to the one in hand. */
  goBack(): void {
    this.lookedAt.set(null);
    this.notices.close(null);
  }

  /** Awards a criterion, or takes the award back. */
  toggle(criterionId: string): void {
    this.changeDraft((draft) => ({
      ...draft,
      awarded: draft.awarded.includes(criterionId)
        ? draft.awarded.filter((id) => id !== criterionId)
        : [...draft.awarded, criterionId],
    }));
  }

  write(text: { readonly remark?: string; readonly reason?: string }): void {
    this.changeDraft((draft) => ({ ...draft, ...text }));
  }

  /** Saves the mark of the answer in hand, and shows the next at once. @returns whether there was something to save */
  save(): boolean {
    const answer = this.current();
    const draft = this.draft();
    const pile = this.watch.pile();
    if (!answer || !draft || !pile || !this.canMark()) return false;
    if (this.needsReason() && draft.reason.trim() === '') {
      this.notices.tell({ answerId: answer.id, text: 'Say why the mark changes: it is not your own.' });
      return false;
    }
    this.keepDraftOf(answer.id, draft);
    this.showNext();
    void this.send(answer, () =>
      this.api.mark(answer.id, answer.version, draft.key, {
        benchId: this.watch.benchId,
        criteria: pile.criteria.map(({ id }) => ({ criterionId: id, awarded: draft.awarded.includes(id) })),
        remark: draft.remark,
        ...(draft.reason.trim() ? { reason: draft.reason.trim() } : {}),
      }),
    );
    return true;
  }

  /** Sets the answer in hand aside for the lead. */
  setAside(reason: string): void {
    const answer = this.current();
    if (!answer || !this.canMark()) return;
    this.showNext();
    void this.send(answer, () => this.api.setAside(answer.id, answer.version, this.watch.benchId, reason));
  }

  /** Returns an answer that was set aside to the pile. */
  returnToPile(): void {
    const answer = this.current();
    if (!answer) return;
    void this.send(answer, () => this.api.returnAnswer(answer.id, answer.version, this.watch.benchId)).then(() =>
      this.fetch(answer.id),
    );
  }

  /** Takes the last save back, and its answer in hand again, with what was put down. */
  undo(): void {
    const save = this.last();
    if (!save) return;
    this.last.set(null);
    void this.inTurn(async () => {
      const { answerId, version, markId, draft } = save;
      try {
        const outcome = await firstValueFrom(this.api.undoMark(answerId, version, this.watch.benchId, markId));
        this.watch.learn(outcome.answer);
        this.details.update((details) => without(details, answerId));
        if (draft) this.keepDraftOf(answerId, { ...draft, key: crypto.randomUUID() });
        void this.announcer.announce(`The mark of ${save.code} was taken back.`, 'polite');
      } catch (error) {
        this.notices.tell({ text: sentenceOf(error) });
      }
    }).then(() => this.take({ answerId: save.answerId }));
  }

  private send(answer: BenchAnswer, request: () => Observable<BenchOutcome>): Promise<void> {
    // Counted from now on, not from when its turn comes: what the server says of holds before that is out of date.
    this.underWay.update((count) => count + 1);
    return this.inTurn(async () => {
      try {
        const outcome = await firstValueFrom(request());
        this.watch.learn(outcome.answer);
        if (outcome.mark) this.remember(answer, outcome);
        this.forget(answer.id);
        if (this.underWay() === 1) this.hold(outcome.held);
      } catch (error) {
        this.refused(answer, error, () => void this.send(answer, request));
      } finally {
        this.underWay.update((count) => count - 1);
      }
    });
  }

  private remember(answer: BenchAnswer, { mark, version }: BenchOutcome): void {
    if (!mark) return;
    const { id: answerId, code } = answer;
    const draft = this.drafts().get(answerId) ?? null;
    this.last.set({ answerId, code, total: mark.total, at: mark.at, version, markId: mark.id, draft });
  }

  private refused(answer: BenchAnswer, error: unknown, retry: () => void): void {
    const current = currentIn(error);
    const { id: answerId, code } = answer;
    if (current) {
      this.watch.learn(current);
      const holder = this.otherHolder(answerId);
      const text = holder
        ? `${lastName(holder.name)} holds ${code} now; your draft is kept.`
        : `${code} was not saved: ${sentenceOf(error)}`;
      this.notices.tell({ answerId, text, canTake: !holder });
    } else {
      const again = error instanceof RequestFailure && (error.isOffline || error.details.status >= 500) ? retry : null;
      const text = `${code} is not saved yet. ${sentenceOf(error)}`;
      this.notices.tell({ answerId, text, canTake: again === null, retry: again });
    }
    // Whether what is shown as in hand is held after all, the server says.
    setTimeout(() => void this.renew());
  }

  private async renew(): Promise<void> {
    const pileId = this.watch.pile()?.id;
    const before = this.heldNow();
    if (!pileId || this.underWay() > 0) return;
    try {
      const held = await firstValueFrom(this.api.renewHolds(pileId, this.watch.benchId));
      if (this.underWay() > 0 || this.heldNow() !== before) return;
      if (before.inHand !== null && held.inHand !== before.inHand) this.lose(before.inHand);
      else if (held.inHand !== null) this.hold(held);
    } catch (error) {
      // Offline: the hold may end; saving says so then. Anything else shows at the next act.
      if (!(error instanceof RequestFailure)) throw error;
    }
  }

  /** The hold in hand has ended. Where nobody else took it, it is simply taken again; the draft is kept either way. */
  private lose(answerId: string): void {
    const draft = this.drafts().get(answerId);
    if (draft) keepDraft(answerId, draft);
    this.heldNow.set(nothingHeld);
    const code = this.details().get(answerId)?.code ?? 'this answer';
    const holder = this.otherHolder(answerId);
    if (!holder && this.watch.answers().get(answerId)?.state === 'waits') {
      void this.take({ answerId });
      return;
    }
    const text = holder
      ? `${lastName(holder.name)} holds ${code} now; your draft is kept.`
      : `Your hold on ${code} has ended; your draft is kept.`;
    this.notices.tell({ answerId, text, canTake: !holder });
  }

  /** A colleague who holds an answer, as far as the pile tells. */
  private otherHolder(answerId: string) {
    const hold = this.watch.answers().get(answerId)?.hold;
    return hold && hold.holder !== this.watch.pile()?.me ? this.watch.team().get(hold.holder) : undefined;
  }

  /** Whether an answer is this person's to take in hand, as far as the pile tells; the server decides. */
  private isForMe(answerId: string): boolean {
    const pile = this.watch.pile();
    const answer = this.watch.answers().get(answerId);
    if (!pile || !answer) return true;
    if (!pile.open || this.otherHolder(answerId)) return false;
    if (pile.seesAllMarks || answer.state === 'waits') return true;
    return answer.state === 'marked' && answer.markerId === pile.me;
  }

  private async lookAt(answerId: string): Promise<void> {
    if (!this.details().has(answerId)) await this.fetch(answerId);
    if (this.details().has(answerId)) this.lookedAt.set(answerId);
  }

  private hold(held: Held): void {
    const order = this.watch.pile()?.answers.map((answer) => answer.id) ?? [];
    const from = held.inHand === null ? 0 : order.indexOf(held.inHand);
    const distance = (id: string) => (order.indexOf(id) - from + order.length) % Math.max(1, order.length);
    const reserved = [...held.reserved].sort((one, other) => distance(one) - distance(other));
    this.heldNow.set({ ...held, reserved });
    for (const id of this.shown()) if (!this.details().has(id)) void this.fetch(id);
    const { inHand } = held;
    const kept = inHand === null ? null : keptDraft(inHand);
    if (inHand !== null && kept && !this.drafts().has(inHand))
      this.drafts.update((drafts) => new Map(drafts).set(inHand, kept));
  }

  /** The next answer is there already: it is shown before the server has answered. */
  private showNext(): void {
    const { reserved, ...held } = this.heldNow();
    this.heldNow.set({ ...held, inHand: reserved[0] ?? null, reserved: reserved.slice(1) });
    this.notices.close(null);
    this.announce();
  }

  private async fetch(answerId: string): Promise<void> {
    if (this.fetching.has(answerId)) return;
    this.fetching.add(answerId);
    try {
      const detail = await firstValueFrom(this.api.benchAnswer(answerId));
      this.details.update((details) => new Map(details).set(answerId, detail));
    } catch (error) {
      this.notices.tell({ text: sentenceOf(error) });
    } finally {
      this.fetching.delete(answerId);
    }
  }

  private changeDraft(to: (draft: BenchDraft) => BenchDraft): void {
    const answer = this.current();
    const draft = this.draft();
    if (!answer || !draft || !this.canMark()) return;
    this.keepDraftOf(answer.id, to(draft));
  }

  private keepDraftOf(answerId: string, draft: BenchDraft): void {
    this.drafts.update((drafts) => new Map(drafts).set(answerId, draft));
    keepDraft(answerId, draft);
  }

  private forget(answerId: string): void {
    this.drafts.update((drafts) => without(drafts, answerId));
    this.details.update((details) => without(details, answerId));
    dropDraft(answerId);
  }

  private announce(): void {
    const id = this.inHand();
    const answer = id === null ? undefined : this.watch.answers().get(id);
    const pattern = answer && this.watch.patterns().get(answer.pattern);
    const words = answer
      ? `${answer.code} in hand, ${String(this.watch.places().get(answer.id) ?? 0)} of ${String(pattern?.total ?? 0)}, ${pattern?.name ?? ''}`
      : 'Nothing is in hand.';
    void this.announcer.announce(words, 'polite');
  }

  private inTurn(act: () => Promise<void>): Promise<void> {
    const done = this.queue.then(act);
    this.queue = done.catch(() => undefined);
    return done;
  }
}

function currentIn(error: unknown): CurrentAnswer | null {
  if (!(error instanceof RequestFailure) || error.details.status !== 412) return null;
  const parsed = currentAnswer.safeParse(error.details.current);
  return parsed.success ? parsed.data : null;
}

function lastName(name: string): string {
  return name.split(' ').at(-1) ?? name;
}

function without<Value>(map: ReadonlyMap<string, Value>, id: string): ReadonlyMap<string, Value> {
  const rest = new Map(map);
  rest.delete(id);
  return rest;
}
