import { FormControl, FormGroup, type ValidatorFn } from '@angular/forms';
import { type SetDetail, type SetFields, isBeforeOpening, setFields } from '@shared/sets';
import { instantAt, wallClockOf } from '@shared/times';
import { type LateRule, lateRule } from '@shared/late-rule';
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
    lateRule: lateForm(set, clock(set?.lateRule?.until), moment),
  });
}

/** The late rule; its fields count only where late work is taken. */
function lateForm(set: SetDetail | null, until: string, moment: ValidatorFn) {
  const rule = set?.lateRule;
  const percent: ValidatorFn = (control) =>
    control.parent?.get('taken')?.value === true ? checkedBy(lateRule.shape.percent)(control) : null;
  const form = new FormGroup({
    taken: new FormControl(rule != null, { nonNullable: true }),
    percent: new FormControl(rule?.percent ?? 10, { nonNullable: true, validators: percent }),
    of: new FormControl<LateRule['of']>(rule?.of ?? 'awarded', { nonNullable: true }),
    per: new FormControl<LateRule['per']>(rule?.per ?? 'started day', { nonNullable: true }),
    until: new FormControl(until, { nonNullable: true, validators: moment }),
  });
  if (set !== null && !isBeforeOpening(set.stage) && set.stage !== 'open') form.disable();
  return form;
}

export type SetForm = ReturnType<typeof setForm>;

/** What the form says, as it is sent. A time that was not touched keeps its seconds. */
export function fieldsOf(form: SetForm, set: SetDetail | null, timeZone: string): SetFields {
  const { title, coverText, opensAt, closesAt, individualVariants, showKeys, lateRule: late } = form.getRawValue();
  const { taken, until, ...rest } = late;
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
    // Without a last date nothing late could come: the server says which is missing.
    lateRule: taken ? { ...rest, until: instant(until, set?.lateRule?.until ?? null) ?? 0 } : null,
  };
}
