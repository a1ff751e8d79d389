import { ChangeDetectionStrategy, Component, computed, input, output } from '@angular/core';
import { MatButtonModule } from '@angular/material/button';
import { MatIconModule } from '@angular/material/icon';
import { hasEnded, type Job } from '@shared/jobs';

/** How far work that takes long is, in words and as a line; it can be cancelled while it goes on. */
@Component({
  selector: 'app-job-progress',
  imports: [MatButtonModule, MatIconModule],
  template: `
    @let its = job();
    @if (isRunning()) {
      <p class="line">
        <span>{{ words() }}</span>
        @if (its.total > 0) {
          <span class="quiet count">{{ its.done }} of {{ its.total }} {{ things() }}</span>
        }
        <span class="grow"></span>
        <button type="button" matButton class="compact" (click)="cancelled.emit()">Cancel</button>
      </p>
      @if (its.total > 0) {
        <progress [max]="its.total" [value]="its.done" [attr.aria-label]="words()"></progress>
      } @else {
        <progress [attr.aria-label]="words()"></progress>
      }
    } @else if (its.state === 'failed') {
      <p class="line tone-wrong" role="alert">
        <mat-icon svgIcon="warning" class="small" aria-hidden="true" />
        <span>{{ its.problem ?? 'It failed.' }}</span>
      </p>
    } @else if (its.state === 'cancelled') {
      <p class="line quiet" role="status">Cancelled. Nothing was changed.</p>
    }
    <span class="cdk-visually-hidden" role="status">{{ spoken() }}</span>
  `,
  styles: `
    :host {
      display: block;
    }

    .line {
      display: flex;
      flex-wrap: wrap;
      gap: 8px;
      align-items: center;
    }

    .count {
      font-variant-numeric: tabular-nums;
    }

    .grow {
      flex: 1;
    }

    progress {
      display: block;
      width: 100%;
      height: 4px;
      appearance: none;
      background: var(--silver-2);
      border: 0;

      &::-webkit-progress-bar {
        background: var(--silver-2);
      }

      &::-webkit-progress-value {
        background: var(--line);
      }

      &::-moz-progress-bar {
        background: var(--line);
      }
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class JobProgress {
  readonly job = input.required<Job>();
  /** What is being done, for example `Auditing the keys`. */
  readonly words = input.required<string>();
  /** What is counted, for example `variants`. */
  readonly things = input('');
  /** It is to be cancelled. */
  readonly cancelled = output();

  protected readonly isRunning = computed(() => !hasEnded(this.job()));
  /** Said aloud a few times only: at each quarter. */
  protected readonly spoken = computed(() => {
    const { done, total } = this.job();
    if (!this.isRunning() || total === 0) return '';
    const quarter = Math.floor((4 * done) / total);
    return quarter === 0 ? this.words() : `${this.words()}: ${String(quarter)} of 4 quarters done`;
  });
}
