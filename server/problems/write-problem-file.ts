import { Document, isMap, isScalar, isSeq, type Scalar, visit } from 'yaml';
import { defaultConvention, type Convention } from '@shared/primitives';
import type { DraftAnswer, DraftGiven, DraftPart } from '@shared/problem-draft';
import { partLabel, type ProblemContent } from '@shared/problems';
import { draftOf } from '@shared/read-draft';

type Entries = Record<string, unknown>;

/**
 * Writes a problem as a file that `readProblemFile` reads as the same problem, identifiers excepted. The same content
 * gives the same text, so that files can be compared line by line.
 */
export function writeProblemFile(content: ProblemContent): string {
  const draft = draftOf(content);
  const front = withoutEmpty({
    title: draft.title,
    tags: draft.tags,
    safety: draft.safety,
    convention: writeConvention(content.convention),
    givens: Object.fromEntries(draft.givens.map((given) => [given.name, writeGiven(given)])),
    parts: Object.fromEntries(draft.parts.map((part, index) => [partLabel(index), writePart(part)])),
  });
  const document = new Document(front, { version: '1.2' });
  visit(document, {
    Scalar(_, node) {
      // Numbers stand in the draft as text, and in the file without quotation marks.
      if (typeof node.value === 'string' && isNumberText(node.value)) plainNumber(node);
    },
    Map(key, node) {
      // One line for what fits in one: a given, a criterion, a tolerance.
      if (key !== null && node.items.every((pair) => isScalar(pair.value)) && lengthOf(node) <= 100) node.flow = true;
    },
  });
  if (isMap(document.contents)) document.contents.flow = false;
  const yaml = document.toString({ lineWidth: 116, flowCollectionPadding: true });
  return `---\n${yaml}---\n${draft.statement.trim()}\n`;
}

/** Whether YAML writes the number in a text with exactly these characters. */
function isNumberText(text: string): boolean {
  if (!/^-?\d+(\.\d+)?(e-?\d+)?$/.test(text)) return false;
  const value = Number(text);
  return text.includes('e') ? value.toExponential() === text : value.toFixed(decimalsOf(text)) === text;
}

function decimalsOf(text: string): number {
  return Math.min(text.split('.')[1]?.length ?? 0, 100);
}

function plainNumber(node: Scalar): void {
  const text = String(node.value);
  node.value = Number(text);
  if (text.includes('e')) node.format = 'EXP';
  else node.minFractionDigits = decimalsOf(text);
}

function lengthOf(node: unknown): number {
  if (isMap(node)) return node.items.reduce((sum, pair) => sum + lengthOf(pair.key) + lengthOf(pair.value) + 4, 4);
  if (isSeq(node)) return node.items.reduce<number>((sum, item) => sum + lengthOf(item) + 2, 2);
  return isScalar(node) ? String(node.value).length + (String(node.value).includes('\n') ? 200 : 0) : 0;
}

function withoutEmpty(entries: Entries): Entries {
  return Object.fromEntries(
    Object.entries(entries).filter(([, value]) => {
      if (value === undefined || value === '' || value === false) return false;
      if (Array.isArray(value)) return value.length > 0;
      return typeof value !== 'object' || value === null || Object.keys(value).length > 0;
    }),
  );
}

function writeConvention({ vacuumVariance, squeezingSign, splitterPhase }: Convention): Entries | undefined {
  const isDefault =
    vacuumVariance === defaultConvention.vacuumVariance &&
    squeezingSign === defaultConvention.squeezingSign &&
    splitterPhase === defaultConvention.splitterPhase;
  if (isDefault) return undefined;
  return {
    'vacuum variance': vacuumVariance === 0.25 ? '1/4' : vacuumVariance === 1 ? '1' : '1/2',
    'sign of squeezing': String(squeezingSign),
    'splitter phase': splitterPhase === 0 ? '0' : 'pi/2',
  };
}

function writeGiven(given: DraftGiven): Entries {
  const kinds: Readonly<Record<DraftGiven['kind'], Entries>> = {
    fixed: { value: given.value },
    uniform: { from: given.low, to: given.high, step: given.step },
    choice: { 'one of': given.values },
    derived: { derived: given.expression, figures: given.significantFigures },
  };
  return withoutEmpty({
    symbol: given.symbol,
    spellings: given.spellings,
    unit: given.unit,
    ...kinds[given.kind],
  });
}

function writePart(part: DraftPart): Entries {
  return withoutEmpty({
    heading: part.heading,
    ...writeAnswer(part.answer),
    'worked page': part.workedPage,
    'stands alone': part.standsAlone.join(', '),
    'mark scheme': part.criteria.map((criterion) =>
      withoutEmpty({
        name: criterion.name,
        kind: criterion.kind,
        marks: criterion.marks,
        text: criterion.text,
        guidance: criterion.guidance,
        'awarded by': criterion.awardedBy.join(', '),
      }),
    ),
  });
}

function writeAnswer(answer: DraftAnswer): Entries {
  return withoutEmpty({
    form: answer.form,
    key: answer.key,
    unit: answer.unit,
    'fraction without unit': answer.unitFraction,
    tolerance: withoutEmpty({
      relative: answer.tolerance.relative,
      absolute: answer.tolerance.absolute,
      'significant figures': answer.tolerance.significantFigures,
      'total variation': answer.tolerance.totalVariation,
    }),
    'minimum fidelity': answer.minimumFidelity,
    'up to phase': answer.upToPhase,
    variables: Object.fromEntries(
      answer.variables.map(({ name, low, high, integers, symbol, spellings }) => [
        name,
        withoutEmpty({ from: low, to: high, whole: integers, symbol, spellings }),
      ]),
    ),
    options: answer.options.map((option) => withoutEmpty(option)),
    several: answer.several,
    slips: answer.slips.map((slip) => withoutEmpty(slip)),
    'follow-through': answer.followThrough,
  });
}
