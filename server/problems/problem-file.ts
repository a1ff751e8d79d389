import { isMap, parseDocument, type Document } from 'yaml';
import { AnswerForm } from '@shared/answer-forms';
import { defaultConvention, type Convention } from '@shared/primitives';
import {
  emptyAnswer,
  emptyDraft,
  emptyGiven,
  type DraftAnswer,
  type DraftCriterion,
  type DraftGiven,
  type DraftPart,
  type ProblemDraft,
} from '@shared/problem-draft';
import { criterionKinds, partLabel, verdicts, type ProblemContent } from '@shared/problems';
import { readDraft } from '@shared/read-draft';
import { newId } from '../http/new-id';
import { FileFields, ProblemFileError } from './file-fields';

export { ProblemFileError } from './file-fields';

interface ReadOptions {
  /** Identifiers of parts and criteria, which the file does not carry. */
  readonly nextId?: () => string;
}

/**
 * Reads a problem file: YAML between two lines `---`, then the statement in Markdown. `docs/problem-file.md` describes
 * it; in short:
 *
 * ```
 * ---
 * title: A splitter and a counter
 * tags: beam splitters, counting
 * givens:
 *   nbar: { symbol: \bar n, from: 2.0, to: 8.0, step: 0.5 }
 *   T: { symbol: T, one of: 0.35; 0.70; 0.85 }
 * parts:
 *   a:
 *     heading: nothing recorded
 *     form: number
 *     key: exp(-(1 - T)*nbar)
 *     tolerance: { relative: 2% }
 *     slips:
 *       - name: T for R
 *         expression: exp(-T*nbar)
 *         fraction: 1/2
 *         feedback: Output 2 is the reflected port.
 *     stands alone: right, unanswered
 *     mark scheme:
 *       - { name: A1, kind: A, marks: 2, text: The right value., awarded by: right }
 * ---
 * A beam of mean photon number $\bar n = \val{nbar}$ …
 * ```
 *
 * Everything is read as it stands in the file, `4.0` with its decimal, as if it had been typed into the composer.
 * A file carries no identifiers: each reading draws new ones.
 *
 * @throws ProblemFileError with a sentence that names the key and the line
 */
export function readProblemFile(text: string, options: ReadOptions = {}): ProblemContent {
  const { front, body, firstLine } = splitFile(text);
  const document = parseDocument(front, { strict: true, uniqueKeys: true, version: '1.2' });
  const [broken] = document.errors;
  if (broken) {
    const line = (broken.linePos?.[0].line ?? 1) + firstLine;
    throw new ProblemFileError(`Line ${String(line)}: ${broken.message.split('\n')[0] ?? ''}`);
  }
  const draft = draftOfDocument(document, body, options, firstLine, front);
  const { content, faults } = readDraft(draft);
  if (!content) {
    throw new ProblemFileError(faults.map((fault) => `${pathInFile(fault.path, draft)}: ${fault.message}`).join('\n'));
  }
  return content;
}

function splitFile(text: string): { front: string; body: string; firstLine: number } {
  const lines = text.replace(/^\uFEFF/, '').split(/\r?\n/);
  const end = lines.indexOf('---', 1);
  if (lines[0] !== '---' || end < 0)
    throw new ProblemFileError(
      'A problem file begins with a line “---”, then what is known of the problem, then “---”.',
    );
  return {
    front: lines.slice(1, end).join('\n'),
    body: lines
      .slice(end + 1)
      .join('\n')
      .replace(/^\n+|\s+$/g, ''),
    firstLine: 1,
  };
}

function draftOfDocument(
  document: Document,
  statement: string,
  options: ReadOptions,
  firstLine: number,
  front: string,
): ProblemDraft {
  if (!isMap(document.contents)) throw new ProblemFileError('Between the lines “---” stand keys such as “title: …”.');
  const lineOf = (offset: number) => front.slice(0, offset).split('\n').length + firstLine;
  const fields = new FileFields(document.contents, 'the problem', lineOf);
  const nextId = options.nextId ?? newId;
  const draft: ProblemDraft = {
    ...emptyDraft(fields.text('title'), readConvention(fields.map('convention'))),
    statement,
    tags: fields.words('tags'),
    safety: fields.text('safety'),
    givens: fields.entries('givens').map(([name, given]) => readGiven(name, given)),
    parts: fields.entries('parts').map(([label, part], index) => {
      if (label !== partLabel(index))
        throw part.error(`Parts are called a, b, c … in order; here comes ${partLabel(index)}.`);
      return readPart(part, nextId);
    }),
  };
  fields.end();
  return draft;
}

