/** Who has an answer in hand. */
export interface BarHold {
  readonly name: string;
  readonly initials: string;
  /** 1 to 8. */
  readonly hue: number;
  readonly mine: boolean;
}

/** One answer of a pile, as a bar. */
export interface FringeBar {
  readonly id: string;
  /** The script's code. */
  readonly label: string;
  /** The key of its pattern. */
  readonly group: string;
  readonly state: 'unmarked' | 'marked' | 'set aside';
  /** Marks awarded; null where there are none, or they are not this person's to see. */
  readonly height: number | null;
  readonly held?: BarHold | null;
  /** Whether a second mark is wanted or given. */
  readonly second?: boolean;
  /** Whether it was marked a moment ago. */
  readonly justMarked?: boolean;
}

/** A pattern, in the order of the strip. */
export interface FringeGroup {
  readonly key: string;
  readonly name: string;
}

/** What is read out for a bar. */
export function barInWords(
  bar: FringeBar,
  place: number,
  group: { name: string; count: number },
  full: number,
): string {
  const words = [bar.label, `${place} of ${group.count} in ${group.name}`];
  if (bar.state === 'marked') words.push(bar.height === null ? 'marked' : `marked, ${bar.height} of ${full}`);
  else words.push(bar.state);
  if (bar.held) words.push(bar.held.mine ? 'in your hand' : `held by ${bar.held.name}`);
  if (bar.second) words.push('second mark');
  return words.join(', ');
}
