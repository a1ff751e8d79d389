import { FormControl, FormGroup, type ValidatorFn } from '@angular/forms';
import { type SetDetail, type SetFields, isBeforeOpening, setFields } from '@shared/sets';
import { instantAt, wallClockOf } from '@shared/times';
import { checkedBy } from '../../core/field-messages';

/** The form of a set's settings, empty or from a set; what is frozen is disabled. */
export function setForm(set: SetDetail | null, timeZone: string) {
  const clock = (instant: number | null | undefined) => (instant == null ? '' : wallClockOf(instant, timeZone));
  const isFrozen = set !== null && !isBeforeOpening(set.stage);
  const moment: ValidatorFn = ({ value }) =>
    value === '' || !Number.isNaN(instantAt(String(value), timeZone))
      ? null
      : { message: 'This is no time; give a day and a time of day.' };
  return new FormGroup({
    title: new FormControl(set?.title ?? '', {
      nonNullable: true,
      validators: checkedBy(setFields.shape.title),
      updateOn: 'blur',
    }),
    coverText: new FormControl(set?.coverText ?? '', {
      nonNullable: true,
      validators: checkedBy(setFields.shape.coverText),
    }),
    opensAt: new FormControl(
      { value: clock(set?.opensAt), disabled: isFrozen },
      { nonNullable: true, validators: moment },
    ),
    closesAt: new FormControl(
      { value: clock(set?.closesAt), disabled: isFrozen && set.stage !== 'open' },
      { nonNullable: true, validators: moment },
    ),
    individualVariants: new FormControl(
      { value: set?.individualVariants ?? true, disabled: isFrozen },
      { nonNullable: true },
    ),
    showKeys: new FormControl(
      { value: set?.showKeys ?? true, disabled: set?.stage === 'released' || set?.stage === 'archived' },
      { nonNullable: true },
    ),
  });
}

export type SetForm = ReturnType<typeof setForm>;

/** What the form says, as it is sent. A time that was not touched keeps its seconds. */
export function fieldsOf(form: SetForm, set: SetDetail | null, timeZone: string): SetFields {
  const { title, coverText, opensAt, closesAt, individualVariants, showKeys } = form.getRawValue();
  const instant = (text: string, before: number | null) => {
    if (text === '') return null;
    return before !== null && wallClockOf(before, timeZone) === text ? before : instantAt(text, timeZone);
  };
  return {
    title,
    coverText,
    opensAt: instant(opensAt, set?.opensAt ?? null),
    closesAt: instant(closesAt, set?.closesAt ?? null),
    individualVariants,
    showKeys,
  };
}
