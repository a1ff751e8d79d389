import { ChangeDetectionStrategy, Component, ElementRef, computed, inject, input, signal } from '@angular/core';
import { FormControl, FormGroup, ReactiveFormsModule } from '@angular/forms';
import { MatButtonModule } from '@angular/material/button';
import { MatFormFieldModule } from '@angular/material/form-field';
import { MatIconModule } from '@angular/material/icon';
import { MatInputModule } from '@angular/material/input';
import { firstValueFrom } from 'rxjs';
import { longestReceipt, receiptsRoutes, type ReceiptVerdict } from '@shared/receipts';
import { fullMomentOf } from '@shared/times';
import { ReceiptsApi } from '../../core/api/receipts-api';
import { checkedBy, messageOf, showFailure, showWhatIsMissing } from '../../core/field-messages';
import { Session } from '../../core/session';

/** Says whether a receipt, pasted or from its file, is one that this server gave, and what does not match. */
@Component({
  selector: 'app-verify-receipt',
  imports: [MatButtonModule, MatFormFieldModule, MatIconModule, MatInputModule, ReactiveFormsModule],
  templateUrl: './verify-receipt.html',
  styleUrls: ['../results-page.scss', './verify-receipt.scss'],
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export default class VerifyReceipt {
  private readonly api = inject(ReceiptsApi);
  private readonly session = inject(Session);
  private readonly host = inject<ElementRef<HTMLElement>>(ElementRef);

  readonly courseId = input.required<string>();

  protected readonly messageOf = messageOf;
  protected readonly busy = signal(false);
  protected readonly failure = signal('');
  protected readonly verdict = signal<ReceiptVerdict | null>(null);
  protected readonly form = new FormGroup({
    text: new FormControl('', {
      nonNullable: true,
      validators: checkedBy(receiptsRoutes.verifyReceipt.body.shape.text),
    }),
  });
  protected readonly submission = computed(() => {
    const found = this.verdict()?.submission;
    if (!found) return '';
    const { setNumber, setTitle, code, number, at, by, isLast } = found;
    const how = by === 'student' ? 'submitted' : 'handed in at closing';
    const when = fullMomentOf(at, this.session.course()?.timeZone ?? 'UTC');
    return `Set ${String(setNumber)}, ${setTitle}: script ${code}, submission ${String(number)}, ${how} ${when}${isLast ? '; it is the one that counts' : '; a later one counts'}.`;
  });

  /** Reads a chosen file into the field, and verifies it. */
  protected async choose(field: HTMLInputElement): Promise<void> {
    const file = field.files?.item(0);
    field.value = '';
    if (!file) return;
    this.verdict.set(null);
    if (file.size > longestReceipt) {
      this.failure.set('That is too long for a receipt.');
      return;
    }
    this.form.setValue({ text: await file.text() });
    await this.verify();
  }

  protected async verify(): Promise<void> {
    this.verdict.set(null);
    this.failure.set('');
    if (this.form.invalid) {
      showWhatIsMissing(this.form, this.host.nativeElement);
      return;
    }
    if (this.busy()) return;
    this.busy.set(true);
    try {
      this.verdict.set(await firstValueFrom(this.api.verify(this.courseId(), this.form.getRawValue().text)));
    } catch (error) {
      this.failure.set(showFailure(this.form, error));
    } finally {
      this.busy.set(false);
    }
  }
}
