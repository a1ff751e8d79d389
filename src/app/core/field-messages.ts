import type { AbstractControl, FormGroup, ValidatorFn } from '@angular/forms';
import type * as z from 'zod';
import { RequestFailure } from './api/request-failure';

/** A validator that uses the schema which the server uses, with its sentence. */
export function checkedBy(schema: z.ZodType): ValidatorFn {
  return (control) => {
    const parsed = schema.safeParse(control.value);
    return parsed.success ? null : { message: parsed.error.issues[0]?.message ?? 'This cannot be used.' };
  };
}

/** What is wrong with a field, to be shown beside it; empty where nothing is. */
export function messageOf(control: AbstractControl): string {
  return String(control.getError('message') ?? '');
}

/**
 * Puts the server's messages beside the fields they are about; what was typed stays.
 *
 * @returns the sentence for the form as a whole; empty where every message found its field
 */
export function showFailure(form: FormGroup, error: unknown): string {
  if (!(error instanceof RequestFailure)) throw error;
  let placed = 0;
  for (const field of error.details.fields ?? []) {
    const control = form.get(field.path.map(String));
    if (!control) continue;
    control.setErrors({ message: field.message });
    control.markAsTouched();
    placed += 1;
  }
  return placed > 0 && placed === error.details.fields?.length ? '' : error.message;
}

/** Marks every field as visited, so that what is missing shows; focuses the first that is wrong. */
export function showWhatIsMissing(form: FormGroup, host: HTMLElement): void {
  form.markAllAsTouched();
  queueMicrotask(() => host.querySelector<HTMLElement>('.ng-invalid:not(form):not(fieldset)')?.focus());
}
