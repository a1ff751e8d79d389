import { ChangeDetectionStrategy, Component, input } from '@angular/core';
import { FormControl, FormGroup, ReactiveFormsModule } from '@angular/forms';
import { MatAutocompleteModule } from '@angular/material/autocomplete';
import { MatFormFieldModule } from '@angular/material/form-field';
import { MatInputModule } from '@angular/material/input';
import { MatSelectModule } from '@angular/material/select';
import { courseRoutes } from '@shared/courses';
import { type Convention, defaultConvention } from '@shared/primitives';
import { checkedBy, messageOf } from '../core/field-messages';

const { shape } = courseRoutes.createCourse.body;

/** The form of a course's title, term, zone and convention, empty or from a course. */
export function courseForm(
  course: { title: string; term: string; timeZone: string; convention: Convention } = {
    title: '',
    term: '',
    timeZone: Intl.DateTimeFormat().resolvedOptions().timeZone,
    convention: defaultConvention,
  },
) {
  const text = (value: string, name: 'title' | 'term' | 'timeZone') =>
    new FormControl(value, { nonNullable: true, validators: checkedBy(shape[name]), updateOn: 'blur' });
  return new FormGroup({
    title: text(course.title, 'title'),
    term: text(course.term, 'term'),
    timeZone: text(course.timeZone, 'timeZone'),
    convention: new FormGroup({
      vacuumVariance: new FormControl(course.convention.vacuumVariance, { nonNullable: true }),
      squeezingSign: new FormControl(course.convention.squeezingSign, { nonNullable: true }),
      splitterPhase: new FormControl(course.convention.splitterPhase, { nonNullable: true }),
    }),
  });
}

/** The fields of a course, for a new one and for its settings. */
@Component({
  selector: 'app-course-fields',
  imports: [MatAutocompleteModule, MatFormFieldModule, MatInputModule, MatSelectModule, ReactiveFormsModule],
  template: `
    <ng-container [formGroup]="form()">
      <mat-form-field>
        <mat-label>Title</mat-label>
        <input matInput formControlName="title" autocomplete="off" />
        <mat-error>{{ messageOf(form().controls.title) }}</mat-error>
      </mat-form-field>
      <mat-form-field>
        <mat-label>Term</mat-label>
        <input matInput formControlName="term" autocomplete="off" placeholder="autumn term 2026" />
        <mat-error>{{ messageOf(form().controls.term) }}</mat-error>
      </mat-form-field>
      <mat-form-field>
        <mat-label>Time zone</mat-label>
        <input matInput formControlName="timeZone" [matAutocomplete]="zones" autocomplete="off" #zone />
        <mat-autocomplete #zones="matAutocomplete">
          @for (name of zonesLike(zone.value); track name) {
            <mat-option [value]="name">{{ name }}</mat-option>
          }
        </mat-autocomplete>
        <mat-hint>All dates of the course are shown in it.</mat-hint>
        <mat-error>{{ messageOf(form().controls.timeZone) }}</mat-error>
      </mat-form-field>
      <fieldset formGroupName="convention">
        <legend>Convention, printed on every sheet</legend>
        <mat-form-field>
          <mat-label>Variance of a quadrature in the vacuum</mat-label>
          <mat-select formControlName="vacuumVariance">
            <mat-option [value]="0.5">1/2, x = (a + a†)/√2</mat-option>
            <mat-option [value]="0.25">1/4, x = (a + a†)/2</mat-option>
            <mat-option [value]="1">1, x = a + a†</mat-option>
          </mat-select>
        </mat-form-field>
        <mat-form-field>
          <mat-label>Sign of squeezing</mat-label>
          <mat-select formControlName="squeezingSign">
            <mat-option [value]="1">positive r squeezes x</mat-option>
            <mat-option [value]="-1">positive r squeezes p</mat-option>
          </mat-select>
        </mat-form-field>
        <mat-form-field>
          <mat-label>Phase of reflection at a splitter</mat-label>
          <mat-select formControlName="splitterPhase">
            <mat-option [value]="quarterTurn">π/2 on both sides</mat-option>
            <mat-option [value]="0">0 and π</mat-option>
          </mat-select>
        </mat-form-field>
      </fieldset>
    </ng-container>
  `,
  styles: `
    :host,
    fieldset {
      display: grid;
      gap: 16px;
    }
    legend {
      margin-bottom: 12px;
      font: 600 12px/16px var(--ui);
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class CourseFields {
  readonly form = input.required<ReturnType<typeof courseForm>>();

  protected readonly messageOf = messageOf;
  protected readonly quarterTurn = Math.PI / 2;
  private readonly zones = Intl.supportedValuesOf('timeZone');

  protected zonesLike(typed: string): readonly string[] {
    const wanted = typed.toLowerCase().replaceAll(' ', '_');
    const found = this.zones.filter((name) => name.toLowerCase().includes(wanted));
    return (found.length === 1 && found[0] === typed ? this.zones : found).slice(0, 40);
  }
}
