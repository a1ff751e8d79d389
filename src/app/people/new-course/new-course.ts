import { ChangeDetectionStrategy, Component, ElementRef, inject, signal } from '@angular/core';
import { ReactiveFormsModule } from '@angular/forms';
import { MatButtonModule } from '@angular/material/button';
import { Router } from '@angular/router';
import { firstValueFrom } from 'rxjs';
import { CoursesApi } from '../../core/api/courses-api';
import { showFailure, showWhatIsMissing } from '../../core/field-messages';
import { Session } from '../../core/session';
import { CourseFields, courseForm } from '../course-fields';

/** Creates a course; whoever does is its first lead. */
@Component({
  selector: 'app-new-course',
  imports: [CourseFields, MatButtonModule, ReactiveFormsModule],
  template: `
    <form class="page" [formGroup]="form" (ngSubmit)="createCourse()" novalidate>
      <h1>New course</h1>
      <p class="quiet">You will be its first lead. People, problems and sets come next.</p>
      <app-course-fields [form]="form" />
      <p class="failure" role="alert">{{ failure() }}</p>
      <div><button matButton="filled" type="submit">Create the course</button></div>
    </form>
  `,
  styles: `
    .page {
      display: grid;
      gap: 16px;
      max-width: 560px;
      padding: 32px 48px 64px;
    }
    .failure {
      color: var(--wrong);
    }
    .failure:empty {
      display: none;
    }
    @media (max-width: 600px) {
      .page {
        padding: 24px 16px 48px;
      }
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export default class NewCourse {
  private readonly api = inject(CoursesApi);
  private readonly session = inject(Session);
  private readonly router = inject(Router);
  private readonly host = inject<ElementRef<HTMLElement>>(ElementRef);

  protected readonly form = courseForm();
  protected readonly failure = signal('');

  protected async createCourse(): Promise<void> {
    if (this.form.invalid) {
      showWhatIsMissing(this.form, this.host.nativeElement);
      return;
    }
    try {
      const course = await firstValueFrom(this.api.createCourse(this.form.getRawValue()));
      await this.session.refresh();
      await this.router.navigate(['/courses', course.id, 'desk']);
    } catch (error) {
      this.failure.set(showFailure(this.form, error));
    }
  }
}
