import { ChangeDetectionStrategy, Component, ElementRef, inject, signal } from '@angular/core';
import { FormControl, FormGroup, ReactiveFormsModule } from '@angular/forms';
import { MatButtonModule } from '@angular/material/button';
import { MatButtonToggleModule } from '@angular/material/button-toggle';
import { MatFormFieldModule } from '@angular/material/form-field';
import { MatInputModule } from '@angular/material/input';
import { Router } from '@angular/router';
import { firstValueFrom } from 'rxjs';
import * as z from 'zod';
import { newPassword, passwordMinimum } from '@shared/accounts';
import { AccountsApi } from '../../core/api/accounts-api';
import { checkedBy, messageOf, showFailure, showWhatIsMissing } from '../../core/field-messages';
import { ColourScheme, colourSchemes } from '../../core/colour-scheme';
import { Session } from '../../core/session';
import { CalendarSection } from '../calendar-section/calendar-section';
import { OwnData } from '../own-data/own-data';

/** A person's own account: password, sign-out everywhere, light or dark. */
@Component({
  selector: 'app-your-account',
  imports: [
    CalendarSection,
    MatButtonModule,
    MatButtonToggleModule,
    MatFormFieldModule,
    MatInputModule,
    OwnData,
    ReactiveFormsModule,
  ],
  templateUrl: './your-account.html',
  styleUrl: './your-account.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export default class YourAccount {
  private readonly api = inject(AccountsApi);
  private readonly router = inject(Router);
  private readonly host = inject<ElementRef<HTMLElement>>(ElementRef);
  protected readonly session = inject(Session);
  protected readonly scheme = inject(ColourScheme);

  protected readonly form = new FormGroup({
    current: new FormControl('', {
      nonNullable: true,
      validators: checkedBy(z.string().min(1, 'Give your present password.')),
      updateOn: 'blur',
    }),
    password: new FormControl('', { nonNullable: true, validators: checkedBy(newPassword), updateOn: 'blur' }),
  });
  protected readonly failure = signal('');
  protected readonly done = signal('');
  protected readonly messageOf = messageOf;
  protected readonly passwordMinimum = passwordMinimum;
  protected readonly schemes = colourSchemes;

  protected async changePassword(): Promise<void> {
    this.done.set('');
    this.failure.set('');
    if (this.form.invalid) {
      showWhatIsMissing(this.form, this.host.nativeElement);
      return;
    }
    const { current, password } = this.form.getRawValue();
    try {
      await firstValueFrom(this.api.changePassword(current, password));
      this.form.reset();
      this.done.set('The password is changed. Everywhere else you are signed out.');
    } catch (error) {
      this.failure.set(showFailure(this.form, error));
    }
  }

  protected async signOutEverywhere(): Promise<void> {
    await this.session.signOut(true);
    await this.router.navigateByUrl('/sign-in');
  }
}
