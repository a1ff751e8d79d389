import { LiveAnnouncer } from '@angular/cdk/a11y';
import {
  ChangeDetectionStrategy,
  Component,
  DestroyRef,
  type ElementRef,
  computed,
  effect,
  inject,
  input,
  signal,
  untracked,
  viewChild,
} from '@angular/core';
import { MatButtonModule } from '@angular/material/button';
import { MatIconModule } from '@angular/material/icon';
import { firstValueFrom, type Observable } from 'rxjs';
import type { Ruling, RulingOutcome } from '@shared/rulings';
import { timeOf } from '@shared/times';
import { newIdempotencyKey } from '../../core/api/api-client';
import { sentenceOf } from '../../core/api/request-failure';
import { RulingsApi } from '../../core/api/rulings-api';
import { FormulaText } from '../../ui/formula-text/formula-text';
import { BenchHand } from '../bench/bench-hand';
import { PileWatch } from '../bench/pile-watch';
import { listRulings, rememberRulingsSeen, rulingsSeen } from './ruling-lists';

/** The rulings on a pile's part: what is decided, what waits for the lead, and how to ask. */
@Component({
  selector: 'app-rulings',
  imports: [FormulaText, MatButtonModule, MatIconModule],
  templateUrl: './rulings.html',
  styleUrl: './rulings.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class Rulings {
  private readonly api = inject(RulingsApi);
  private readonly announcer = inject(LiveAnnouncer);
  private readonly watch = inject(PileWatch);
  private readonly hand = inject(BenchHand);
  private readonly askDialog = viewChild<ElementRef<HTMLDialogElement>>('askDialog');
  private readonly decideDialog = viewChild<ElementRef<HTMLDialogElement>>('decideDialog');
  private readonly seenUntil = signal(Number.POSITIVE_INFINITY);
  /** What was announced already. */
  private known: ReadonlySet<string> | null = null;
  private key = newIdempotencyKey();

  /** Whether single keys act. */
  readonly singleKeys = input(true);
  readonly timeZone = input('UTC');

  protected readonly pile = this.watch.pile;
  private readonly pileId = computed(() => this.pile()?.id);
  protected readonly part = computed(() => {
    const pile = this.pile();
    return pile ? `${String(pile.position)} (${pile.partLabel})` : 'this part';
  });
  private readonly lists = computed(() => listRulings(this.pile()?.rulings ?? []));
  protected readonly decided = computed(() =>
    this.lists().decided.map((each) => ({
      ...each,
      time: timeOf(each.decidedAt ?? 0, this.timeZone()),
      by: this.shortNameOf(each.decidedById),
      isNew: (each.decidedAt ?? 0) > this.seenUntil(),
      codes: each.answers.map(({ code }) => code).join(', '),
    })),
  );
  protected readonly open = computed(() =>
    this.lists().open.map((each) => ({
      ...each,
      time: timeOf(each.askedAt, this.timeZone()),
      by: this.shortNameOf(each.askedById),
      codes: each.answers.map(({ code }) => code).join(', '),
      waits: each.answers.length === 1 ? 'waits' : 'wait',
      mine: each.answers.some(({ answerId }) => answerId === this.answer()?.id),
    })),
  );
  protected readonly mayDecide = computed(() => this.pile()?.seesAllMarks === true && this.pile()?.open === true);
  protected readonly answer = computed(() => this.hand.current());
  protected readonly canAsk = computed(() => this.pile()?.open === true && this.answer() !== null);

  protected readonly deciding = signal<Ruling | null>(null);
  protected readonly problem = signal('');
  protected readonly isSending = signal(false);

  constructor() {
    effect(() => {
      const pileId = this.pileId();
      if (pileId !== undefined)
        untracked(() => {
          this.seenUntil.set(rulingsSeen(pileId) ?? Date.now());
        });
    });
    effect(() => {
      const { decided } = this.lists();
      if (!this.pile()) return;
      const known = this.known;
      const fresh = known === null ? [] : decided.filter(({ id }) => !known.has(id));
      this.known = new Set(decided.map(({ id }) => id));
      for (const { decision } of fresh)
        void this.announcer.announce(`Ruling on ${untracked(this.part)}: ${decision ?? ''}`, 'polite');
    });
    inject(DestroyRef).onDestroy(() => {
      const pileId = this.pileId();
      const newest = this.lists().decided[0]?.decidedAt ?? null;
      if (pileId !== undefined) rememberRulingsSeen(pileId, newest ?? Date.now());
    });
  }

  /** Opens the question to the lead, about the answer in hand. */
  ask(): void {
    const dialog = this.askDialog()?.nativeElement;
    if (!dialog || dialog.open || !this.canAsk()) return;
    this.problem.set('');
    dialog.showModal();
  }

  protected async sendQuestion(field: HTMLTextAreaElement): Promise<void> {
    const pile = this.pile();
    const answer = this.answer();
    const question = field.value.trim();
    if (!pile || !answer) return;
    if (!question) {
      this.problem.set('Write the question that the lead is to decide.');
      field.focus();
      return;
    }
    if (!(await this.send(this.api.ask(pile.id, this.key, question, answer.id)))) return;
    this.key = newIdempotencyKey();
    field.value = '';
    this.close();
    void this.announcer.announce(`The lead is asked; ${answer.code} waits on the ruling.`, 'polite');
  }

  protected async waitToo(ruling: Pick<Ruling, 'id'>): Promise<void> {
    const answer = this.answer();
    if (!answer || !(await this.send(this.api.wait(ruling.id, answer.id)))) return;
    this.close();
    void this.announcer.announce(`${answer.code} waits on the ruling too.`, 'polite');
  }

  protected askDecision(ruling: Ruling): void {
    this.deciding.set(ruling);
    this.problem.set('');
    this.decideDialog()?.nativeElement.showModal();
  }

  protected async sendDecision(field: HTMLTextAreaElement): Promise<void> {
    const ruling = this.deciding();
    const decision = field.value.trim();
    if (!ruling) return;
    if (!decision) {
      this.problem.set('Write what is decided, as markers are to apply it.');
      field.focus();
      return;
    }
    if (!(await this.send(this.api.decide(ruling.id, decision)))) return;
    field.value = '';
    this.close();
  }

  /** Closes what is open; what was typed stays for the next time. */
  protected close(): void {
    this.askDialog()?.nativeElement.close();
    this.decideDialog()?.nativeElement.close();
  }

  private async send(request: Observable<RulingOutcome>): Promise<boolean> {
    if (this.isSending()) return false;
    this.isSending.set(true);
    this.problem.set('');
    try {
      this.watch.learnRuling((await firstValueFrom(request)).ruling);
      return true;
    } catch (error) {
      this.problem.set(sentenceOf(error));
      return false;
    } finally {
      this.isSending.set(false);
    }
  }

  /** `S. Halloran`. */
  private shortNameOf(membershipId: string | null): string {
    const name = membershipId === null ? undefined : this.watch.team().get(membershipId)?.name;
    if (name === undefined) return 'a colleague';
    const words = name.split(' ');
    return words.length < 2 ? name : `${name.charAt(0)}. ${words.at(-1) ?? ''}`;
  }
}
