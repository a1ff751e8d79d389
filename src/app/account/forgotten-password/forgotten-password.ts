import { ChangeDetectionStrategy, Component, ElementRef, inject, signal } from '@angular/core';
import { FormControl, FormGroup, ReactiveFormsModule } from '@angular/forms';
import { MatButtonModule } from '@angular/material/button';
import { MatFormFieldModule } from '@angular/material/form-field';
import { MatInputModule } from '@angular/material/input';
import { RouterLink } from '@angular/router';
import { firstValueFrom } from 'rxjs';
import { email } from '@shared/accounts';
import { AccountsApi } from '../../core/api/accounts-api';
import { checkedBy, messageOf, showFailure, showWhatIsMissing } from '../../core/field-messages';
import { BrandMark } from '../../ui/brand-mark/brand-mark';

/** Asks for a link to set a new password. It never tells whether there is such an account. */
@Component({
  selector: 'app-forgotten-password',
  imports: [BrandMark, MatButtonModule, MatFormFieldModule, MatInputModule, ReactiveFormsModule, RouterLink],
  template: `
    <header class="brand"><app-brand-mark />Halfsilver</header>
    <main>
      @if (askedFor(); as address) {
        <div class="said" role="status">
          <h1>Look into your mail</h1>
          <p>
            If there is an account for <b>{{ address }}</b>, a link to set a new password is on its way. It works once
            and lasts an hour.
          </p>
          <p class="quiet">No letter? Look among unwanted mail, or ask the lead of your course for a link.</p>
          <p><a routerLink="/sign-in">Back to the sign-in</a></p>
        </div>
      } @else {
        <form [formGroup]="form" (ngSubmit)="ask()" novalidate>
          <h1>Forgotten password</h1>
          <p>Give the address of your account; a link to set a new password goes there.</p>
          <mat-form-field>
            <mat-label>E-mail</mat-label>
            <input matInput type="email" formControlName="email" autocomplete="username" />
            <mat-error>{{ messageOf(form.controls.email) }}</mat-error>
          </mat-form-field>
          <p class="failure" role="alert">{{ failure() }}</p>
          <div class="acts">
            <button matButton="filled" type="submit">Send the link</button>
            <a routerLink="/sign-in">Back to the sign-in</a>
          </div>
        </form>
      }
    </main>
  `,
  styleUrl: '../small-page.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export default class ForgottenPassword {
  private readonly api = inject(AccountsApi);
  private readonly host = inject<ElementRef<HTMLElement>>(ElementRef);

  protected readonly form = new FormGroup({
    email: new FormControl('', { nonNullable: true, validators: checkedBy(email), updateOn: 'submit' }),
  });
  protected readonly askedFor = signal('');
  protected readonly failure = signal('');
  protected readonly messageOf = messageOf;

  protected async ask(): Promise<void> {
    if (this.form.invalid) {
      showWhatIsMissing(this.form, this.host.nativeElement);
      return;
    }
    const address = this.form.getRawValue().email.trim();
    try {
      await firstValueFrom(this.api.forgotPassword(address));
      this.askedFor.set(address);
    } catch (error) {
      this.failure.set(showFailure(this.form, error));
    }
  }
}
