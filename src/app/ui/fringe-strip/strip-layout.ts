import { textWidth } from '../text-width';
import type { FringeBar, FringeGroup } from './fringe-bar';

/** Heights of the strip, in pixels. */
export const strip = { height: 124, flagTop: 8, top: 28, field: 88, base: 116 } as const;

const widestPitch = 12;
/** Below this the group of right answers becomes one block … */
const legiblePitch = 7;
/** … and below this the largest of the others too. */
const countablePitch = 3.5;
/** Names may claim their room as long as bars stay this far apart. */
const comfortablePitch = 5;
const narrowestPitch = 1;
const gap = 16;
const margin = 4;
const widestBlock = 120;
/** How much room a pattern's name may claim, in the order of preference. */
const nameRooms = [132, 92, 56, 0] as const;

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
 * Gives every bar its place within a width. Bars stand 12 px apart where there is room and closer where there is not, and
 * patterns leave room for their names. Below 7 px the pattern `tallyFirst` is drawn as one block, below 3.5 px the
 * largest others too, so that what needs work stays legible; `keepOpen` is the last to become a block.
 */
export function layOutStrip(
  sorted: readonly Sorted[],
  width: number,
  tallyFirst: string,
  keepOpen: string | null = null,
): StripLayout {
  const room = width - 2 * margin;
  const blockWidth = Math.min(widestBlock, room / Math.max(1, sorted.length) - gap);
  const tallied = new Set<string>();
  const slots = (widest: number) => sorted.map((group) => Math.min(widest, textWidth(group.name, 14) + 12));
  const pitchWith = (widest: number) => widestFittingPitch(sorted, tallied, slots(widest), blockWidth, room);

  let nameRoom = nameRooms.find((widest) => pitchWith(widest) >= legiblePitch) ?? nameRooms.at(-1) ?? 0;
  for (const group of tallyOrder(sorted, tallyFirst, keepOpen)) {
    const pitch = pitchWith(nameRoom);
    if (pitch >= (group.key === tallyFirst ? legiblePitch : countablePitch)) break;
    tallied.add(group.key);
  }
  nameRoom = nameRooms.find((widest) => pitchWith(widest) >= comfortablePitch) ?? 0;
  // Whole pixels, so that the rhythm is even.
  const fitting = Math.max(narrowestPitch, pitchWith(nameRoom));
  const pitch = fitting >= 3 ? Math.floor(fitting) : fitting;
  const reserved = slots(nameRoom);
  // What rounding leaves over widens the gaps between patterns.
  const left = room - neededWidth(sorted, tallied, reserved, blockWidth, pitch);
  const wider = Math.floor(Math.min(24, Math.max(0, left) / Math.max(1, sorted.length - 1)));

  let x: number = margin;
  const groups = sorted.map((group, place) => {
    const block = tallied.has(group.key);
    const step = block ? blockWidth / group.bars.length : pitch;
    const barWidth = block ? step : pitch >= 6 ? Math.round((step * 2) / 3) : Math.max(1, step - 1);
    const from = Math.round(x);
    const bars = group.bars.map((bar, index) => ({ bar, x: snap(from + index * step, block), width: barWidth }));
    const last = bars.at(-1);
    const to = block ? from + blockWidth : last ? last.x + last.width : from;
    x += Math.max(group.bars.length * step + gap, reserved[place] ?? 0) + wider;
    const marked = group.bars.filter((bar) => bar.state === 'marked').length;
    return { key: group.key, name: group.name, from, to, bars, marked, tallied: block };
  });
  return { groups, pitch };
}

/** Which groups become blocks first. */
function tallyOrder(sorted: readonly Sorted[], tallyFirst: string, keepOpen: string | null): readonly Sorted[] {
  const rank = (group: Sorted) => (group.key === keepOpen ? 2 : group.key === tallyFirst ? 0 : 1);
  return [...sorted].sort((a, b) => rank(a) - rank(b) || b.bars.length - a.bars.length);
}

/** How much width all groups take at a pitch, with the room that each reserves for its name. */
function neededWidth(
  sorted: readonly Sorted[],
  tallied: ReadonlySet<string>,
  slots: readonly number[],
  blockWidth: number,
  pitch: number,
): number {
  return sorted.reduce((sum, group, place) => {
    const bars = tallied.has(group.key) ? blockWidth : group.bars.length * pitch;
    const last = place === sorted.length - 1;
    return sum + Math.max(last ? bars : bars + gap, slots[place] ?? 0);
  }, 0);
}

/** The widest pitch at which all groups fit side by side. */
function widestFittingPitch(
  sorted: readonly Sorted[],
  tallied: ReadonlySet<string>,
  slots: readonly number[],
  blockWidth: number,
  room: number,
): number {
  const fits = (pitch: number) => neededWidth(sorted, tallied, slots, blockWidth, pitch) <= room;
  if (fits(widestPitch)) return widestPitch;
  let [low, high] = [0, widestPitch];
  for (let round = 0; round < 24; round++) {
    const middle = (low + high) / 2;
    if (fits(middle)) low = middle;
    else high = middle;
  }
  return low;
}

function snap(x: number, free: boolean): number {
  return free ? x : Math.round(x);
}

/** How high a bar stands, in pixels; what earned nothing keeps a stub. */
export function barHeight(marks: number | null, full: number): number {
  if (marks === null) return strip.field;
  return full > 0 ? Math.max(3, (Math.min(marks, full) / full) * strip.field) : 3;
}
