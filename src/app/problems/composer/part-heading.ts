import { ChangeDetectionStrategy, Component, computed, inject, input, output } from '@angular/core';
import { MatButtonModule } from '@angular/material/button';
import { MatIconModule } from '@angular/material/icon';
import { MatTooltipModule } from '@angular/material/tooltip';
import type { DraftPart } from '@shared/problem-draft';
import { partLabel } from '@shared/problems';
import { changePart } from './draft-changes';
import { OpenProblem } from './open-problem';
import { TypedField } from './typed-field';

/** What a part is called in lists, and its place among the others. */
@Component({
  selector: 'app-part-heading',
  imports: [MatButtonModule, MatIconModule, MatTooltipModule, TypedField],
  template: `
    <app-typed-field
      [label]="'Part (' + label() + ') in lists'"
      placeholder="a few words, for example mean photons"
      [value]="part().heading"
      [fault]="open.faultAt(part().heading, 'parts', index(), 'heading')"
      [disabled]="!open.canEdit()"
      (valueChange)="changeHeading($event)"
    />
    @if (open.canEdit()) {
      <button
        matIconButton
        class="compact"
        matTooltip="Move before the previous part"
        [attr.aria-label]="'Move part (' + label() + ') before the previous part'"
        [disabled]="index() === 0"
        (click)="move.emit(index() - 1)"
      >
        <mat-icon svgIcon="arrow_back" />
      </button>
      <button
        matIconButton
        class="compact"
        matTooltip="Move behind the next part"
        [attr.aria-label]="'Move part (' + label() + ') behind the next part'"
        [disabled]="index() === count() - 1"
        (click)="move.emit(index() + 1)"
      >
        <mat-icon svgIcon="arrow_forward" />
      </button>
      <button
        matIconButton
        class="compact"
        matTooltip="Remove this part"
        [attr.aria-label]="'Remove part (' + label() + ')'"
        (click)="remove.emit()"
      >
        <mat-icon svgIcon="delete" />
      </button>
    }
  `,
  styles: `
    :host {
      display: flex;
      align-items: end;
      gap: 4px;
      margin-bottom: 16px;
    }

    app-typed-field {
      flex: 1;
      margin-right: 8px;
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class PartHeading {
  protected readonly open = inject(OpenProblem);

  readonly index = input.required<number>();
  readonly part = input.required<DraftPart>();
  /** How many parts there are. */
  readonly count = input.required<number>();
  /** The place that the part is to have. */
  readonly move = output<number>();
  readonly remove = output();

  protected readonly label = computed(() => partLabel(this.index()));

  protected changeHeading(heading: string): void {
    this.open.change((draft) => changePart(draft, this.index(), { heading }));
  }
}
