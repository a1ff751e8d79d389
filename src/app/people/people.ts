import { ChangeDetectionStrategy, Component, ElementRef, computed, inject, input, signal } from '@angular/core';
import { rxResource } from '@angular/core/rxjs-interop';
import { FormControl, FormGroup, ReactiveFormsModule } from '@angular/forms';
import { MatButtonModule } from '@angular/material/button';
import { MatFormFieldModule } from '@angular/material/form-field';
import { MatIconModule } from '@angular/material/icon';
import { MatInputModule } from '@angular/material/input';
import { MatMenuModule } from '@angular/material/menu';
import { MatPaginatorModule } from '@angular/material/paginator';
import { MatSelectModule } from '@angular/material/select';
import { MatTableModule } from '@angular/material/table';
import { Router, RouterLink } from '@angular/router';
import { firstValueFrom } from 'rxjs';
import { email, personName } from '@shared/accounts';
import type { Member } from '@shared/courses';
import { type Role, roles } from '@shared/primitives';
import { address } from '../core/address';
import { CoursesApi } from '../core/api/courses-api';
import { sentenceOf } from '../core/api/request-failure';
import { checkedBy, messageOf, showFailure, showWhatIsMissing } from '../core/field-messages';
import { EmptyState } from '../ui/empty-state/empty-state';
import { ErrorState } from '../ui/error-state/error-state';
import { MarkerToken } from '../ui/marker-token/marker-token';

/** The people of a course, one page at a time, and a line to add one. */
@Component({
  selector: 'app-people',
  imports: [
    EmptyState,
    ErrorState,
    MarkerToken,
    MatButtonModule,
    MatFormFieldModule,
    MatIconModule,
    MatInputModule,
    MatMenuModule,
    MatPaginatorModule,
    MatSelectModule,
    MatTableModule,
    ReactiveFormsModule,
    RouterLink,
  ],
  templateUrl: './people.html',
  styleUrl: './people.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export default class People {
  private readonly api = inject(CoursesApi);
  private readonly router = inject(Router);
  private readonly host = inject<ElementRef<HTMLElement>>(ElementRef);

  /** From the address: course, and the list's filters. */
  readonly courseId = input.required<string>();
  readonly search = input('', { transform: address.text });
  readonly role = input<Role>();
  readonly page = input(1, { transform: address.page });

  protected readonly roles = roles;
  protected readonly columns = ['name', 'role', 'email', 'state', 'acts'];
  protected readonly messageOf = messageOf;
  protected readonly people = rxResource({
    params: () => ({ courseId: this.courseId(), search: this.search(), role: this.role(), page: this.page() }),
    stream: ({ params: { courseId, ...query } }) => this.api.people(courseId, query),
  });
  protected readonly problem = computed(() => {
    const error = this.people.error();
    return error ? sentenceOf(error.cause ?? error) : '';
  });
  protected readonly isFiltered = computed(() => this.search() !== '' || this.role() !== undefined);

  protected readonly form = new FormGroup({
    name: new FormControl('', { nonNullable: true, validators: checkedBy(personName), updateOn: 'submit' }),
    email: new FormControl('', { nonNullable: true, validators: checkedBy(email), updateOn: 'submit' }),
    role: new FormControl<Role>('student', { nonNullable: true }),
  });
  protected readonly failure = signal('');
  /** What was done last, with the way back where there is one. */
  protected readonly done = signal<{ text: string; undo?: () => Promise<void> } | null>(null);
  protected readonly link = signal<{ name: string; address: string } | null>(null);

  protected filterBy(filter: { search?: string; role?: Role | null; page?: number }): void {
    const queryParams = { page: null, ...filter, ...(filter.search === '' ? { search: null } : {}) };
    void this.router.navigate([], { queryParams, queryParamsHandling: 'merge', replaceUrl: true });
  }

  protected async addPerson(): Promise<void> {
    if (this.form.invalid) {
      showWhatIsMissing(this.form, this.host.nativeElement);
      return;
    }
    this.failure.set('');
    try {
      const member = await firstValueFrom(this.api.addPerson(this.courseId(), this.form.getRawValue()));
      this.form.reset({ role: this.form.getRawValue().role });
      const letter = member.hasPassword ? '' : ' An invitation is on its way.';
      this.say(`${member.name} was added as ${member.role}.${letter}`);
    } catch (error) {
      this.failure.set(showFailure(this.form, error));
    }
  }

  protected async changeRole(member: Member, role: Role): Promise<void> {
    await this.attempt(async () => {
      await firstValueFrom(this.api.changeRole(this.courseId(), member.membershipId, role));
      this.say(`${member.name} is now ${role}.`, () => this.changeRole({ ...member, role }, member.role));
    });
  }

  protected async remove(member: Member): Promise<void> {
    await this.attempt(async () => {
      await firstValueFrom(this.api.removePerson(this.courseId(), member.membershipId));
      this.say(`${member.name} was taken out of the course. Scripts and marks stay.`, () =>
        this.attempt(async () => {
          await firstValueFrom(this.api.restorePerson(this.courseId(), member.membershipId));
          this.say(`${member.name} is back.`);
        }),
      );
    });
  }

  protected async inviteAgain(member: Member): Promise<void> {
    await this.attempt(async () => {
      const { link } = await firstValueFrom(this.api.inviteAgain(this.courseId(), member.membershipId));
      if (link === null) this.say(`A new invitation to ${member.name} is on its way.`);
      else this.link.set({ name: member.name, address: link });
    });
  }

  private say(text: string, undo?: () => Promise<void>): void {
    this.done.set(undo ? { text, undo } : { text });
    this.link.set(null);
    this.people.reload();
  }

  private async attempt(act: () => Promise<void>): Promise<void> {
    this.failure.set('');
    try {
      await act();
    } catch (error) {
      this.failure.set(sentenceOf(error));
    }
  }
}
