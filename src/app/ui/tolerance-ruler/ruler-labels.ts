import { textWidth } from '../text-width';

/** A name above the ruler before it has a place. */
export interface LooseLabel {
  readonly x: number;
  readonly text: string;
  readonly bold: boolean;
}

/** A name with its row, 0 nearest to the line, and its middle; without a row it is left out. */
export interface PlacedLabel extends LooseLabel {
  readonly row: number | undefined;
  readonly middle: number;
}

/**
 * Gives names rows so that none meets another: those that come first keep the lowest row, one that finds no room in the
 * rows allowed is left out (it is still read out, and named on its tick).
 */
export function placeLabels(labels: readonly LooseLabel[], width: number, rows: number): readonly PlacedLabel[] {
  const taken: { row: number; from: number; to: number }[] = [];
  return labels.map((label) => {
    const half = textWidth(label.text, 12, label.bold ? 600 : 400) / 2 + 4;
    const middle = Math.min(Math.max(label.x, half - 4), width - half + 4);
    const free = (row: number) =>
      !taken.some((other) => other.row === row && middle - half < other.to && other.from < middle + half);
    const row = Array.from({ length: rows }, (_, index) => index).find(free);
    if (row !== undefined) taken.push({ row, from: middle - half, to: middle + half });
    return { ...label, row, middle };
  });
}

/** A dot beneath the ruler. */
export interface Dot {
  readonly x: number;
  readonly y: number;
  readonly chosen: boolean;
}

/** Dots stacked in columns, with how many answers each stands for. */
export interface Dots {
  readonly dots: readonly Dot[];
  readonly each: number;
}

/**
 * Stacks answers as dots in columns. Where a column would grow over `rows`, a dot stands for several answers; what is left
 * over still shows as one, so that a lonely answer never vanishes.
 */
export function stackDots(
  answers: readonly { readonly x: number; readonly chosen: boolean }[],
  column: number,
  top: number,
  pitch: number,
  rows: number,
): Dots {
  const columns = new Map<number, { chosen: number; others: number }>();
  for (const { x, chosen } of answers) {
    const at = Math.round(x / column);
    const counts = columns.get(at) ?? { chosen: 0, others: 0 };
    counts[chosen ? 'chosen' : 'others']++;
    columns.set(at, counts);
  }
  const highest = Math.max(0, ...[...columns.values()].map((counts) => counts.chosen + counts.others));
  const each = Math.max(1, Math.ceil(highest / rows));
  const dots: Dot[] = [];
  for (const [at, counts] of columns) {
    const chosen = Math.ceil(counts.chosen / each);
    const all = Math.min(rows, chosen + Math.ceil(counts.others / each));
    for (let row = 0; row < all; row++) {
      dots.push({ x: at * column, y: top + row * pitch, chosen: row < chosen });
    }
  }
  return { dots, each };
}
