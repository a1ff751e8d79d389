/** One part of a statement's text. */
export interface StatementPart {
  /** `a`, `b` … as written. */
  readonly label: string;
  /** Markdown, without the label. */
  readonly text: string;
  /** The line of the statement that opens the part, from 0. */
  readonly line: number;
}

/** A statement taken apart. */
export interface SplitStatement {
  /** Markdown before the first part. */
  readonly stem: string;
  readonly parts: readonly StatementPart[];
}

const opensPart = /^ {0,3}\(([a-z])\)(?:[ \t]+|$)/;
const fence = /^ {0,3}(`{3,}|~{3,})/;

/**
 * Splits a statement at the lines that begin with `(a)`, `(b)` …: each opens that part, what stands before the first is the
 * stem. Lines inside a fenced block or a displayed formula open nothing. Indentation that merely lines text up behind its
 * label is taken away, since Markdown would read it as code.
 */
export function splitStatement(markdown: string): SplitStatement {
  const stem: string[] = [];
  const parts: { label: string; lines: string[]; line: number }[] = [];
  let openFence: string | undefined;
  let inFormula = false;

  markdown.split(/\r?\n/).forEach((line, index) => {
    const verbatim = openFence !== undefined || inFormula;
    const opening = verbatim ? null : opensPart.exec(line);
    if (opening) {
      parts.push({ label: opening[1] ?? '', lines: [line.slice(opening[0].length)], line: index });
    } else {
      (parts.at(-1)?.lines ?? stem).push(line);
    }

    const mark = inFormula ? undefined : fence.exec(line)?.[1];
    if (openFence === undefined) openFence = mark;
    else if (mark?.startsWith(openFence)) openFence = undefined;
    if (openFence === undefined && mark === undefined && (line.split('$$').length - 1) % 2 === 1)
      inFormula = !inFormula;
  });

  return {
    stem: stem.join('\n').trim(),
    parts: parts.map(({ label, lines, line }) => ({ label, text: alignedText(lines), line })),
  };
}

/** Joins a part's lines, without the indentation that all but the first have in common. */
function alignedText(lines: readonly string[]): string {
  const [first = '', ...rest] = lines;
  const depths = rest.filter((line) => line.trim()).map((line) => line.length - line.trimStart().length);
  const depth = Math.min(...depths, 8);
  return [first, ...rest.map((line) => line.slice(depth))].join('\n').trim();
}

/** The names that `\val{…}` asks for in a text, each once, in order. */
export function namedGivens(markdown: string): readonly string[] {
  return [...new Set([...markdown.matchAll(/\\val\{([A-Za-z][A-Za-z0-9_]*)\}/g)].map((match) => match[1] ?? ''))];
}
