import { LiveAnnouncer } from '@angular/cdk/a11y';
import { DestroyRef, Injectable, computed, effect, inject, signal, untracked } from '@angular/core';
import { firstValueFrom, type Observable } from 'rxjs';
import { currentAnswer, type BenchAnswer, type BenchOutcome, type CurrentAnswer, type Held } from '@shared/marking';
import { MarkingApi, type TakeWish } from '../../core/api/marking-api';
import { RequestFailure, sentenceOf } from '../../core/api/request-failure';
import { dropDraft, firstDraft, keepDraft, keptDraft, totalOf, type BenchDraft } from './bench-draft';
import { HoldKeeper } from './hold-keeper';
import { PileWatch } from './pile-watch';

/** Something that did not go as wished: what happened to which answer, and what can be done. */
export interface BenchNotice {
  readonly answerId: string | null;
  readonly text: string;
  /** Whether the answer can be taken in hand again. */
  readonly canTake: boolean;
  /** Whether the same save can be tried again as it was. */
  readonly retry: (() => void) | null;
}

/** A save that was done, and can be taken back. */
export interface LastSave {
  readonly answerId: string;
  readonly code: string;
  readonly total: number;
  readonly at: number;
  readonly version: number;
  readonly markId: string;
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
  private readonly watch = inject(PileWatch);
  private readonly keeper = inject(HoldKeeper);
  private readonly heldNow = signal<Held>(nothingHeld);
  private readonly details = signal<ReadonlyMap<string, BenchAnswer>>(new Map());
  private readonly drafts = signal<ReadonlyMap<string, BenchDraft>>(new Map());
  private readonly lookedAt = signal<string | null>(null);
  private readonly noticed = signal<BenchNotice | null>(null);
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
  readonly notice = this.noticed.asReadonly();
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
    return answer ? (this.drafts().get(answer.id) ?? firstDraft(answer)) : null;
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
    return this.inTurn(async () => {
      const pileId = this.watch.pile()?.id;
      if (!pileId) return;
      try {
        this.hold(await firstValueFrom(this.api.take(pileId, this.watch.benchId, wish)));
        this.lookedAt.set(null);
        this.noticed.set(null);
        this.announce();
      } catch (error) {
        if (wish.answerId === undefined) this.tell(sentenceOf(error), null);
        else await this.lookAt(wish.answerId, error);
      }
    });
  }

  /** Goes back from an answer that was looked at to the one in hand. */
  goBack(): void {
    this.lookedAt.set(null);
    this.noticed.set(null);
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

  /** Saves the mark of the answer in hand, and shows the next at once. */
  save(): void {
    const answer = this.current();
    const draft = this.draft();
    const pile = this.watch.pile();
    if (!answer || !draft || !pile || !this.canMark()) return;
    if (this.needsReason() && draft.reason.trim() === '') {
      this.tell('Say why the mark changes: it is not your own.', answer.id);
      return;
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

  /** Takes the last save back, and its answer in hand again. */
  undo(): void {
    const save = this.last();
    if (!save) return;
    this.last.set(null);
    void this.inTurn(async () => {
      try {
        const outcome = await firstValueFrom(
          this.api.undoMark(save.answerId, save.version, this.watch.benchId, save.markId),
        );
        this.watch.learn(outcome.answer);
        this.details.update((details) => without(details, save.answerId));
        void this.announcer.announce(`The mark of ${save.code} was taken back.`, 'polite');
      } catch (error) {
        this.tell(sentenceOf(error), null);
        return;
      }
    }).then(() => this.take({ answerId: save.answerId }));
  }

  /** Closes the notice; a draft that it was about is forgotten where the answer is not in hand. */
  dismiss(): void {
    this.noticed.set(null);
  }

  private send(answer: BenchAnswer, request: () => Observable<BenchOutcome>): Promise<void> {
    // Counted from now on, not from when its turn comes: what the server says of holds before that is out of date.
    this.underWay.update((count) => count + 1);
    return this.inTurn(async () => {
      try {
        const outcome = await firstValueFrom(request());
        this.watch.learn(outcome.answer);
        this.forget(answer.id);
        if (outcome.mark) this.remember(answer, outcome);
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
    this.last.set({ answerId, code, total: mark.total, at: mark.at, version, markId: mark.id });
  }

  private refused(answer: BenchAnswer, error: unknown, retry: () => void): void {
    const current = currentIn(error);
    if (current) {
      this.watch.learn(current);
      const holder = current.hold ? this.watch.team().get(current.hold.holder) : undefined;
      const mine = current.hold?.holder === this.watch.pile()?.me;
      const text =
        holder && !mine
          ? `${lastName(holder.name)} holds ${answer.code} now; your draft is kept.`
          : `${answer.code} was not saved: ${sentenceOf(error)}`;
      this.noticed.set({ answerId: answer.id, text, canTake: !holder || mine, retry: null });
    } else {
      const again = error instanceof RequestFailure && (error.isOffline || error.details.status >= 500) ? retry : null;
      const text = `${answer.code} is not saved yet. ${sentenceOf(error)}`;
      this.noticed.set({ answerId: answer.id, text, canTake: again === null, retry: again });
    }
    void this.announcer.announce(this.noticed()?.text ?? '', 'assertive');
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

  private lose(answerId: string): void {
    const answer = this.details().get(answerId);
    const draft = this.drafts().get(answerId);
    if (draft) keepDraft(answerId, draft);
    const hold = this.watch.answers().get(answerId)?.hold;
    const holder = hold ? this.watch.team().get(hold.holder) : undefined;
    const code = answer?.code ?? 'this answer';
    this.noticed.set({
      answerId,
      text: holder
        ? `${lastName(holder.name)} holds ${code} now; your draft is kept.`
        : `Your hold on ${code} has ended; your draft is kept.`,
      canTake: !holder,
      retry: null,
    });
    this.heldNow.set(nothingHeld);
    void this.announcer.announce(this.noticed()?.text ?? '', 'assertive');
  }

  private async lookAt(answerId: string, error: unknown): Promise<void> {
    await this.fetch(answerId);
    if (!this.details().has(answerId)) {
      this.tell(sentenceOf(error), null);
      return;
    }
    this.lookedAt.set(answerId);
    this.tell(sentenceOf(error), null);
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
    this.noticed.set(null);
    this.announce();
  }

  private async fetch(answerId: string): Promise<void> {
    if (this.fetching.has(answerId)) return;
    this.fetching.add(answerId);
    try {
      const detail = await firstValueFrom(this.api.benchAnswer(answerId));
      this.details.update((details) => new Map(details).set(answerId, detail));
    } catch (error) {
      this.tell(sentenceOf(error), null);
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

  private tell(text: string, answerId: string | null): void {
    this.noticed.set({ answerId, text, canTake: false, retry: null });
    void this.announcer.announce(text, 'assertive');
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
