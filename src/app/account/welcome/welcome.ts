import { ChangeDetectionStrategy, Component, ElementRef, computed, effect, inject, signal } from '@angular/core';
import { rxResource, toSignal } from '@angular/core/rxjs-interop';
import { FormControl, FormGroup, ReactiveFormsModule } from '@angular/forms';
import { MatButtonModule } from '@angular/material/button';
import { MatFormFieldModule } from '@angular/material/form-field';
import { MatInputModule } from '@angular/material/input';
import { ActivatedRoute, Router, RouterLink } from '@angular/router';
import { firstValueFrom } from 'rxjs';
import { email, newPassword, passwordMinimum, personName } from '@shared/accounts';
import { fullMomentOf } from '@shared/times';
import { AccountsApi } from '../../core/api/accounts-api';
import { sentenceOf } from '../../core/api/request-failure';
import { checkedBy, messageOf, showFailure, showWhatIsMissing } from '../../core/field-messages';
import { Session } from '../../core/session';
import { BrandMark } from '../../ui/brand-mark/brand-mark';

const headings = {
  invitation: 'Welcome',
  'password reset': 'Set a new password',
  'first administrator': 'Become the administrator',
} as const;

/** Where links from letters lead: sets a password, and for the first administrator makes the account. */
@Component({
  selector: 'app-welcome',
  imports: [BrandMark, MatButtonModule, MatFormFieldModule, MatInputModule, ReactiveFormsModule, RouterLink],
  templateUrl: './welcome.html',
  styleUrl: '../small-page.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export default class Welcome {
  private readonly api = inject(AccountsApi);
  private readonly session = inject(Session);
  private readonly router = inject(Router);
  private readonly host = inject<ElementRef<HTMLElement>>(ElementRef);
  private readonly fragment = toSignal(inject(ActivatedRoute).fragment);

  protected readonly token = rxResource({
    params: () => this.fragment() ?? undefined,
    stream: ({ params }) => this.api.readToken(params),
  });
  protected readonly problem = computed(() => {
    if (!this.fragment()) return 'This address lacks the part behind the #. Copy the whole link from the letter.';
    const error = this.token.error();
    return error ? sentenceOf(error.cause ?? error) : '';
  });
  protected readonly heading = computed(() => (this.token.hasValue() ? headings[this.token.value().kind] : ''));
  protected readonly isFirst = computed(
    () => this.token.hasValue() && this.token.value().kind === 'first administrator',
  );
  protected readonly lasts = computed(() =>
    this.token.hasValue()
      ? fullMomentOf(this.token.value().expiresAt, Intl.DateTimeFormat().resolvedOptions().timeZone)
      : '',
  );

  protected readonly form = new FormGroup({
    name: new FormControl('', { nonNullable: true, validators: checkedBy(personName), updateOn: 'blur' }),
    email: new FormControl('', { nonNullable: true, validators: checkedBy(email), updateOn: 'blur' }),
    password: new FormControl('', { nonNullable: true, validators: checkedBy(newPassword), updateOn: 'blur' }),
  });
  protected readonly failure = signal('');
  protected readonly busy = signal(false);
  protected readonly messageOf = messageOf;
  protected readonly passwordMinimum = passwordMinimum;

  constructor() {
    effect(() => {
      for (const control of [this.form.controls.name, this.form.controls.email])
        if (this.isFirst()) control.enable();
        else control.disable();
    });
  }

  protected async setPassword(): Promise<void> {
    if (this.form.invalid) {
      showWhatIsMissing(this.form, this.host.nativeElement);
      return;
    }
    this.busy.set(true);
    this.failure.set('');
    const { password, name, email: address } = this.form.value;
    try {
      const session = await firstValueFrom(
        this.api.useToken({ token: this.fragment() ?? '', password: password ?? '', name, email: address }),
      );
      this.session.take(session);
      await this.router.navigateByUrl('/');
    } catch (error) {
      this.failure.set(showFailure(this.form, error));
    } finally {
      this.busy.set(false);
    }
  }
}
