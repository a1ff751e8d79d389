import type { State } from './state';

/** So many states are remembered before all are forgotten: those of one long expression. */
const MOST_REMEMBERED = 1_000;

const memos: StateMemo<unknown>[] = [];

/**
 * What has been worked out of states, so that several figures of a state, or several parts of a computation, share it.
 *
 * A WeakMap would do without forgetting, but it keeps what it holds alive until a full collection of garbage: the
 * arrays of thousands of states that nobody asks for again are copied around until then.
 */
export class StateMemo<Known> {
  private known = new Map<State, Known>();

  constructor() {
    memos.push(this);
  }

  get(state: State): Known | undefined {
    return this.known.get(state);
  }

  set(state: State, value: Known): void {
    if (this.known.size >= MOST_REMEMBERED) this.forget();
    this.known.set(state, value);
  }

  forget(): void {
    // A new map rather than a cleared one: that would hang on to what it held until a full collection too.
    if (this.known.size > 0) this.known = new Map();
  }
}

/** Forgets everything that was worked out of states. Nothing but time is lost: it is worked out again when asked for. */
export function forgetStates(): void {
  for (const memo of memos) memo.forget();
}
