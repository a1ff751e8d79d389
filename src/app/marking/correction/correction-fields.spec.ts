import { TestBed } from '@angular/core/testing';
import { NonNullableFormBuilder } from '@angular/forms';
import type { AnswerSpecification } from '@shared/answer-forms';
import { typeFraction } from '@shared/typed-number';
import { amendedAnswer, correctionForm, slipForm } from './correction-fields';

const forms: readonly AnswerSpecification[] = [
  {
    form: 'number',
    key: 'nbar/2',
    unit: 'MHz',
    unitFraction: 0.5,
    tolerance: { relative: 0.01, significantFigures: 3 },
  },
  {
    form: 'list',
    key: '[1, 2]',
    tolerance: { absolute: 0.1 },
    slips: [{ expression: '[2, 1]', feedback: 'x', fraction: 0.25 }],
  },
  { form: 'distribution', key: '[1]', tolerance: { totalVariation: 0.01 }, followThrough: 0.5 },
  { form: 'state', key: 'ket(1)', minimumFidelity: 0.99 },
  { form: 'choice', options: ['A', 'B', 'C'], correct: ['B', 'C'], several: true },
];

describe('the fields of a correction', () => {
  it.each(forms)('give back what they were filled with ($form)', (answer) => {
    const form = correctionForm(TestBed.inject(NonNullableFormBuilder), answer);
    expect(amendedAnswer(answer, form)).toEqual(answer);
  });

  it.each([
    [1 / 3, '1/3'],
    [5 / 6, '5/6'],
    [0.5, '0.5'],
    [0, '0'],
    [0.123456, '0.123456'],
  ])('write the fraction %d as %s', (fraction, typed) => {
    expect(typeFraction(fraction)).toBe(typed);
  });

  it('amend key, tolerance and slips', () => {
    const fb = TestBed.inject(NonNullableFormBuilder);
    const [answer] = forms;
    if (!answer) throw new Error('There is no case.');
    const form = correctionForm(fb, answer);
    form.controls.answer.patchValue({ key: 'nbar', tolerance: { relative: '2%', significantFigures: '' } });
    form.controls.answer.controls.slips.push(slipForm(fb, { name: 'half', expression: 'nbar/2', feedback: 'No.' }));
    expect(amendedAnswer(answer, form)).toEqual({
      ...answer,
      key: 'nbar',
      tolerance: { relative: 0.02 },
      slips: [{ name: 'half', expression: 'nbar/2', feedback: 'No.', fraction: 0 }],
    });
  });
});
