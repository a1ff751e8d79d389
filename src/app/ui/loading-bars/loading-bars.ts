import { ChangeDetectionStrategy, Component, computed, input } from '@angular/core';

/**
 * Rules where rows will stand, as high as those, so that nothing jumps when they come. Nothing spins; the words are for those
 * who hear the page.
 */
@Component({
  selector: 'app-loading-bars',
  template: `
    <span class="cdk-visually-hidden">{{ label() }}</span>
    @for (row of rows(); track row) {
      <div class="row" [style.height.px]="rowHeight()"><span [class]="'length-' + (row % 4)"></span></div>
    }
  `,
  styles: `
    :host {
      display: block;
    }

    .row {
      display: flex;
      align-items: center;
      border-top: var(--hair);
    }

    .row span {
      height: 8px;
      border: 1px solid var(--silver-2);
    }

    .length-0 {
      width: 46%;
    }

    .length-1 {
      width: 62%;
    }

    .length-2 {
      width: 38%;
    }

    .length-3 {
      width: 54%;
    }
  `,
  host: { role: 'status' },
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class LoadingBars {
  /** How many rows are expected. */
  readonly count = input(4);
  /** How high a row will be, in pixels. */
  readonly rowHeight = input(64);
  readonly label = input('On its way');

  protected readonly rows = computed(() => Array.from({ length: Math.max(0, this.count()) }, (_, index) => index));
}
