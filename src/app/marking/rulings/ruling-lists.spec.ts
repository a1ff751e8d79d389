import type { Ruling } from '@shared/rulings';
import { listRulings, rememberRulingsSeen, rulingsSeen, withRuling } from './ruling-lists';

function buildRuling(id: string, overrides: Partial<Ruling> = {}): Ruling {
  return {
    id,
    question: 'Is twice the key right?',
    askedById: 'brandt',
    askedAt: 1,
    decision: null,
    decidedById: null,
    decidedAt: null,
    answers: [],
    ...overrides,
  };
}

const decided = (id: string, at: number) => buildRuling(id, { decision: 'Yes.', decidedById: 'lead', decidedAt: at });

describe('rulings of a bench', () => {
  it('stand with the newest decision first, and the oldest question first', () => {
    const all = [buildRuling('b', { askedAt: 5 }), decided('c', 7), decided('d', 9), buildRuling('a', { askedAt: 3 })];
    const { open, decided: ruled } = listRulings(all);
    expect(open.map(({ id }) => id)).toEqual(['a', 'b']);
    expect(ruled.map(({ id }) => id)).toEqual(['d', 'c']);
  });

  it('take in what is told, and never lose a decision to older words', () => {
    const asked = buildRuling('a');
    expect(withRuling([], asked)).toEqual([asked]);
    expect(withRuling([asked], decided('a', 4))).toEqual([decided('a', 4)]);
    expect(withRuling([decided('a', 4)], asked)).toEqual([decided('a', 4)]);
  });

  it('are remembered as seen in this browser', () => {
    const pile = crypto.randomUUID();
    expect(rulingsSeen(pile)).toBeNull();
    rememberRulingsSeen(pile, 12);
    expect(rulingsSeen(pile)).toBe(12);
  });
});
