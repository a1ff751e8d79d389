import { LiveAnnouncer } from '@angular/cdk/a11y';
import {
  ChangeDetectionStrategy,
  Component,
  type ElementRef,
  Injector,
  afterNextRender,
  computed,
  inject,
  input,
  signal,
  viewChild,
} from '@angular/core';
import { MatButtonModule } from '@angular/material/button';
import { firstValueFrom } from 'rxjs';
import type { PatternPreview } from '@shared/pattern-marks';
import { newIdempotencyKey } from '../../core/api/api-client';
import { PatternMarksApi } from '../../core/api/pattern-marks-api';
import { sentenceOf } from '../../core/api/request-failure';
import { BenchHand } from '../bench/bench-hand';
import { BenchNotices } from '../bench/bench-notices';
import { PileWatch } from '../bench/pile-watch';
import { moreAnswers, waitingAlike } from './waiting-alike';

/** An application that was made from this bench, and can be taken back. */
interface Applied {
  readonly id: string;
  readonly name: string;
  readonly count: number;
}

/** Applies the mark in hand to its pattern: a preview of every answer that it would mark, and an undo. */
@Component({
  selector: 'app-apply-pattern',
  imports: [MatButtonModule],
  templateUrl: './apply-pattern.html',
  styleUrl: './apply-pattern.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class ApplyPattern {
  private readonly api = inject(PatternMarksApi);
  private readonly announcer = inject(LiveAnnouncer);
  private readonly injector = inject(Injector);
  private readonly watch = inject(PileWatch);
  private readonly notices = inject(BenchNotices);
  private readonly hand = inject(BenchHand);
  private readonly dialog = viewChild<ElementRef<HTMLDialogElement>>('dialog');
  private key = newIdempotencyKey();

  /** Whether single keys act. */
  readonly singleKeys = input(true);

  protected readonly answer = computed(() => (this.hand.canMark() ? this.hand.current() : null));
  protected readonly waiting = computed(() => {
    const pile = this.watch.pile();
    const answer = this.answer();
    return pile && answer?.state === 'waits' ? waitingAlike(pile, answer.id) : 0;
  });
  protected readonly preview = signal<PatternPreview | null>(null);
  protected readonly problem = signal('');
  protected readonly isSending = signal(false);
  protected readonly applied = signal<Applied | null>(null);
  protected readonly withRemark = signal(true);

  protected readonly remark = computed(() => this.hand.draft()?.remark.trim() ?? '');
  protected readonly criteria = computed(() => {
    const awarded = this.hand.draft()?.awarded ?? [];
    return (this.watch.pile()?.criteria ?? []).map(({ id, kind, name, awardedBy }) => ({
      id,
      name,
      // What nobody has seen is for the check of each answer to propose, as the server sees to.
      words:
        kind === 'M' || kind === 'B' || awardedBy.length === 0
          ? 'as the check of each answer proposes'
          : awarded.includes(id)
            ? 'awarded'
            : 'not awarded',
    }));
  });
  protected readonly more = computed(() => moreAnswers(this.preview()?.marks.length ?? 0));

  /** Shows every answer that the mark in hand would reach. */
  async ask(): Promise<void> {
    const answer = this.answer();
    const dialog = this.dialog()?.nativeElement;
    if (!answer || !dialog || dialog.open || this.waiting() === 0 || this.isSending()) return;
    this.isSending.set(true);
    this.problem.set('');
    try {
      const preview = await firstValueFrom(this.api.preview(answer.id));
      if (this.answer()?.id !== answer.id) return;
      this.preview.set(preview);
      this.key = newIdempotencyKey();
      // Once what it shows is there, so that the focus finds its first control.
      afterNextRender(
        () => {
          dialog.showModal();
        },
        { injector: this.injector },
      );
    } catch (error) {
      this.notices.tell({ text: sentenceOf(error) });
    } finally {
      this.isSending.set(false);
    }
  }

  /** Marks what the preview shows, then saves the answer in hand and takes the next. */
  protected async apply(): Promise<void> {
    const answer = this.answer();
    const preview = this.preview();
    const pile = this.watch.pile();
    const draft = this.hand.draft();
    if (!answer || !preview || !pile || !draft || preview.marks.length === 0 || this.isSending()) return;
    this.isSending.set(true);
    this.problem.set('');
    try {
      const outcome = await firstValueFrom(
        this.api.apply(answer.id, this.key, {
          benchId: this.watch.benchId,
          criteria: pile.criteria.map(({ id }) => ({ criterionId: id, awarded: draft.awarded.includes(id) })),
          remark: this.withRemark() ? draft.remark : '',
          answers: preview.marks.map(({ answerId, version }) => ({ answerId, version })),
        }),
      );
      const { applicationId: id, marked, skipped, held } = outcome;
      this.applied.set({ id, name: preview.name, count: marked.length });
      this.close();
      this.hand.takeOver(held);
      this.hand.save();
      if (skipped.length > 0) {
        const codes = skipped.map(({ code }) => code).join(', ');
        this.notices.tell({ text: `Not marked, since they changed or were taken meanwhile: ${codes}.` });
      }
      const words = `${moreAnswers(marked.length)} of “${preview.name}” ${marked.length === 1 ? 'was' : 'were'} marked.`;
      void this.announcer.announce(words, 'polite');
    } catch (error) {
      this.problem.set(sentenceOf(error));
    } finally {
      this.isSending.set(false);
    }
  }

  /** Takes the last application back: its answers wait again, but for those that somebody changed since. */
  async undo(): Promise<void> {
    const applied = this.applied();
    if (!applied || this.isSending()) return;
    this.isSending.set(true);
    try {
      const { restored, kept } = await firstValueFrom(this.api.undo(applied.id, this.watch.benchId));
      this.applied.set(null);
      if (kept.length > 0) {
        const codes = kept.map(({ code }) => code).join(', ');
        this.notices.tell({ text: `Changed or held since, and left as they are: ${codes}.` });
      }
      const words = `${String(restored.length)} of “${applied.name}” ${restored.length === 1 ? 'waits' : 'wait'} again.`;
      void this.announcer.announce(words, 'polite');
    } catch (error) {
      this.notices.tell({ text: sentenceOf(error) });
    } finally {
      this.isSending.set(false);
    }
  }

  protected close(): void {
    this.dialog()?.nativeElement.close();
  }
}
