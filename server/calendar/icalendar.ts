/** A moment in a calendar. */
export interface CalendarEvent {
  /** Stays the same however often the event is moved. */
  readonly uid: string;
  /** UTC milliseconds. */
  readonly at: number;
  readonly summary: string;
  readonly description: string;
  readonly url: string;
}

/** Most octets of a line, without its end (RFC 5545, section 3.1). */
const longestLine = 75;

/** UTC in the basic format of ISO 8601 (RFC 5545, section 3.3.5), `20261124T143600Z`. */
export function utcOf(instant: number): string {
  return new Date(instant)
    .toISOString()
    .replace(/\.\d{3}/, '')
    .replace(/[-:]/g, '');
}

/** A text value: backslash, semicolon, comma and line ends escaped, control characters left out (section 3.3.11). */
export function escapedText(text: string): string {
  return (
    text
      .replace(/\r\n?/g, '\n')
      // eslint-disable-next-line no-control-regex -- these are what a value must not hold
      .replace(/[\u0000-\u0009\u000b-\u001f\u007f]/g, ' ')
      .replace(/[\\;,]/g, (sign) => `\\${sign}`)
      .replace(/\n/g, '\\n')
  );
}

/** A content line in pieces of at most 75 octets, each after the first begun by a space; no character is cut. */
export function foldedLine(line: string): string {
  const pieces: string[] = [];
  let piece = '';
  let octets = 0;
  for (const character of line) {
    const size = Buffer.byteLength(character);
    if (octets + size > longestLine) {
      pieces.push(piece);
      piece = ' ';
      octets = 1;
    }
    piece += character;
    octets += size;
  }
  return [...pieces, piece].join('\r\n');
}

/**
 * A calendar as iCalendar text (RFC 5545), lines ended by CRLF.
 *
 * @param stamp when it was made, UTC milliseconds
 */
export function icalendar(name: string, events: readonly CalendarEvent[], stamp: number): string {
  const lines = [
    'BEGIN:VCALENDAR',
    'VERSION:2.0',
    'PRODID:-//Halfsilver//Halfsilver//EN',
    'CALSCALE:GREGORIAN',
    `X-WR-CALNAME:${escapedText(name)}`,
    ...events.flatMap(({ uid, at, summary, description, url }) => [
      'BEGIN:VEVENT',
      `UID:${uid}`,
      `DTSTAMP:${utcOf(stamp)}`,
      `DTSTART:${utcOf(at)}`,
      `SUMMARY:${escapedText(summary)}`,
      `DESCRIPTION:${escapedText(description)}`,
      `URL:${url}`,
      'TRANSP:TRANSPARENT',
      'END:VEVENT',
    ]),
    'END:VCALENDAR',
  ];
  return lines.map((line) => `${foldedLine(line)}\r\n`).join('');
}
