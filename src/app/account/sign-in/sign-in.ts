import { ChangeDetectionStrategy, Component, ElementRef, computed, inject, input, signal } from '@angular/core';
import { rxResource } from '@angular/core/rxjs-interop';
import { FormControl, FormGroup, ReactiveFormsModule } from '@angular/forms';
import { MatButtonModule } from '@angular/material/button';
import { MatFormFieldModule } from '@angular/material/form-field';
import { MatIconModule } from '@angular/material/icon';
import { MatInputModule } from '@angular/material/input';
import { Router, RouterLink } from '@angular/router';
import * as z from 'zod';
import { email } from '@shared/accounts';
import { fullMomentOf } from '@shared/times';
import { AccountsApi } from '../../core/api/accounts-api';
import { checkedBy, messageOf, showFailure, showWhatIsMissing } from '../../core/field-messages';
import { Now } from '../../core/now';
import { Session } from '../../core/session';
import { BrandMark } from '../../ui/brand-mark/brand-mark';
import { PulseCount } from './pulse-count';

/** Sign-in, beside a beam that is parted in two. */
@Component({
  selector: 'app-sign-in',
  imports: [
    BrandMark,
    MatButtonModule,
    MatFormFieldModule,
    MatIconModule,
    MatInputModule,
    PulseCount,
    ReactiveFormsModule,
    RouterLink,
  ],
  templateUrl: './sign-in.html',
  styleUrl: './sign-in.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export default class SignIn {
  private readonly session = inject(Session);
  private readonly router = inject(Router);
  private readonly api = inject(AccountsApi);
  private readonly clock = inject(Now);
  private readonly host = inject<ElementRef<HTMLElement>>(ElementRef);

  /** Where to go afterwards, from the address. */
  readonly then = input<string>();

  protected readonly form = new FormGroup({
    email: new FormControl('', { nonNullable: true, validators: checkedBy(email), updateOn: 'submit' }),
    password: new FormControl('', {
      nonNullable: true,
      validators: checkedBy(z.string().min(1, 'Give your password.')),
      updateOn: 'submit',
    }),
  });
  protected readonly failure = signal('');
  protected readonly busy = signal(false);
  protected readonly passwordShown = signal(false);
  protected readonly messageOf = messageOf;
  private readonly installation = rxResource({ stream: () => this.api.installation() });
  protected readonly institution = computed(() =>
    this.installation.hasValue() ? this.installation.value().institution : '',
  );
  protected readonly moment = computed(() =>
    fullMomentOf(this.clock.now(), Intl.DateTimeFormat().resolvedOptions().timeZone),
  );

  protected async signIn(): Promise<void> {
    if (this.form.invalid) {
      showWhatIsMissing(this.form, this.host.nativeElement);
      return;
    }
    this.busy.set(true);
    this.failure.set('');
    const { email: address, password } = this.form.getRawValue();
    try {
      await this.session.signIn(address, password);
      const target = this.then() ?? '/';
      await this.router.navigateByUrl(target.startsWith('/') && !target.startsWith('//') ? target : '/');
    } catch (error) {
      this.failure.set(showFailure(this.form, error));
    } finally {
      this.busy.set(false);
    }
  }
}
