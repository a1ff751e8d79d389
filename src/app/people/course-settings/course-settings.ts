import {
  ChangeDetectionStrategy,
  Component,
  ElementRef,
  computed,
  inject,
  input,
  linkedSignal,
  signal,
} from '@angular/core';
import { rxResource } from '@angular/core/rxjs-interop';
import { ReactiveFormsModule } from '@angular/forms';
import { MatButtonModule } from '@angular/material/button';
import { RouterLink } from '@angular/router';
import { firstValueFrom } from 'rxjs';
import { type Course, course as courseSchema } from '@shared/courses';
import { CoursesApi } from '../../core/api/courses-api';
import { RequestFailure, sentenceOf } from '../../core/api/request-failure';
import { showFailure, showWhatIsMissing } from '../../core/field-messages';
import { Session } from '../../core/session';
import { ErrorState } from '../../ui/error-state/error-state';
import { CourseFields, courseForm } from '../course-fields';

/** Title, term, zone and convention of a course. */
@Component({
  selector: 'app-course-settings',
  imports: [CourseFields, ErrorState, MatButtonModule, ReactiveFormsModule, RouterLink],
  template: `
    <div class="page">
      <h1>The course</h1>
      @if (problem(); as sentence) {
        <app-error-state [text]="sentence" (retried)="course.reload()" />
      } @else if (course.hasValue()) {
        <form [formGroup]="form()" (ngSubmit)="save()" novalidate>
          <app-course-fields [form]="form()" />
          <p class="quiet">
            A new convention holds for revisions made from now on; those that exist keep the one they were written
            under.
          </p>
          @if (theirs(); as other) {
            <div class="clash" role="alert">
              <p>
                Somebody changed the course while you wrote: it is now “{{ other.title }}”, {{ other.term }},
                {{ other.timeZone }}.
              </p>
              <button matButton type="button" (click)="takeTheirs(other)">Take theirs</button>
              <button matButton type="button" (click)="keepMine(other)">Save mine over it</button>
            </div>
          }
          <p class="failure" role="alert">{{ failure() }}</p>
          <p role="status">{{ done() }}</p>
          <div class="acts">
            <button matButton="filled" type="submit">Save</button>
            <a matButton routerLink="..">Back to people</a>
          </div>
        </form>
      }
    </div>
  `,
  styles: `
    .page,
    form {
      display: grid;
      gap: 16px;
      max-width: 560px;
    }
    .page {
      padding: 32px 48px 64px;
    }
    .acts {
      display: flex;
      gap: 16px;
    }
    .clash {
      padding: 12px 16px;
      background: var(--slip-wash);
    }
    .failure {
      color: var(--wrong);
    }
    p:empty {
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
export default class CourseSettings {
  private readonly api = inject(CoursesApi);
  private readonly session = inject(Session);
  private readonly host = inject<ElementRef<HTMLElement>>(ElementRef);

  readonly courseId = input.required<string>();

  protected readonly course = rxResource({
    params: () => this.courseId(),
    stream: ({ params }) => this.api.course(params),
  });
  protected readonly problem = computed(() => {
    const error = this.course.error();
    return error ? sentenceOf(error.cause ?? error) : '';
  });
  protected readonly form = linkedSignal(() => courseForm(this.course.hasValue() ? this.course.value() : undefined));
  protected readonly failure = signal('');
  protected readonly done = signal('');
  /** What a colleague made of the course meanwhile. */
  protected readonly theirs = signal<Course | null>(null);

  protected save(): Promise<void> {
    return this.saveOver(this.course.value()?.version ?? 0);
  }

  protected takeTheirs(course: Course): void {
    this.theirs.set(null);
    this.course.set(course);
  }

  protected keepMine(course: Course): Promise<void> {
    this.theirs.set(null);
    return this.saveOver(course.version);
  }

  private async saveOver(version: number): Promise<void> {
    const form = this.form();
    if (form.invalid) {
      showWhatIsMissing(form, this.host.nativeElement);
      return;
    }
    this.failure.set('');
    this.done.set('');
    try {
      this.course.set(await firstValueFrom(this.api.changeCourse(this.courseId(), version, form.getRawValue())));
      await this.session.refresh();
      this.done.set('Saved.');
    } catch (error) {
      const current =
        error instanceof RequestFailure && error.details.status === 412 ? error.details.current : undefined;
      if (current) this.theirs.set(courseSchema.parse(current));
      else this.failure.set(showFailure(form, error));
    }
  }
}
