import type { Pile } from '@shared/marking';

/** Patterns whose answers have no mistake in common, so that no mark fits them all. */
const nothingInCommon: readonly string[] = ['no relation', 'unreadable', 'not checked'];

/**
 * How many answers of the same pattern wait besides one, and are not held by a colleague, as far as the pile tells; 0 where
 * the pattern has nothing in common. The server's preview says which of them would be marked.
 */
export function waitingAlike(pile: Pick<Pile, 'answers' | 'me'>, answerId: string): number {
  const own = pile.answers.find((answer) => answer.id === answerId);
  if (!own || nothingInCommon.includes(own.pattern)) return 0;
  return pile.answers.filter(
    ({ id, pattern, state, hold }) =>
      pattern === own.pattern && id !== answerId && state === 'waits' && (hold === null || hold.holder === pile.me),
  ).length;
}

/** "1 more answer", "5 more answers". */
export function moreAnswers(count: number): string {
  return count === 1 ? '1 more answer' : `${String(count)} more answers`;
}
