import { ChangeDetectionStrategy, Component, input } from '@angular/core';

/** Where there is nothing yet: the base line, and one sentence with the next step. The action is projected. */
@Component({
  selector: 'app-empty-state',
  template: `
    <p>{{ text() }}</p>
    <ng-content />
  `,
  styles: `
    :host {
      display: flex;
      flex-direction: column;
      align-items: flex-start;
      gap: 12px;
      padding: 16px 0 24px;
      border-top: 1px solid var(--ink);
    }

    p {
      max-width: 65ch;
      color: var(--silver-4);
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class EmptyState {
  /** What is not there, and what to do next. */
  readonly text = input.required<string>();
}
