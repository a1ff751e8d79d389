import { A11yModule } from '@angular/cdk/a11y';
import { type ConnectedPosition, OverlayModule } from '@angular/cdk/overlay';
import { ChangeDetectionStrategy, Component, booleanAttribute, computed, input, output, signal } from '@angular/core';
import { printNumber } from '@shared/reading/print';
import { type Agreement, agreementInWords } from './agreement';

let badges = 0;

/** Beside a computed key: two strokes that join where two methods agree. It opens what is known about the computation. */
@Component({
  selector: 'app-agreement-badge',
  imports: [A11yModule, OverlayModule],
  templateUrl: './agreement-badge.html',
  styleUrl: './agreement-badge.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class AgreementBadge {
  /** Null while the key is being computed. */
  readonly agreement = input.required<Agreement | null>();
  /** For how long it has been computed, in seconds, while it is. */
  readonly seconds = input<number | null>(null);
  /** Whether the computation can be stopped. */
  readonly stoppable = input(false, { transform: booleanAttribute });

  /** The computation is to be stopped. */
  readonly stopped = output();

  protected readonly id = `agreement-${++badges}`;
  protected readonly open = signal(false);
  protected readonly positions: ConnectedPosition[] = [
    { originX: 'end', originY: 'bottom', overlayX: 'end', overlayY: 'top', offsetY: 6 },
    { originX: 'end', originY: 'top', overlayX: 'end', overlayY: 'bottom', offsetY: -6 },
    { originX: 'start', originY: 'bottom', overlayX: 'start', overlayY: 'top', offsetY: 6 },
  ];

  protected readonly words = computed(() => {
    const agreement = this.agreement();
    return agreement ? agreementInWords(agreement) : '';
  });
  protected readonly computing = computed(() => {
    const seconds = this.seconds();
    return seconds === null ? 'computing' : `computing, ${seconds.toFixed(1)} s`;
  });
  protected readonly tone = computed(() => {
    const agreement = this.agreement();
    if (!agreement) return 'waits';
    if (agreement.differs) return 'differs';
    return agreement.digits !== undefined && agreement.methods.length !== 1 ? 'agrees' : 'single';
  });
  protected readonly strokes = computed(
    () =>
      ({
        agrees: 'M0 2h5c4 0 4 4 8 4h7M0 10h5c4 0 4-4 8-4',
        single: 'M0 6h20',
        differs: 'M0 2h20M0 10h20',
        waits: 'M0 2h5c4 0 4 4 8 4M0 10h5c4 0 4-4 8-4',
      })[this.tone()],
  );
  protected readonly details = computed(() => {
    const agreement = this.agreement();
    if (!agreement) return [];
    const { methods, digits, differs, dimension, outsideWeight, milliseconds } = agreement;
    const rows: { readonly name: string; readonly value: string }[] = [];
    if (methods.length > 0) rows.push({ name: methods.length === 1 ? 'Method' : 'Methods', value: methods.join(', ') });
    if (digits !== undefined) rows.push({ name: differs ? 'Equal digits' : 'Agree to', value: `${digits} digits` });
    if (dimension !== undefined) rows.push({ name: 'Dimension', value: String(dimension) });
    if (outsideWeight !== undefined)
      rows.push({ name: 'Outside weight', value: `below ${printNumber(outsideWeight, 2)}` });
    if (milliseconds !== undefined) rows.push({ name: 'Took', value: `${printNumber(milliseconds, 2)} ms` });
    return rows;
  });
  protected readonly meaning = computed(
    () =>
      ({
        agrees: 'Two independent computations give the same key.',
        single: 'Only one way to compute this key is known, so nothing confirms it. Check a variant by hand.',
        differs: 'Two independent computations disagree. The problem cannot be used until they agree.',
        waits: '',
      })[this.tone()],
  );
}
