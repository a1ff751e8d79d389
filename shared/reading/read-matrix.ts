import { dropLeadingName } from './dropped-name';
import type { Expression } from './expression';
import { parserFor, type Parser } from './parser';
import { ReadingProblem } from './problem';
import { tidy } from './read-list';
import { numberGrammar, readValue } from './read-number';
import type { Reading } from './reading';
import { texComplex } from './typeset';

/** Rows of entries, where an entry may itself be bracketed rows. */
interface Rows {
  readonly rows: readonly (readonly Entry[])[];
  readonly at: number;
}
type Entry = Expression | Rows;

const isRows = (entry: Entry): entry is Rows => 'rows' in entry;
const deepest = 4;

/** Whether the bracket at the parser's place holds rows or entries rather than one expression. */
function opensRows(parser: Parser): boolean {
  if (!parser.is('open')) return false;
  if (parser.token.text === '[') return true;
  let depth = 0;
  for (let ahead = 0; parser.peek(ahead).kind !== 'end'; ahead += 1) {
    const { kind } = parser.peek(ahead);
    if (kind === 'open') depth += 1;
    if (kind === 'close') depth -= 1;
    if (depth === 0) return false;
    if (depth === 1 && (kind === 'comma' || kind === 'semicolon')) return true;
  }
  return false;
}

function entry(parser: Parser, depth: number): Entry {
  if (parser.is('comma') || parser.is('semicolon'))
    throw new ReadingProblem('An entry is missing here.', parser.token.start);
  if (depth >= deepest || !opensRows(parser)) return parser.sum();
  const open = parser.take();
  const inside = rows(parser, depth + 1);
  const wanted = open.text === '(' ? ')' : open.text === '[' ? ']' : '}';
  if (!parser.is('close', wanted)) {
    if (parser.is('end')) throw new ReadingProblem(`The bracket “${open.text}” is never closed.`, open.start);
    throw parser.unexpected();
  }
  parser.take();
  return inside;
}

/** Rows separated by semicolons, entries by commas, up to what closes them. */
function rows(parser: Parser, depth: number): Rows {
  const at = parser.token.start;
  let row: Entry[] = [];
  const result = [row];
  for (;;) {
    const last = entry(parser, depth);
    row.push(last);
    if (parser.is('comma')) parser.take();
    else if (parser.is('semicolon')) {
      parser.take();
      if (parser.is('end') || parser.is('close')) break;
      row = [];
      result.push(row);
    } else if (!(isRows(last) && opensRows(parser))) break;
  }
  return { rows: result, at };
}

/** The rows of expressions that nested brackets stand for. */
function flat({ rows: all, at }: Rows): readonly (readonly Expression[])[] {
  const only = all.length === 1 && all[0]?.length === 1 ? all[0][0] : undefined;
  if (only && isRows(only)) return flat(only);
  const list = all.flat();
  if (list.every(isRows)) {
    return list.map((row) => {
      const inner = flat(row);
      const first = inner[0];
      if (inner.length !== 1 || !first) throw new ReadingProblem('The brackets do not make rows of entries.', row.at);
      return first;
    });
  }
  return all.map((row) =>
    row.map((each) => {
      if (isRows(each)) throw new ReadingProblem('Rows and single entries are mixed.', at);
      return each;
    }),
  );
}

const environment = /\\(?:begin|end)\s*\{[a-zA-Z]*matrix\*?\}/g;
const entriesOf = (count: number): string => (count === 1 ? '1 entry' : `${count} entries`);

/** Reads a matrix: rows by semicolons and entries by commas, nested brackets, or a LaTeX matrix. */
export function readMatrix(text: string): Reading {
  const plain = text.replace(environment, (found) => ' '.repeat(found.length)).trimEnd();
  const undressed = dropLeadingName(plain, numberGrammar);
  const lines = undressed.text.replace(/;?\s*\n/g, (line) => ';'.padStart(line.length));
  const parser = parserFor(lines.trim() === '' ? text : lines, { ...numberGrammar, comma: 'separator' });
  const read = rows(parser, 0);
  if (!parser.is('end')) throw parser.unexpected();
  const values = flat(read).map((row) => row.map((node) => readValue(node)));
  const width = values[0]?.length ?? 0;
  for (const [index, row] of values.entries()) {
    if (row.length !== width) {
      throw new ReadingProblem(`Row ${index + 1} has ${entriesOf(row.length)}, and row 1 has ${width}.`);
    }
  }
  const unit = values.flat().find((value) => value.unit)?.unit;
  const numbers = values.map((row) => row.map(({ value }) => tidy(value)));
  return {
    kind: 'matrix',
    rows: numbers,
    readAs: values.map((row) => row.map(({ readAs }) => readAs).join(', ')).join('; '),
    note: `${values.length} × ${width}`,
    typeset: `\\begin{pmatrix}${numbers.map((row) => row.map((each) => texComplex(each)).join(' & ')).join(' \\\\ ')}\\end{pmatrix}`,
    ...(unit ? { unit } : {}),
    ...(undressed.dropped === undefined ? {} : { dropped: undressed.dropped }),
  };
}
