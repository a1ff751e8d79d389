import {
  ChangeDetectionStrategy,
  Component,
  DestroyRef,
  computed,
  effect,
  inject,
  input,
  signal,
  untracked,
} from '@angular/core';
import { takeUntilDestroyed } from '@angular/core/rxjs-interop';
import { MatButtonModule } from '@angular/material/button';
import { RouterLink } from '@angular/router';
import { firstValueFrom, fromEvent, merge } from 'rxjs';
import type { TriedPart, TryOut as TryOutResult, TryOutPaper } from '@shared/try-outs';
import { sentenceOf } from '../../core/api/request-failure';
import { TryOutsApi } from '../../core/api/try-outs-api';
import { PageTitle } from '../../core/page-title';
import { AnswerField, type TypedField } from '../../ui/answer-field/answer-field';
import { ChoiceField } from '../../ui/choice-field/choice-field';
import { CountsTable } from '../../ui/counts-table/counts-table';
import { ErrorState } from '../../ui/error-state/error-state';
import { FormulaText } from '../../ui/formula-text/formula-text';
import { LoadingBars } from '../../ui/loading-bars/loading-bars';
import { WorkedText } from '../../ui/worked-text/worked-text';
import { ActiveTime } from './active-time';
import { TryOutAnswers } from './try-out-answers';

/** How long typing rests before it is kept, in milliseconds. */
const restBeforeKeeping = 1000;

/** A problem as a student gets it, solved by a colleague beforehand: what is typed and the minutes are kept. */
@Component({
  selector: 'app-try-out',
  imports: [
    AnswerField,
    ChoiceField,
    CountsTable,
    ErrorState,
    FormulaText,
    LoadingBars,
    MatButtonModule,
    RouterLink,
    TryOutAnswers,
    WorkedText,
  ],
  templateUrl: './try-out.html',
  styleUrl: './try-out.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export default class TryOut {
  private readonly api = inject(TryOutsApi);
  private readonly pageTitle = inject(PageTitle);
  private timer: ReturnType<typeof setTimeout> | undefined;
  private time = new ActiveTime(0, Date.now());

  readonly courseId = input.required<string>();
  readonly problemId = input.required<string>();

  protected readonly paper = signal<TryOutPaper | null>(null);
  protected readonly answers = signal<Readonly<Record<string, string>>>({});
  protected readonly result = signal<TryOutResult | null>(null);
  protected readonly failure = signal('');
  protected readonly notice = signal('');
  protected readonly keeping = signal<'kept' | 'typing' | 'not kept'>('kept');
  protected readonly isBusy = signal(false);
  protected readonly kept = computed(() =>
    this.keeping() === 'kept' ? 'all kept' : this.keeping() === 'typing' ? 'keeping …' : 'not kept yet; tried again',
  );
  protected readonly marks = computed(() => this.paper()?.parts.reduce((sum, part) => sum + part.marks, 0) ?? 0);
  protected readonly gaps = computed(
    () => this.paper()?.parts.filter(({ partId }) => (this.answers()[partId] ?? '').trim() === '').length ?? 0,
  );

  constructor() {
    effect(() => {
      const problemId = this.problemId();
      untracked(() => void this.begin(problemId));
    });
    merge(
      ...['keydown', 'pointerdown', 'pointermove', 'scroll'].map((name) =>
        fromEvent(document, name, { passive: true }),
      ),
    )
      .pipe(takeUntilDestroyed())
      .subscribe(() => {
        this.time.sign(Date.now());
      });
    inject(DestroyRef).onDestroy(() => {
      clearTimeout(this.timer);
    });
  }

  /** Keeps what is typed before the page goes. */
  async keep(): Promise<boolean> {
    const paper = this.paper();
    if (!paper || this.result()) return true;
    clearTimeout(this.timer);
    try {
      await firstValueFrom(this.api.keepTryOut(this.problemId(), paper.id, this.typed()));
      this.keeping.set('kept');
      return true;
    } catch (error) {
      this.notice.set(sentenceOf(error));
      this.keeping.set('not kept');
      this.timer = setTimeout(() => void this.keep(), 5 * restBeforeKeeping);
      return false;
    }
  }

  private typed() {
    return { answers: this.answers(), activeSeconds: this.time.seconds(Date.now()) };
  }

  protected async begin(problemId: string): Promise<void> {
    this.failure.set('');
    this.result.set(null);
    this.paper.set(null);
    try {
      const paper = await firstValueFrom(this.api.beginTryOut(problemId));
      this.pageTitle.set(`Try-out: ${paper.title}`);
      this.time = new ActiveTime(paper.activeSeconds, Date.now());
      this.answers.set(Object.fromEntries(paper.parts.map(({ partId, answer }) => [partId, answer])));
      this.paper.set(paper);
    } catch (error) {
      this.failure.set(sentenceOf(error));
    }
  }

  /** The field as it is typed into; null for a choice and for words. */
  protected fieldOf({ field }: TriedPart): TypedField | null {
    return field.form === 'choice' || field.form === 'worked' ? null : field;
  }

  protected isSeveral({ field }: TriedPart): boolean {
    return field.form === 'choice' && field.several;
  }

  protected type(partId: string, text: string): void {
    if (text === (this.answers()[partId] ?? '')) return;
    this.answers.set({ ...this.answers(), [partId]: text });
    this.keeping.set('typing');
    clearTimeout(this.timer);
    this.timer = setTimeout(() => void this.keep(), restBeforeKeeping);
  }

  protected async handIn(): Promise<void> {
    const paper = this.paper();
    if (!paper || this.isBusy()) return;
    this.isBusy.set(true);
    this.notice.set('');
    clearTimeout(this.timer);
    try {
      this.result.set(await firstValueFrom(this.api.handInTryOut(this.problemId(), paper.id, this.typed())));
      this.keeping.set('kept');
    } catch (error) {
      this.notice.set(sentenceOf(error));
    } finally {
      this.isBusy.set(false);
    }
  }
}
