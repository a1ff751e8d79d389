import { and, eq, isNull } from 'drizzle-orm';
import { CsvError, parse } from 'csv-parse/sync';
import type { Queryable } from '@drizzle/client';
import { memberships, users } from '@drizzle/schema';
import { newMember, type RosterRow } from '@shared/courses';
import { invalidField } from '../http/errors';

const mostRows = 5000;

/** Headings that are understood, in lower case. */
const headings = {
  name: ['name', 'full name'],
  email: ['email', 'e-mail', 'mail'],
  role: ['role'],
} as const;

interface ParsedLine {
  readonly record: readonly string[];
  readonly info: { readonly lines: number };
}

/**
 * Reads a CSV file of people and says of each row what it would do. Separated by commas, semicolons or tabs; with a
 * heading line naming `name`, `email` and, where not all are students, `role`.
 *
 * @throws RequestError 400 where the file as a whole cannot be read
 */
export function readRoster(tx: Queryable, courseId: string, csv: string): RosterRow[] {
  const [heading, ...lines] = parseCsv(csv);
  if (!heading) throw invalidField(['csv'], 'The file is empty. Its first line names the columns: name, email, role.');
  if (lines.length > mostRows) throw invalidField(['csv'], `At most ${String(mostRows)} people at once.`);
  const columns = columnsOf(heading.record);
  const known = knownPeople(tx, courseId);
  const seen = new Map<string, number>();

  return lines.map(({ record, info }) => {
    const cell = (column: number) => (column < 0 ? '' : (record[column] ?? '').trim());
    const raw = {
      name: cell(columns.name),
      email: cell(columns.email),
      role: cell(columns.role).toLowerCase() || 'student',
    };
    const row = { line: info.lines, ...raw };
    const parsed = newMember.safeParse(raw);
    const problems = parsed.success
      ? []
      : parsed.error.issues.map((issue) => roleOr(issue.path[0], raw.role, issue.message));
    if (record.length > heading.record.length)
      problems.push(
        `The line has ${String(record.length)} cells, the heading ${String(heading.record.length)}; put a name with a comma in quotes.`,
      );
    const address = parsed.data?.email ?? raw.email.toLowerCase();
    const before = seen.get(address);
    if (address && before !== undefined) problems.push(`The address stands on line ${String(before)} already.`);
    else if (address) seen.set(address, info.lines);
    if (problems.length > 0) return { ...row, outcome: 'wrong' as const, problems };
    const person = known.get(address);
    if (person?.here && person.role !== raw.role)
      return {
        ...row,
        email: address,
        outcome: 'wrong' as const,
        problems: [`Is in this course already, as ${person.role}; change the role on the page.`],
      };
    const outcome = person?.here ? 'already here' : person ? 'joins with their account' : 'new person';
    return { ...row, email: address, outcome, problems: [] };
  });
}

function roleOr(field: PropertyKey | undefined, given: string, message: string): string {
  return field === 'role' ? `“${given}” is no role; use lead, marker or student.` : message;
}

function parseCsv(csv: string): ParsedLine[] {
  const text = csv.replace(/^\uFEFF/, '');
  const firstLine = text.split(/\r?\n/, 1)[0] ?? '';
  const delimiter = [',', ';', '\t'].reduce((best, each) =>
    firstLine.split(each).length > firstLine.split(best).length ? each : best,
  );
  try {
    return parse(text, {
      delimiter,
      info: true,
      relax_column_count: true,
      skip_empty_lines: true,
    }) as unknown as ParsedLine[];
  } catch (error) {
    // The parser refuses quotes that do not close, and says on which line.
    if (error instanceof CsvError) throw invalidField(['csv'], `The file cannot be read as CSV: ${error.message}.`);
    throw error;
  }
}

function columnsOf(heading: readonly string[]) {
  const names = heading.map((each) => each.trim().toLowerCase());
  const find = (wanted: readonly string[]) => names.findIndex((each) => wanted.includes(each));
  const columns = { name: find(headings.name), email: find(headings.email), role: find(headings.role) };
  const missing = (['name', 'email'] as const).filter((each) => columns[each] < 0);
  if (missing.length > 0)
    throw invalidField(
      ['csv'],
      `The first line names the columns. ${missing.map((each) => `“${each}”`).join(' and ')} ${missing.length > 1 ? 'are' : 'is'} missing; found: ${heading.join(', ')}.`,
    );
  return columns;
}

function knownPeople(tx: Queryable, courseId: string) {
  const everyone = tx.select({ id: users.id, email: users.email }).from(users).all();
  const here = new Map(
    tx
      .select({ userId: memberships.userId, role: memberships.role })
      .from(memberships)
      .where(and(eq(memberships.courseId, courseId), isNull(memberships.removedAt)))
      .all()
      .map((row) => [row.userId, row.role]),
  );
  return new Map(everyone.map(({ id, email }) => [email, { here: here.has(id), role: here.get(id) ?? null }]));
}
