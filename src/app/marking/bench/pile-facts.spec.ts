import type { Pile, PileAnswer } from '@shared/marking';
import type { Fact } from '../../core/live-connection';
import { change, takeFact } from './pile-facts';

const [me, brandt, pileId, first, second] = Array.from({ length: 5 }, () => crypto.randomUUID()) as [
  string,
  string,
  string,
  string,
  string,
];

function buildAnswer(overrides: Partial<PileAnswer> = {}): PileAnswer {
  return {
    id: first,
    code: 'K7QF',
    version: 1,
    state: 'waits',
    pattern: 'right',
    markerId: null,
    total: null,
    ratio: 1,
    hold: null,
    ...overrides,
  };
}

function buildPile(answers: PileAnswer[]): Pile {
  return {
    id: pileId,
    setProblemId: pileId,
    position: 1,
    problemTitle: 'Behind the loss',
    partLabel: 'a',
    heading: '',
    marks: 3,
    courseId: pileId,
    setId: pileId,
    setNumber: 4,
    setTitle: 'Losses',
    stage: 'marking',
    open: true,
    sequence: 7,
    criteria: [],
    patterns: [],
    answers,
    team: [],
    present: [],
    rulings: [],
    me,
    seesAllMarks: false,
  };
}

const marked = (body: Partial<Extract<Fact, { name: 'answerMarked' }>['body']> = {}): Fact => ({
  name: 'answerMarked',
  body: { pileId, sequence: 8, answerId: first, version: 2, markerId: brandt, total: null, ...body },
});

describe('facts about a pile', () => {
  it('show a colleague’s mark without its total', () => {
    const after = takeFact(buildPile([buildAnswer({ hold: { holder: brandt, kind: 'in hand' } })]), marked());
    expect(after).toMatchObject({
      pile: { sequence: 8, answers: [{ state: 'marked', markerId: brandt, total: null, hold: null }] },
    });
  });

  it('leave one’s own total where the answer to the request has brought it already', () => {
    const pile = buildPile([buildAnswer({ state: 'marked', version: 2, markerId: me, total: 2 })]);
    expect(takeFact(pile, marked({ markerId: me }))).toMatchObject({ pile: { answers: [{ total: 2 }] } });
  });

  it('take and give up holds', () => {
    const pile = buildPile([buildAnswer({ hold: { holder: brandt, kind: 'in hand' } }), buildAnswer({ id: second })]);
    const after = takeFact(pile, {
      name: 'holdsChanged',
      body: { pileId, sequence: 8, taken: [{ answerId: second, kind: 'reserved', holder: brandt }], letGo: [first] },
    });
    expect(after).toMatchObject({
      pile: { answers: [{ hold: null }, { hold: { holder: brandt, kind: 'reserved' } }] },
    });
  });

  it('that are known already change nothing', () => {
    const pile = buildPile([buildAnswer()]);
    expect(takeFact(pile, marked({ sequence: 7 }))).toEqual({ pile });
  });

  it('that come too early ask for the pile again', () => {
    expect(takeFact(buildPile([buildAnswer()]), marked({ sequence: 9 }))).toBe('fetch again');
    expect(takeFact(buildPile([]), { name: 'pileChanged', body: { pileId, sequence: 8 } })).toBe('fetch again');
  });

  it('bring rulings as they are asked for and decided', () => {
    const ruling = {
      id: second,
      question: 'Is twice the key right?',
      askedById: brandt,
      askedAt: 1,
      decision: null,
      decidedById: null,
      decidedAt: null,
      answers: [{ answerId: first, code: 'K7QF', byId: brandt }],
    };
    const asked = takeFact(buildPile([]), { name: 'rulingAsked', body: { pileId, sequence: 8, ruling } });
    expect(asked).toMatchObject({ pile: { sequence: 8, rulings: [ruling] } });
    if (asked === 'fetch again') throw new Error('Nothing was missed.');
    const decided = { ...ruling, decision: 'Yes.', decidedById: me, decidedAt: 2 };
    const after = takeFact(asked.pile, { name: 'rulingDecided', body: { pileId, sequence: 9, ruling: decided } });
    expect(after).toMatchObject({ pile: { sequence: 9, rulings: [decided] } });
  });

  it('about another pile change nothing', () => {
    const pile = buildPile([buildAnswer()]);
    expect(takeFact(pile, marked({ pileId: second, sequence: 99 }))).toEqual({ pile });
  });

  it('never put an older state over a newer one', () => {
    const pile = buildPile([buildAnswer({ version: 5, state: 'marked', markerId: me, total: 3 })]);
    expect(change(pile, first, (answer) => ({ ...answer, version: 4, state: 'waits' }))).toEqual(pile.answers);
  });
});
