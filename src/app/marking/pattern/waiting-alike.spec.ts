import type { PileAnswer } from '@shared/marking';
import { moreAnswers, waitingAlike } from './waiting-alike';

const me = 'me';

function buildAnswer(id: string, overrides: Partial<PileAnswer> = {}): PileAnswer {
  return {
    id,
    code: id,
    version: 1,
    state: 'waits',
    pattern: 'relation twice the key',
    markerId: null,
    total: null,
    ratio: 2,
    hold: null,
    ...overrides,
  };
}

describe('answers that wait alike', () => {
  it('are those of the same pattern that nobody else holds', () => {
    const answers = [
      buildAnswer('K7QF', { hold: { holder: me, kind: 'in hand' } }),
      buildAnswer('W3MD', { hold: { holder: me, kind: 'reserved' } }),
      buildAnswer('T9HX'),
      buildAnswer('A2BC', { hold: { holder: 'colleague', kind: 'reserved' } }),
      buildAnswer('B3CD', { state: 'marked' }),
      buildAnswer('C4DE', { state: 'set aside' }),
      buildAnswer('D5EF', { pattern: 'right' }),
    ];
    expect(waitingAlike({ answers, me }, 'K7QF')).toBe(2);
    expect(waitingAlike({ answers, me }, 'nobody')).toBe(0);
  });

  it('are none where a pattern has nothing in common', () => {
    const answers = [buildAnswer('a', { pattern: 'no relation' }), buildAnswer('b', { pattern: 'no relation' })];
    expect(waitingAlike({ answers, me }, 'a')).toBe(0);
  });

  it('are counted in words', () => {
    expect([moreAnswers(1), moreAnswers(5)]).toEqual(['1 more answer', '5 more answers']);
  });
});
