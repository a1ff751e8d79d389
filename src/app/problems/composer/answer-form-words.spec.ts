import { AnswerForm } from '@shared/answer-forms';
import { emptyAnswer } from '@shared/problem-draft';
import { beginForm, nextLabel } from './answer-form-words';

describe('beginForm', () => {
  it('keeps whatever was typed for another form, and back', () => {
    let answer = { ...emptyAnswer(), key: 'nbar', unit: 'MHz', followThrough: '1/2' };
    for (const form of Object.values(AnswerForm)) answer = { ...answer, ...beginForm(answer, form) };
    answer = { ...answer, ...beginForm(answer, 'number') };
    expect(answer).toMatchObject({ form: 'number', key: 'nbar', unit: 'MHz', followThrough: '1/2' });
    expect(answer.tolerance).toMatchObject({ relative: '1%', totalVariation: '2%' });
    expect(answer.options).toHaveLength(3);
    expect(answer.variables).toHaveLength(1);
  });

  it('does not write over a tolerance that is there', () => {
    const typed = { ...emptyAnswer(), minimumFidelity: '0.9' };
    expect(beginForm(typed, 'state')).toEqual({ form: 'state' });
  });
});

describe('nextLabel', () => {
  it('is the first letter that is free', () => {
    expect(nextLabel(['A', 'b', 'D'])).toBe('C');
    expect(nextLabel([...'ABCDEFGHIJKLMNOPQRSTUVWXYZ'])).toBe('');
  });
});
