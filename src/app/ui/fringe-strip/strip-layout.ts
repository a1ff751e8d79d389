import type { FringeBar, FringeGroup } from './fringe-bar';

/** Heights of the strip, in pixels. */
export const strip = { height: 124, flagTop: 8, top: 28, field: 88, base: 116 } as const;

const widestPitch = 12;
/** Below this the group of right answers becomes one block. */
const legiblePitch = 7;
const narrowestPitch = 2;
const gap = 16;
const margin = 4;
const widestBlock = 120;

/** A bar with its place. */
export interface PlacedBar {
  readonly bar: FringeBar;
  readonly x: number;
  readonly width: number;
}

/** A pattern with its place. */
export interface PlacedGroup {
  readonly key: string;
  readonly name: string;
  readonly from: number;
  readonly to: number;
  readonly bars: readonly PlacedBar[];
  readonly marked: number;
  /** Whether it is drawn as one block that fills as it is marked. */
  readonly tallied: boolean;
}

/** The whole strip with places. */
export interface StripLayout {
  readonly groups: readonly PlacedGroup[];
  readonly pitch: number;
}

interface Sorted {
  readonly key: string;
  readonly name: string;
  readonly bars: readonly FringeBar[];
}

/** Bars by pattern, in the order of the patterns; bars of an unknown pattern come last, under the key itself. */
export function sortIntoGroups(bars: readonly FringeBar[], groups: readonly FringeGroup[]): readonly Sorted[] {
  const byKey = new Map<string, FringeBar[]>(groups.map((group) => [group.key, []]));
  for (const bar of bars) {
    const group = byKey.get(bar.group);
    if (group) group.push(bar);
    else byKey.set(bar.group, [bar]);
  }
  const names = new Map(groups.map((group) => [group.key, group.name]));
  return [...byKey]
    .filter(([, members]) => members.length > 0)
    .map(([key, members]) => ({ key, name: names.get(key) ?? key, bars: members }));
}

/**
 * Gives every bar its place within a width. Bars stand 12 px apart where there is room and closer where there is not; below
 * 7 px the pattern `tallyFirst`, then the largest others, are drawn as one block each, so that what needs work stays legible.
 */
export function layOutStrip(sorted: readonly Sorted[], width: number, tallyFirst: string): StripLayout {
  const room = width - 2 * margin - gap * Math.max(0, sorted.length - 1);
  const blockWidth = Math.min(widestBlock, room / Math.max(1, sorted.length));
  const largestFirst = [...sorted].sort((a, b) => b.bars.length - a.bars.length);
  const candidates = [
    ...sorted.filter((group) => group.key === tallyFirst),
    ...largestFirst.filter((group) => group.key !== tallyFirst),
  ];
  const tallied = new Set<string>();
  const pitchNow = () => {
    const free = room - blockWidth * tallied.size;
    const bars = sorted.filter((group) => !tallied.has(group.key)).reduce((sum, group) => sum + group.bars.length, 0);
    return bars === 0 ? widestPitch : Math.min(widestPitch, free / bars);
  };
  for (const group of candidates) {
    if (pitchNow() >= legiblePitch) break;
    // A block must save room, or it would only hide bars.
    const pitch = pitchNow();
    if (pitch < narrowestPitch || group.bars.length * pitch > blockWidth || group.key === tallyFirst) {
      tallied.add(group.key);
    }
  }
  const pitch = Math.max(narrowestPitch, pitchNow());

  let x = margin;
  const groups = sorted.map((group) => {
    const block = tallied.has(group.key);
    const step = block ? blockWidth / group.bars.length : pitch;
    const barWidth = block ? step : pitch >= 6 ? Math.round((step * 2) / 3) : Math.max(1, step - 1);
    const from = x;
    const bars = group.bars.map((bar, index) => ({ bar, x: snap(from + index * step, block), width: barWidth }));
    const last = bars.at(-1);
    const to = block ? from + blockWidth : last ? last.x + last.width : from;
    x = from + group.bars.length * step + gap;
    const marked = group.bars.filter((bar) => bar.state === 'marked').length;
    return { key: group.key, name: group.name, from, to, bars, marked, tallied: block };
  });
  return { groups, pitch };
}

function snap(x: number, free: boolean): number {
  return free ? x : Math.round(x);
}

/** How high a bar stands, in pixels; what earned nothing keeps a stub. */
export function barHeight(marks: number | null, full: number): number {
  if (marks === null) return strip.field;
  return full > 0 ? Math.max(3, (Math.min(marks, full) / full) * strip.field) : 3;
}
