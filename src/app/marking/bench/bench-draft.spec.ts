import type { BenchAnswer } from '@shared/marking';
import type { Criterion } from '@shared/problems';
import { dropDraft, firstDraft, keepDraft, keptDraft, totalOf } from './bench-draft';

const criterion = (id: string, marks: number) => ({ id, marks }) as Criterion;

describe('drafts of marks', () => {
  const answer = (overrides: Partial<BenchAnswer>) =>
    ({ proposed: ['m1'], standing: null, ...overrides }) as BenchAnswer;

  it('begin with what the check proposes', () => {
    expect(firstDraft(answer({}))).toMatchObject({ awarded: ['m1'], remark: '', reason: '' });
  });

  it('begin with the mark that stands, where there is one', () => {
    const standing = {
      criteria: [
        { criterionId: 'm1', awarded: false },
        { criterionId: 'b1', awarded: true },
      ],
      remark: 'See (a).',
    } as NonNullable<BenchAnswer['standing']>;
    expect(firstDraft(answer({ standing }))).toMatchObject({ awarded: ['b1'], remark: 'See (a).' });
  });

  it('survive a reload of the page until they are dropped', () => {
    const draft = { awarded: ['m1'], remark: 'half a', reason: '', key: 'k' };
    keepDraft('one', draft);
    expect(keptDraft('one')).toEqual(draft);
    dropDraft('one');
    expect(keptDraft('one')).toBeNull();
  });

  it('add up as on paper', () => {
    expect(totalOf(['a', 'b'], [criterion('a', 0.1), criterion('b', 0.2), criterion('c', 1)])).toBe(0.3);
  });
});
