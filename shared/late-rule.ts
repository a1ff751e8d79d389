import * as z from 'zod';
import { instant } from './primitives';
import { wallClockOf } from './times';

const minute = 60_000;
const day = 24 * 60 * minute;

/** What becomes of work that comes after the closing time. */
export const lateRule = z.object({
  /** What is taken off for each late day, in per cent. */
  percent: z
    .number({ error: 'Give a percentage, for example 10.' })
    .min(0, 'A percentage lies between 0 and 100.')
    .max(100, 'A percentage lies between 0 and 100.'),
  /** Of the marks that were awarded, or of those that there are. */
  of: z.enum(['awarded', 'available']),
  /** Saturdays and Sundays of the course's zone do not count among working days; public holidays do. */
  per: z.enum(['started day', 'started working day']),
  /** Nothing is taken after it. */
  until: instant,
});
export type LateRule = z.infer<typeof lateRule>;

/** What lateness costs a script. */
export const deduction = z.object({
  days: z.number().int(),
  /** Marks that are taken off. */
  marks: z.number(),
  sentence: z.string(),
});
export type Deduction = z.infer<typeof deduction>;

/** Wall-clock time as if it were UTC, so that a day has 24 hours whatever the clock does in spring and autumn. */
function wallTime(instant: number, timeZone: string): number {
  return Date.parse(`${wallClockOf(instant, timeZone)}:00Z`) + (((instant % minute) + minute) % minute);
}

/** How much of a span of wall-clock time lies on Saturdays and Sundays. */
function weekendBetween(from: number, to: number): number {
  let sum = 0;
  for (let start = Math.floor(from / day) * day; start < to; start += day) {
    const weekday = new Date(start).getUTCDay();
    if (weekday === 0 || weekday === 6) sum += Math.min(to, start + day) - Math.max(from, start);
  }
  return sum;
}

/**
 * How many days late something is. A day runs from the closing time to the same time by the clock of the next day, also
 * where the clock is put forward or back between; a working day runs likewise, and the hours of Saturdays and Sundays do
 * not count.
 *
 * @param at when it was handed in, UTC milliseconds
 * @param due the student's closing time, UTC milliseconds
 * @returns 0 where it was in time, or came before any working time had passed
 */
export function lateDays(at: number, due: number, per: LateRule['per'], timeZone: string): number {
  if (at <= due) return 0;
  const [from, to] = [wallTime(due, timeZone), wallTime(at, timeZone)];
  if (per === 'started day') return Math.max(1, Math.ceil((to - from) / day));
  return Math.ceil(Math.max(0, to - from - weekendBetween(from, to)) / day);
}

/**
 * What is taken off for lateness, to the hundredth of a mark and never more than was awarded.
 *
 * @param awarded marks, as they were given
 * @param available marks that the set has
 * @returns null where nothing was late
 */
export function deductionFor(
  rule: LateRule,
  times: { readonly at: number; readonly due: number; readonly timeZone: string },
  awarded: number,
  available: number,
): Deduction | null {
  if (times.at <= times.due) return null;
  const days = lateDays(times.at, times.due, rule.per, times.timeZone);
  const base = rule.of === 'awarded' ? awarded : available;
  const share = Math.min(100, rule.percent * days);
  const marks = Math.min(awarded, Math.round(base * share) / 100);
  return { days, marks, sentence: sentenceOf(rule, days, share, marks) };
}

function sentenceOf(rule: LateRule, days: number, share: number, marks: number): string {
  const unit = rule.per === 'started day' ? 'day' : 'working day';
  const late = `Handed in late: ${String(days)} started ${unit}${days === 1 ? '' : 's'} after the closing time.`;
  if (marks === 0) return `${late} Nothing is taken off.`;
  return `${late} ${String(share)} % of the marks ${rule.of}, ${String(marks)} ${marks === 1 ? 'mark' : 'marks'}, ${marks === 1 ? 'is' : 'are'} taken off.`;
}

/** The rule in words, for sheets and settings. */
export function lateRuleInWords(rule: LateRule): string {
  if (rule.percent === 0) return 'nothing is taken off';
  return `${String(rule.percent)} % of the marks ${rule.of} is taken off per ${rule.per}`;
}
