import { emptyDraft, emptyPart } from '@shared/problem-draft';
import { defaultConvention } from '@shared/primitives';
import { addGiven, changeAnswer, changeCriterion } from './draft-changes';
import { draftDifferences } from './draft-differences';
import { faultPlace } from './fault-place';

const ids = ['8f9c1b6e-0a1d-4a67-9c11-0d3a2c7b5e10', '1d2f3a4b-5c6d-4e7f-8a9b-0c1d2e3f4a5b'] as const;
const draft = { ...emptyDraft('A splitter', defaultConvention), parts: [emptyPart(...ids)] };

describe('draftDifferences', () => {
  it('finds nothing between equal drafts', () => {
    expect(draftDifferences(draft, structuredClone(draft))).toEqual([]);
  });

  it('names each place in words, with both states', () => {
    const mine = changeCriterion(changeAnswer(draft, 0, { key: 'nbar' }), 0, 0, { marks: '2' });
    const theirs = { ...draft, title: 'A mirror' };
    expect(draftDifferences(mine, theirs)).toEqual([
      { place: 'title', mine: 'A splitter', theirs: 'A mirror' },
      { place: '(a) key', mine: 'nbar', theirs: '' },
      { place: '(a) A1 marks', mine: '2', theirs: '1' },
    ]);
  });

  it('shows what only one of them has', () => {
    expect(draftDifferences(addGiven(draft, 'T'), draft)[0]).toMatchObject({
      place: 'given T name',
      mine: 'T',
      theirs: '',
    });
  });
});

describe('faultPlace', () => {
  it('leads to the tab that shows the fault', () => {
    const withGiven = addGiven(draft, 'T');
    const placeOf = (...path: (string | number)[]) => faultPlace({ path, message: '' }, withGiven);
    expect(placeOf('parts', 0, 'answer', 'key')).toEqual({ tab: 'a', words: '(a) key' });
    expect(placeOf('parts', 0, 'criteria', 0, 'marks')).toEqual({ tab: 'a', words: '(a) mark scheme' });
    expect(placeOf('givens', 0, 'low')).toEqual({ tab: 'givens', words: 'Given T' });
    expect(placeOf('safety').tab).toBe('about');
    expect(placeOf('statement')).toEqual({ tab: null, words: 'Statement' });
  });
});
