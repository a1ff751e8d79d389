import { and, count, desc, eq, isNotNull } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import { answers, marks, piles, scripts, sets } from '@drizzle/schema';
import { partMarks } from '@shared/problems';
import type { Results, ResultsSummary } from '@shared/results';
import { pilesOfSet } from '../marking/find-pile';
import { findSet, isReleased, scriptsOf } from './find-set';
import { lateScripts } from './late-scripts';

/** The sets of a course that have scripts, the newest first. */
export function listResults(tx: Queryable, courseId: string): ResultsSummary[] {
  return tx
    .select()
    .from(sets)
    .where(eq(sets.courseId, courseId))
    .orderBy(desc(sets.number))
    .all()
    .flatMap((set) => {
      const states = tx
        .select({ state: answers.state, n: count() })
        .from(answers)
        .innerJoin(piles, eq(piles.id, answers.pileId))
        .where(and(eq(piles.setId, set.id), isNotNull(answers.state)))
        .groupBy(answers.state)
        .all();
      const number = (state: string) => states.find((each) => each.state === state)?.n ?? 0;
      const scriptCount = tx.select({ n: count() }).from(scripts).where(eq(scripts.setId, set.id)).get()?.n ?? 0;
      if (states.length === 0) return [];
      return [
        {
          setId: set.id,
          number: set.number,
          title: set.title,
          stage: set.stage,
          scripts: scriptCount,
          answers: states.reduce((sum, each) => sum + each.n, 0),
          marked: number('marked'),
          setAside: number('set aside'),
        },
      ];
    });
}

/** The standing marks of a set, script by script. Until the release scripts have codes only. */
export function setResults(tx: Queryable, setId: string): Results {
  const { set, course } = findSet(tx, setId);
  const columns = pilesOfSet(tx, setId);
  const standing = standingTotals(tx, setId);
  const named = isReleased(set.stage);
  const outOf = sumOf(columns.map((found) => partMarks(found.part)));
  const late = lateScripts(tx, set, course.timeZone);
  const items = scriptsOf(tx, setId).map(({ script, name, email }) => {
    const own = columns.map(({ pile }) => standing.get(`${script.id} ${pile.id}`) ?? null);
    return {
      code: script.code,
      name: named ? name : null,
      email: named ? email : null,
      marks: own,
      late: late(script, sumOf(own), outOf),
      total: sumOf([sumOf(own), -(late(script, sumOf(own), outOf)?.marks ?? 0)]),
    };
  });
  return {
    setId,
    number: set.number,
    title: set.title,
    stage: set.stage,
    parts: columns.map((found) => ({
      pileId: found.pile.id,
      label: `${String(found.setProblem.position)} (${found.partLabel})`,
      marks: partMarks(found.part),
    })),
    outOf,
    takesLateWork: set.lateRule !== null,
    items,
    total: items.length,
  };
}

function standingTotals(tx: Queryable, setId: string): ReadonlyMap<string, number> {
  const rows = tx
    .select({ scriptId: answers.scriptId, pileId: answers.pileId, total: marks.total })
    .from(answers)
    .innerJoin(piles, eq(piles.id, answers.pileId))
    .innerJoin(marks, eq(marks.id, answers.standingMarkId))
    .where(eq(piles.setId, setId))
    .all();
  return new Map(rows.map((row) => [`${row.scriptId} ${row.pileId}`, row.total]));
}

/** The sum of marks; what is missing counts nothing, and decimals add up as on paper. */
export function sumOf(values: readonly (number | null)[]): number {
  return Math.round(values.reduce<number>((sum, value) => sum + (value ?? 0), 0) * 1e6) / 1e6;
}

/**
 * Results as CSV (RFC 4180, with a byte order mark so that spreadsheets read it as UTF-8). A cell that a spreadsheet would
 * take for a formula is written with an apostrophe before it.
 */
export function resultsAsCsv(results: Results): string {
  const lateHead = results.takesLateWork ? ['days late', 'taken off'] : [];
  const head = ['script', 'name', 'e-mail', ...results.parts.map((part) => part.label), ...lateHead, 'total', 'out of'];
  const rows = results.items.map((row) => [
    row.code,
    row.name ?? '',
    row.email ?? '',
    ...row.marks.map((mark) => mark ?? ''),
    ...(results.takesLateWork ? [row.late?.days ?? 0, row.late?.marks ?? 0] : []),
    row.total,
    results.outOf,
  ]);
  return `\uFEFF${[head, ...rows].map((row) => row.map(cellOf).join(',')).join('\r\n')}\r\n`;
}

function cellOf(value: string | number): string {
  if (typeof value === 'number') return String(value);
  const harmless = /^[=+\-@\t\r]/.test(value) ? `'${value}` : value;
  return /[",\r\n]/.test(harmless) ? `"${harmless.replaceAll('"', '""')}"` : harmless;
}
