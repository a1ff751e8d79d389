/** The parts of a moment in a time zone, as English writes them. */
function partsOf(instant: number, timeZone: string, options: Intl.DateTimeFormatOptions): Record<string, string> {
  const format = new Intl.DateTimeFormat('en-GB', { timeZone, ...options });
  return Object.fromEntries(format.formatToParts(instant).map(({ type, value }) => [type, value]));
}

/** A day and month, `24 Nov`. */
export function dayOf(instant: number, timeZone: string): string {
  const { day, month } = partsOf(instant, timeZone, { day: 'numeric', month: 'short' });
  return `${day ?? ''} ${month ?? ''}`;
}

/** A time of day to the minute, `14:36`. */
export function timeOf(instant: number, timeZone: string): string {
  const { hour, minute } = partsOf(instant, timeZone, { hour: '2-digit', minute: '2-digit', hourCycle: 'h23' });
  return `${hour ?? ''}:${minute ?? ''}`;
}

/** A time of day to the second, `14:36:08`. */
export function secondOf(instant: number, timeZone: string): string {
  const { second } = partsOf(instant, timeZone, { second: '2-digit' });
  return `${timeOf(instant, timeZone)}:${(second ?? '').padStart(2, '0')}`;
}

/** The short name of a zone at a moment, `GMT` or `CET`. */
export function zoneOf(instant: number, timeZone: string): string {
  return partsOf(instant, timeZone, { timeZoneName: 'short' })['timeZoneName'] ?? timeZone;
}

/** A moment with its zone, `Tue 24 Nov, 14:36 GMT`. */
export function momentOf(instant: number, timeZone: string): string {
  const { weekday } = partsOf(instant, timeZone, { weekday: 'short' });
  return `${weekday ?? ''} ${dayOf(instant, timeZone)}, ${timeOf(instant, timeZone)} ${zoneOf(instant, timeZone)}`;
}

/** A moment with its year and zone, `Tue 24 Nov 2026, 14:36 GMT`. */
export function fullMomentOf(instant: number, timeZone: string): string {
  const { weekday, year } = partsOf(instant, timeZone, { weekday: 'short', year: 'numeric' });
  const day = dayOf(instant, timeZone);
  return `${weekday ?? ''} ${day} ${year ?? ''}, ${timeOf(instant, timeZone)} ${zoneOf(instant, timeZone)}`;
}

const minute = 60_000;
const hour = 60 * minute;
const day = 24 * hour;

/** How long a span is, in its two largest units: `2 d 3 h`, `3 h 24 min`, `4 min`, `under a minute`. */
export function spanOf(milliseconds: number): string {
  const left = Math.abs(milliseconds);
  if (left < minute) return 'under a minute';
  const days = Math.floor(left / day);
  const hours = Math.floor((left % day) / hour);
  const minutes = Math.floor((left % hour) / minute);
  if (days > 0) return hours > 0 ? `${String(days)} d ${String(hours)} h` : `${String(days)} d`;
  if (hours > 0) return minutes > 0 ? `${String(hours)} h ${String(minutes)} min` : `${String(hours)} h`;
  return `${String(minutes)} min`;
}

/** What a `datetime-local` field shows for a moment: its wall clock in the zone, `2026-11-24T14:36`. */
export function wallClockOf(instant: number, timeZone: string): string {
  const {
    year,
    month,
    day: dayNumber,
  } = partsOf(instant, timeZone, { year: 'numeric', month: '2-digit', day: '2-digit' });
  return `${year ?? ''}-${month ?? ''}-${dayNumber ?? ''}T${timeOf(instant, timeZone)}`;
}

/**
 * The moment at which a wall clock in the zone shows the given time. A time that the clock skips in spring is read as an
 * hour later; one that it shows twice in autumn is the first.
 *
 * @param wallClock `2026-11-24T14:36`
 * @returns UTC milliseconds, or NaN where the text is no wall clock
 */
export function instantAt(wallClock: string, timeZone: string): number {
  const asUtc = /^\d{4}-\d\d-\d\dT\d\d:\d\d$/.test(wallClock) ? Date.parse(`${wallClock}:00Z`) : Number.NaN;
  if (Number.isNaN(asUtc)) return Number.NaN;
  const offsetAt = (instant: number) =>
    Date.parse(`${wallClockOf(instant, timeZone)}:00Z`) - Math.floor(instant / minute) * minute;
  const earlier = asUtc - offsetAt(asUtc - day);
  if (wallClockOf(earlier, timeZone) === wallClock) return earlier;
  const later = asUtc - offsetAt(asUtc + day);
  return wallClockOf(later, timeZone) === wallClock ? later : earlier;
}

/** A moment some weeks later by the clock on the wall: the same weekday and time of day in the zone, also past a change of the clock. */
export function movedByWeeks(instant: number, weeks: number, timeZone: string): number {
  const wall = Date.parse(`${wallClockOf(instant, timeZone)}:00Z`) + weeks * 7 * day;
  return instantAt(new Date(wall).toISOString().slice(0, 16), timeZone) + (((instant % minute) + minute) % minute);
}
