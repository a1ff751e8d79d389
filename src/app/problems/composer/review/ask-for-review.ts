import { ChangeDetectionStrategy, Component, inject, input, output, signal } from '@angular/core';
import { rxResource } from '@angular/core/rxjs-interop';
import { MatButtonModule } from '@angular/material/button';
import { instantAt, wallClockOf, zoneOf } from '@shared/times';
import { sentenceOf } from '../../../core/api/request-failure';
import { ReviewsApi } from '../../../core/api/reviews-api';
import { Session } from '../../../core/session';
import { TypedField } from '../typed-field';
import { OpenReview } from './open-review';

const week = 7 * 24 * 3_600_000;

/** Asks named colleagues to review by a date. */
@Component({
  selector: 'app-ask-for-review',
  imports: [MatButtonModule, TypedField],
  template: `
    <form (submit)="ask($event)">
      <fieldset>
        <legend>Whom to ask</legend>
        <div class="who">
          @for (each of colleagues.value()?.items; track each.id) {
            <label>
              <input #box type="checkbox" [checked]="chosen().has(each.id)" (change)="choose(each.id, box.checked)" />
              {{ each.name }}, {{ each.role }}
            </label>
          } @empty {
            <p class="quiet">
              {{
                colleagues.isLoading()
                  ? 'Loading …'
                  : 'There is nobody to ask yet. Add a lead or a marker under “People”, or overrule with a reason.'
              }}
            </p>
          }
        </div>
      </fieldset>
      <label for="review-due">By the end of ({{ zone() }})</label>
      <input #date id="review-due" type="date" [value]="day()" (input)="day.set(date.value)" />
      <app-typed-field label="A word to them" [rows]="2" [value]="note()" (valueChange)="note.set($event)" />
      @if (failure(); as words) {
        <p class="tone-wrong" role="alert">{{ words }}</p>
      }
      <div class="deeds">
        <button matButton="outlined" [disabled]="isBusy()">Ask</button>
        <button matButton type="button" (click)="closed.emit()">Not now</button>
      </div>
    </form>
  `,
  styleUrl: './review-form.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class AskForReview {
  private readonly api = inject(ReviewsApi);
  private readonly session = inject(Session);
  private readonly review = inject(OpenReview);

  readonly problemId = input.required<string>();
  readonly closed = output();

  protected readonly colleagues = rxResource({
    params: () => this.problemId(),
    stream: ({ params }) => this.api.colleagues(params),
  });
  protected readonly chosen = signal<ReadonlySet<string>>(new Set());
  protected readonly day = signal(wallClockOf(Date.now() + week, this.timeZone()).slice(0, 10));
  protected readonly note = signal('');
  protected readonly failure = signal('');
  protected readonly isBusy = signal(false);

  protected zone(): string {
    return zoneOf(Date.now(), this.timeZone());
  }

  private timeZone(): string {
    return this.session.course()?.timeZone ?? 'UTC';
  }

  protected choose(id: string, isChosen: boolean): void {
    const next = new Set(this.chosen());
    if (isChosen) next.add(id);
    else next.delete(id);
    this.chosen.set(next);
  }

  protected async ask(event: Event): Promise<void> {
    event.preventDefault();
    const missing =
      this.chosen().size === 0 ? 'Choose at least one colleague.' : this.day() === '' ? 'Give a date.' : '';
    this.failure.set(missing);
    if (missing || this.isBusy()) return;
    this.isBusy.set(true);
    try {
      const dueAt = instantAt(`${this.day()}T23:59`, this.timeZone());
      await this.review.askForReview([...this.chosen()], dueAt, this.note().trim());
      this.closed.emit();
    } catch (error) {
      this.failure.set(sentenceOf(error));
    } finally {
      this.isBusy.set(false);
    }
  }
}
