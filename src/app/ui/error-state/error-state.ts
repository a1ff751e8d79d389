import { ChangeDetectionStrategy, Component, input, output } from '@angular/core';
import { MatButtonModule } from '@angular/material/button';
import { MatIconModule } from '@angular/material/icon';

/** Where something failed, at its place: what happened, what was kept, what to do. */
@Component({
  selector: 'app-error-state',
  imports: [MatButtonModule, MatIconModule],
  template: `
    <p class="what">
      <mat-icon svgIcon="warning" aria-hidden="true" /><span>{{ text() }}</span>
    </p>
    @if (kept()) {
      <p>{{ kept() }}</p>
    }
    @if (requestId()) {
      <p class="id">Request {{ requestId() }}</p>
    }
    @if (retryLabel()) {
      <button type="button" matButton="outlined" (click)="retried.emit()">{{ retryLabel() }}</button>
    }
    <ng-content />
  `,
  styles: `
    :host {
      display: flex;
      flex-direction: column;
      align-items: flex-start;
      gap: 8px;
      padding: 12px 0 16px;
      border-top: 2px solid var(--wrong);
    }

    .what {
      display: flex;
      gap: 8px;
      color: var(--wrong);
      font-weight: 600;
    }

    .id {
      color: var(--silver-4);
      font: 12px/16px var(--mono);
    }

    button {
      margin-top: 4px;
    }
  `,
  host: { role: 'alert' },
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class ErrorState {
  /** What happened. */
  readonly text = input.required<string>();
  /** What was kept. */
  readonly kept = input('');
  /** By which the log names the request. */
  readonly requestId = input<string | undefined>();
  /** What the button says; without it there is none. */
  readonly retryLabel = input('Try again');
  /** To be tried again. */
  readonly retried = output();
}
