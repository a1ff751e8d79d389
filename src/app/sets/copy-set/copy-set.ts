import {
  ChangeDetectionStrategy,
  Component,
  type ElementRef,
  afterNextRender,
  computed,
  inject,
  input,
  output,
  signal,
  viewChild,
} from '@angular/core';
import { MatButtonModule } from '@angular/material/button';
import { MatFormFieldModule } from '@angular/material/form-field';
import { MatInputModule } from '@angular/material/input';
import { Router } from '@angular/router';
import { firstValueFrom } from 'rxjs';
import type { SetDetail } from '@shared/sets';
import { fullMomentOf, movedByWeeks } from '@shared/times';
import { SetsApi } from '../../core/api/sets-api';
import { sentenceOf } from '../../core/api/request-failure';
import { Session } from '../../core/session';

/** Begins a set like this one, its dates moved by whole weeks. */
@Component({
  selector: 'app-copy-set',
  imports: [MatButtonModule, MatFormFieldModule, MatInputModule],
  template: `
    <section aria-labelledby="copy-heading">
      <h2 id="copy-heading" tabindex="-1" #heading>Duplicate Set {{ set().number }}</h2>
      <p>
        A draft with the same problems, numbers drawn anew and the same rules. The dates keep their weekday and their
        time of day by the clock of the course.
      </p>
      <mat-form-field>
        <mat-label>Weeks later</mat-label>
        <input
          matInput
          type="number"
          min="1"
          max="260"
          step="1"
          [value]="weeks()"
          (input)="count(field.value)"
          #field
        />
        <mat-hint>26 for next term, 52 for next year</mat-hint>
      </mat-form-field>
      <dl>
        @for (each of dates(); track each.name) {
          <dt>{{ each.name }}</dt>
          <dd>{{ each.date }}</dd>
        }
      </dl>
      <div class="deeds">
        <button type="button" matButton="filled" [disabled]="busy() || !isWhole()" (click)="copy()">
          Begin the copy
        </button>
        <button type="button" matButton (click)="left.emit()">Not now</button>
      </div>
      <p class="failure" role="alert">{{ failure() }}</p>
    </section>
  `,
  styles: `
    dl {
      display: grid;
      grid-template-columns: 96px minmax(0, 1fr);
      gap: 4px;
      margin: 8px 0;
    }

    dt {
      color: var(--silver-4);
    }

    mat-form-field {
      margin-top: 12px;
    }
  `,
  styleUrl: '../move-set/move-set.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class CopySet {
  private readonly api = inject(SetsApi);
  private readonly router = inject(Router);
  private readonly session = inject(Session);
  private readonly heading = viewChild<ElementRef<HTMLElement>>('heading');

  readonly set = input.required<SetDetail>();
  /** The lead looked, and left it. */
  readonly left = output();

  protected readonly weeks = signal(26);
  protected readonly busy = signal(false);
  protected readonly failure = signal('');
  protected readonly isWhole = computed(
    () => Number.isInteger(this.weeks()) && this.weeks() >= 1 && this.weeks() <= 260,
  );
  protected readonly dates = computed(() => {
    const zone = this.session.course()?.timeZone ?? 'UTC';
    const { opensAt, closesAt, lateRule } = this.set();
    const moved = (name: string, at: number | null | undefined) =>
      at == null || !this.isWhole() ? [] : [{ name, date: fullMomentOf(movedByWeeks(at, this.weeks(), zone), zone) }];
    return [...moved('opens', opensAt), ...moved('closes', closesAt), ...moved('late until', lateRule?.until)];
  });

  constructor() {
    afterNextRender(() => this.heading()?.nativeElement.focus());
  }

  protected count(text: string): void {
    this.weeks.set(text.trim() === '' ? Number.NaN : Number(text));
  }

  protected async copy(): Promise<void> {
    this.busy.set(true);
    this.failure.set('');
    try {
      const copy = await firstValueFrom(this.api.copySet(this.set().id, this.weeks()));
      await this.router.navigate(['/courses', copy.courseId, 'sets', copy.id, 'settings']);
    } catch (error) {
      this.failure.set(sentenceOf(error));
    } finally {
      this.busy.set(false);
    }
  }
}
