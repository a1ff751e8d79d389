import type { Pile, PileAnswer } from '@shared/marking';
import type { Fact } from '../../core/live-connection';
import { withRuling } from '../rulings/ruling-lists';

/** What a fact does to a pile: the pile with it, or that the pile must be fetched again. */
export type AfterFact = { readonly pile: Pile } | 'fetch again';

/**
 * Takes a fact into a pile. Facts that the pile knows already change nothing; one that comes too early shows that another
 * was missed.
 */
export function takeFact(pile: Pile, fact: Fact): AfterFact {
  if (fact.name === 'stageChanged') return fact.body.setId === pile.setId ? 'fetch again' : { pile };
  if (!isOfPiles(fact) || fact.body.pileId !== pile.id) return { pile };
  if (fact.name === 'presenceChanged') return { pile: { ...pile, present: fact.body.present } };
  const { sequence } = fact.body;
  if (sequence <= pile.sequence) return { pile };
  if (sequence > pile.sequence + 1 || fact.name === 'pileChanged') return 'fetch again';
  if (fact.name === 'rulingAsked' || fact.name === 'rulingDecided')
    return { pile: { ...pile, sequence, rulings: withRuling(pile.rulings, fact.body.ruling) } };
  return { pile: { ...pile, sequence, answers: answersAfter(pile, fact) } };
}

type PileFact = Extract<Fact, { body: { pileId: string } }>;

function isOfPiles(fact: Fact): fact is PileFact {
  return 'pileId' in fact.body;
}

type AnswerFact = Exclude<PileFact, { name: 'presenceChanged' | 'pileChanged' | 'rulingAsked' | 'rulingDecided' }>;

function answersAfter(pile: Pile, fact: AnswerFact): PileAnswer[] {
  switch (fact.name) {
    case 'holdsChanged': {
      const taken = new Map(fact.body.taken.map(({ answerId, holder, kind }) => [answerId, { holder, kind }]));
      const letGo = new Set(fact.body.letGo);
      return pile.answers.map((answer) => {
        const hold = taken.get(answer.id);
        return hold ? { ...answer, hold } : letGo.has(answer.id) ? { ...answer, hold: null } : answer;
      });
    }
    case 'answerMarked': {
      const { answerId, version, markerId, total } = fact.body;
      return change(pile, answerId, (answer) => ({
        ...answer,
        version,
        state: 'marked',
        markerId,
        // One's own total is not told to oneself where others listen; the answer to one's own request brought it.
        total: total ?? (answer.version === version ? answer.total : null),
        hold: null,
      }));
    }
    case 'answerSetAside': {
      const { answerId, version } = fact.body;
      return change(pile, answerId, (answer) => ({ ...answer, version, state: 'set aside', hold: null }));
    }
    case 'answerReturned': {
      const { answerId, version } = fact.body;
      return change(pile, answerId, (answer) => ({ ...answer, version, state: 'waits', markerId: null, total: null }));
    }
  }
}

/** A pile with one answer changed; what is older than what the pile knows changes nothing. */
export function change(pile: Pile, answerId: string, to: (answer: PileAnswer) => PileAnswer): PileAnswer[] {
  return pile.answers.map((answer) => {
    if (answer.id !== answerId) return answer;
    const changed = to(answer);
    return changed.version < answer.version ? answer : changed;
  });
}
