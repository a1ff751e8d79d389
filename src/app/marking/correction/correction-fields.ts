import { type FormArray, type FormControl, type FormGroup, type NonNullableFormBuilder } from '@angular/forms';
import { isComputed, type AnswerSpecification, type ComputedSpecification } from '@shared/answer-forms';
import { readTypedNumber, typeFraction, typeNumber } from '@shared/typed-number';

/** One slip as it is typed. */
type SlipForm = FormGroup<{
  name: FormControl<string>;
  expression: FormControl<string>;
  feedback: FormControl<string>;
  fraction: FormControl<string>;
}>;

/** A correction as it is typed; its shape follows the request's, so that the server's messages find their fields. */
export type CorrectionForm = FormGroup<{
  answer: FormGroup<{
    key: FormControl<string>;
    correct: FormControl<string>;
    minimumFidelity: FormControl<string>;
    tolerance: FormGroup<{
      relative: FormControl<string>;
      absolute: FormControl<string>;
      significantFigures: FormControl<string>;
      totalVariation: FormControl<string>;
    }>;
    slips: FormArray<SlipForm>;
  }>;
  reason: FormControl<string>;
  note: FormControl<string>;
}>;

/** The fields of a tolerance, with what they are called. */
export const toleranceWords = {
  relative: 'relative, for example 1%',
  absolute: 'absolute',
  significantFigures: 'significant figures',
  totalVariation: 'total variation',
} as const;
export type ToleranceName = keyof typeof toleranceWords;

/** The fields of tolerance that a form of answer has. */
export function toleranceNames(answer: AnswerSpecification): readonly ToleranceName[] {
  if (!isComputed(answer) || answer.form === 'state') return [];
  return answer.form === 'distribution' ? ['totalVariation'] : ['relative', 'absolute', 'significantFigures'];
}

/** A new row for a slip. */
export function slipForm(
  fb: NonNullableFormBuilder,
  slip: { name?: string | undefined; expression?: string; feedback?: string; fraction?: number } = {},
): SlipForm {
  return fb.group({
    name: slip.name ?? '',
    expression: slip.expression ?? '',
    feedback: slip.feedback ?? '',
    fraction: typeFraction(slip.fraction ?? 0),
  });
}

/** The fields of a part as it is checked at present. */
export function correctionForm(fb: NonNullableFormBuilder, answer: AnswerSpecification): CorrectionForm {
  const tolerance: Readonly<Partial<Record<ToleranceName, number | undefined>>> =
    isComputed(answer) && answer.form !== 'state' ? answer.tolerance : {};
  const typed = (value: number | undefined) => (value === undefined ? '' : typeNumber(value));
  return fb.group({
    answer: fb.group({
      key: isComputed(answer) ? answer.key : '',
      correct: answer.form === 'choice' ? answer.correct.join(', ') : '',
      minimumFidelity: answer.form === 'state' ? typeNumber(answer.minimumFidelity) : '',
      tolerance: fb.group({
        relative: typed(tolerance.relative),
        absolute: typed(tolerance.absolute),
        significantFigures: typed(tolerance.significantFigures),
        totalVariation: typed(tolerance.totalVariation),
      }),
      slips: fb.array((isComputed(answer) ? (answer.slips ?? []) : []).map((slip) => slipForm(fb, slip))),
    }),
    reason: '',
    note: '',
  });
}

/**
 * The answer's specification with what is typed in place of key, tolerance and slips; all else stays. A number that cannot
 * be read is handed on as none, so that the server says what it lacks.
 */
export function amendedAnswer(answer: AnswerSpecification, form: CorrectionForm): AnswerSpecification {
  const typed = form.getRawValue().answer;
  if (answer.form === 'worked') return answer;
  if (answer.form === 'choice') {
    const correct = typed.correct.split(/[,;\s]+/).filter((label) => label !== '');
    return { ...answer, correct };
  }
  const slips = typed.slips.map(({ name, expression, feedback, fraction }) => ({
    ...(name.trim() === '' ? {} : { name: name.trim() }),
    expression,
    feedback,
    fraction: readTypedNumber(fraction) ?? NaN,
  }));
  const base = { ...answer, key: typed.key, ...(slips.length > 0 || answer.slips ? { slips } : {}) };
  return withTolerance(base, typed);
}

type Typed = ReturnType<CorrectionForm['getRawValue']>['answer'];

function withTolerance(base: ComputedSpecification, { tolerance, minimumFidelity }: Typed): ComputedSpecification {
  const number = (text: string) => (text.trim() === '' ? undefined : (readTypedNumber(text) ?? NaN));
  if (base.form === 'state') return { ...base, minimumFidelity: number(minimumFidelity) ?? NaN };
  if (base.form === 'distribution')
    return { ...base, tolerance: { totalVariation: number(tolerance.totalVariation) ?? NaN } };
  const [relative, absolute, significantFigures] = [
    number(tolerance.relative),
    number(tolerance.absolute),
    number(tolerance.significantFigures),
  ];
  return {
    ...base,
    tolerance: {
      ...(relative === undefined ? {} : { relative }),
      ...(absolute === undefined ? {} : { absolute }),
      ...(significantFigures === undefined ? {} : { significantFigures }),
    },
  };
}
