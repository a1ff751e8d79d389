import type { Ruling } from '@shared/rulings';

/** Rulings as the side column shows them. */
export interface RulingLists {
  /** Those that wait for the lead, the oldest first. */
  readonly open: readonly Ruling[];
  /** The newest first. */
  readonly decided: readonly Ruling[];
}

/** Parts what waits for the lead from what is decided. */
export function listRulings(rulings: readonly Ruling[]): RulingLists {
  const open = rulings.filter((each) => each.decidedAt === null);
  const decided = rulings.filter((each) => each.decidedAt !== null);
  return {
    open: open.sort((one, other) => one.askedAt - other.askedAt),
    decided: decided.sort((one, other) => (other.decidedAt ?? 0) - (one.decidedAt ?? 0)),
  };
}

/** Rulings with one more, or one changed; a decided one is not undone by an older word of it. */
export function withRuling(rulings: readonly Ruling[], ruling: Ruling): Ruling[] {
  const before = rulings.find((each) => each.id === ruling.id);
  if (!before) return [...rulings, ruling];
  if (before.decidedAt !== null && ruling.decidedAt === null) return [...rulings];
  return rulings.map((each) => (each.id === ruling.id ? ruling : each));
}

const place = (pileId: string) => `halfsilver rulings ${pileId}`;

/** Until when this browser has seen the rulings of a pile, in UTC milliseconds; null where it was never here. */
export function rulingsSeen(pileId: string): number | null {
  const text = localStorage.getItem(place(pileId));
  const at = text === null ? NaN : Number(text);
  return Number.isFinite(at) ? at : null;
}

/** Remembers until when the rulings of a pile were seen. */
export function rememberRulingsSeen(pileId: string, at: number): void {
  localStorage.setItem(place(pileId), String(at));
}