function readConvention(fields: FileFields | undefined): Convention {
  // Not that of the course into which the file is read: its keys would change with the place.
  if (!fields) return defaultConvention;
  const variance = fields.choice('vacuum variance', ['1/4', '1/2', '1'], '1/2');
  const sign = fields.choice('sign of squeezing', ['1', '-1'], '1');
  const phase = fields.choice('splitter phase', ['0', 'pi/2'], 'pi/2');
  fields.end();
  return {
    vacuumVariance: variance === '1/4' ? 0.25 : variance === '1' ? 1 : 0.5,
    squeezingSign: sign === '1' ? 1 : -1,
    splitterPhase: phase === '0' ? 0 : Math.PI / 2,
  };
}

function readGiven(name: string, fields: FileFields): DraftGiven {
  const given: DraftGiven = { ...emptyGiven(name), symbol: fields.text('symbol') || name };
  given.spellings = fields.words('spellings');
  given.unit = fields.text('unit');
  if (fields.has('value')) Object.assign(given, { kind: 'fixed', value: fields.text('value') });
  else if (fields.has('one of')) Object.assign(given, { kind: 'choice', values: fields.words('one of', '; ') });
  else if (fields.has('derived'))
    Object.assign(given, {
      kind: 'derived',
      expression: fields.text('derived'),
      significantFigures: fields.text('figures') || '4',
    });
  else if (fields.has('from'))
    Object.assign(given, {
      kind: 'uniform',
      low: fields.text('from'),
      high: fields.text('to'),
      step: fields.text('step'),
    });
  else throw fields.error('A given has “value”, “from”, “to” and “step”, “one of”, or “derived”.');
  fields.end();
  return given;
}

function readPart(fields: FileFields, nextId: () => string): DraftPart {
  const part: DraftPart = {
    id: nextId(),
    heading: fields.text('heading'),
    answer: readAnswer(fields),
    workedPage: fields.flag('worked page'),
    standsAlone: fields.several('stands alone', ['right', 'unanswered']),
    criteria: fields.items('mark scheme').map((criterion) => readCriterion(criterion, nextId)),
  };
  fields.end();
  return part;
}

function readCriterion(fields: FileFields, nextId: () => string): DraftCriterion {
  const name = fields.text('name');
  // M1, A2 and ft1 tell their kind; a course's own names state it.
  const told = criterionKinds.find((kind) => new RegExp(`^${kind}\\d*$`).test(name));
  const criterion: DraftCriterion = {
    id: nextId(),
    kind: fields.choice('kind', criterionKinds, told ?? 'B'),
    name,
    marks: fields.text('marks') || '1',
    text: fields.text('text'),
    guidance: fields.text('guidance'),
    awardedBy: fields.several('awarded by', verdicts),
  };
  fields.end();
  return criterion;
}

function readAnswer(fields: FileFields): DraftAnswer {
  const tolerance = fields.map('tolerance');
  const answer: DraftAnswer = {
    ...emptyAnswer(),
    form: fields.choice('form', Object.values(AnswerForm), AnswerForm.number),
    key: fields.text('key'),
    unit: fields.text('unit'),
    unitFraction: fields.text('fraction without unit'),
    tolerance: {
      relative: tolerance?.text('relative') ?? '',
      absolute: tolerance?.text('absolute') ?? '',
      significantFigures: tolerance?.text('significant figures') ?? '',
      totalVariation: tolerance?.text('total variation') ?? '',
    },
    minimumFidelity: fields.text('minimum fidelity'),
    upToPhase: fields.flag('up to phase'),
    variables: fields.entries('variables').map(([name, range]) => {
      const variable = {
        name,
        low: range.text('from'),
        high: range.text('to'),
        integers: range.flag('whole'),
        symbol: range.text('symbol'),
        spellings: range.words('spellings'),
      };
      range.end();
      return variable;
    }),
    options: fields.items('options').map((option) => {
      const one = { label: option.text('label'), text: option.text('text'), correct: option.flag('correct') };
      option.end();
      return one;
    }),
    several: fields.flag('several'),
    slips: fields.items('slips').map((slip) => {
      const one = {
        name: slip.text('name'),
        expression: slip.text('expression'),
        feedback: slip.text('feedback'),
        fraction: slip.text('fraction') || '0',
      };
      slip.end();
      return one;
    }),
    followThrough: fields.text('follow-through'),
  };
  tolerance?.end();
  return answer;
}

/** A path of the draft in the file's own words. */
function pathInFile(path: readonly (string | number)[], draft: ProblemDraft): string {
  return path
    .map((step, index) => {
      if (typeof step !== 'number') return step;
      if (index === 1 && path[0] === 'parts') return `(${partLabel(step)})`;
      if (index === 1 && path[0] === 'givens') return draft.givens[step]?.name ?? String(step + 1);
      return String(step + 1);
    })
    .join(' › ');
}
