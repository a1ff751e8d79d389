import { readAnswer, type AnswerField } from '@shared/reading';
import { signsFor, withSign } from './signs';

const at = (marked: string) => {
  const from = marked.indexOf('|');
  return { text: marked.replace('|', ''), from, to: from };
};
const formula: AnswerField = { form: 'formula', variables: [{ name: 'kappa' }, { name: 'nbar' }] };
const named = (field: AnswerField, name: string) => signsFor(field).find((sign) => sign.name === name)!;

describe('withSign', () => {
  it('writes at the cursor and puts it where one goes on', () => {
    const root = named({ form: 'number', hint: 'pure number' }, 'square root');
    expect(withSign(at('1/|'), root)).toEqual({ text: '1/√()', from: 4, to: 4 });
    expect(withSign({ text: 'a + 2 + b', from: 4, to: 5 }, root)).toEqual({ text: 'a + √(2) + b', from: 8, to: 8 });
  });

  it('replaces a selection by a sign that encloses nothing', () => {
    const pi = named({ form: 'complex' }, 'pi');
    expect(withSign({ text: '2p', from: 1, to: 2 }, pi)).toEqual({ text: '2π', from: 2, to: 2 });
  });
});

describe('signsFor', () => {
  it('offers a formula’s variables first, as Greek letters where they are', () => {
    expect(
      signsFor(formula)
        .slice(0, 2)
        .map(({ text }) => text),
    ).toEqual(['κ', 'nbar']);
    expect(signsFor(formula).filter(({ text }) => text === 'κ')).toHaveLength(1);
  });

  it('writes what can be read', () => {
    let edited = { text: '', from: 0, to: 0 };
    for (const name of ['variable kappa', 'times', 'square root', 'variable nbar'])
      edited = withSign(edited, named(formula, name));
    expect(readAnswer(edited.text, formula)).toMatchObject({ kind: 'formula', readAs: 'kappa sqrt(nbar)' });
    const state: AnswerField = { form: 'state' };
    const ket = withSign(at('|'), named(state, 'ket'));
    const filled = `${ket.text.slice(0, ket.from)}1${ket.text.slice(ket.from)}`;
    expect(readAnswer(filled, state)).toMatchObject({ kind: 'state', modes: 1 });
    expect(
      readAnswer(
        withSign(at('3|'), named({ form: 'number', hint: 'with a unit' }, 'times ten to the power of')).text + '6 s⁻¹',
        { form: 'number', hint: 'with a unit' },
      ),
    ).toMatchObject({ kind: 'number', si: 3e6 });
  });
});
