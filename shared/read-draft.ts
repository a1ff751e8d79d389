import type * as z from 'zod';
import {
  optionLabel,
  variableName,
  variableRangeSchema,
  type AnswerSpecification,
  type VariableRange,
} from './answer-forms';
import type { FieldProblem } from './problem-details';
import type { DraftAnswer, DraftGiven, DraftPart, DraftVariable, ProblemDraft } from './problem-draft';
import { problemFaults } from './problem-faults';
import { given, part, problemContent, type Given, type Part, type ProblemContent } from './problems';
import { readTypedList, readTypedNumber, typedDecimals, typeFraction, typeNumber } from './typed-number';

/** What could be made of a draft. */
export interface ReadDraft {
  /** Present where nothing is wrong. */
  readonly content?: ProblemContent;
  /** What is wrong, each at its path. */
  readonly faults: readonly FieldProblem[];
  /** The givens that are in order by themselves, with their place in the draft. */
  readonly givens: readonly { readonly index: number; readonly given: Given }[];
}

type Path = FieldProblem['path'];

/** Collects the faults of one reading; the first one at a place is the one that is shown. */
class Faults {
  readonly list: FieldProblem[] = [];

  add(fault: FieldProblem): void {
    if (!this.list.some((each) => each.path.join('.') === fault.path.join('.') && each.position === fault.position))
      this.list.push(fault);
  }

  /** Whether something below a path is wrong already. */
  hasBelow(path: Path): boolean {
    return this.list.some(
      (each) => each.path.length > path.length && path.every((step, index) => step === each.path[index]),
    );
  }

  /** The number in a field; undefined, with a fault, where it is none; undefined without one where it is empty. */
  number(text: string, path: Path): number | undefined {
    if (text.trim() === '') return undefined;
    const value = readTypedNumber(text);
    if (value === undefined) this.add({ path, message: `“${text.trim()}” is not a number.` });
    return value;
  }
}

/**
 * Makes content of a draft, or says what is wrong with it. The rules of `problemContent` and of `problemFaults` apply;
 * keys are not evaluated.
 */
export function readDraft(draft: ProblemDraft): ReadDraft {
  const faults = new Faults();
  const givens = draft.givens.map((each, index) => candidateGiven(each, ['givens', index], faults));
  const candidate = {
    title: draft.title,
    statement: draft.statement,
    tags: splitWords(draft.tags),
    safety: draft.safety,
    givens,
    parts: draft.parts.map((each, index) => candidatePart(each, ['parts', index], faults)),
    convention: draft.convention,
  };
  const parsed = problemContent.safeParse(candidate);
  if (!parsed.success) {
    for (const issue of parsed.error.issues) {
      const path = issue.path.map((step) => (typeof step === 'symbol' ? String(step) : step));
      const place = placeInDraft(path, draft);
      // A bound that is no number has been named at its own field.
      if (!faults.hasBelow(place)) faults.add({ path: place, message: messageOf(issue) });
    }
  } else {
    for (const fault of problemFaults(parsed.data)) faults.add(fault);
  }
  return {
    ...(parsed.success && faults.list.length === 0 ? { content: parsed.data } : {}),
    faults: faults.list,
    givens: givens.flatMap((each, index) => {
      const one = given.safeParse(each);
      return one.success ? [{ index, given: one.data }] : [];
    }),
  };
}

/** The name of an entry has its own rules, and their own words. */
function messageOf(issue: z.core.$ZodIssue): string {
  return (issue.code === 'invalid_key' ? issue.issues[0]?.message : undefined) ?? issue.message;
}

/** Where the draft has what stands at a path of the content: it lists variables and options that the content names. */
function placeInDraft(path: Path, draft: ProblemDraft): Path {
  const [area, index, answer, field, name, ...rest] = path;
  if (area !== 'parts' || typeof index !== 'number' || answer !== 'answer') return path;
  const typed = draft.parts[index]?.answer;
  const at = (...steps: Path) => ['parts', index, 'answer', ...steps];
  if ((field === 'variables' || field === 'symbols') && typeof name === 'string') {
    const variable = typed?.variables.findIndex((each) => each.name.trim() === name) ?? -1;
    if (variable < 0) return at('variables');
    if (field === 'symbols') return at('variables', variable, rest[0] === 'spellings' ? 'spellings' : 'symbol');
    const end = rest.find((step) => typeof step === 'number');
    const isName = rest.length === 0 && !variableName.safeParse(name).success;
    return at('variables', variable, isName ? 'name' : end === 0 ? 'low' : 'high');
  }
  if (field === 'options' && typeof name === 'number') return at('options', name, rest[0] ?? 'label');
  if (field === 'correct') return at('correct');
  return path;
}

/** The part at an index of a draft, where all of it is in order. */
export function readDraftPart(draft: ProblemDraft, index: number): Part | undefined {
  const typed = draft.parts[index];
  if (!typed) return undefined;
  const faults = new Faults();
  const parsed = part.safeParse(candidatePart(typed, [], faults));
  return parsed.success && faults.list.length === 0 ? parsed.data : undefined;
}

/** The variables of a formula that are in order, by name, as far as they are typed. */
export function readDraftVariables(typed: readonly DraftVariable[]): Readonly<Record<string, VariableRange>> {
  const { variables } = candidateVariables(typed, [], new Faults());
  return Object.fromEntries(
    Object.entries(variables).flatMap(([name, range]) => {
      const read = variableRangeSchema.safeParse(range);
      return variableName.safeParse(name).success && read.success ? [[name, read.data]] : [];
    }),
  );
}

/** The words of a field that lists them with commas. */
function splitWords(text: string): readonly string[] {
  return text
    .split(/[,;]/)
    .map((word) => word.trim())
    .filter((word) => word !== '');
}

function present<Value>(name: string, value: Value | undefined | ''): Readonly<Record<string, Value>> {
  return value === undefined || value === '' ? {} : { [name]: value };
}

function candidateGiven(typed: DraftGiven, path: Path, faults: Faults): unknown {
  const number = (field: 'value' | 'low' | 'high' | 'step' | 'significantFigures') =>
    faults.number(typed[field], [...path, field]);
  const common = {
    name: typed.name.trim(),
    symbol: typed.symbol,
    spellings: splitWords(typed.spellings),
    ...present('unit', typed.unit.trim()),
    kind: typed.kind,
  };
  switch (typed.kind) {
    case 'fixed':
      return { ...common, value: number('value'), ...present('decimals', typedDecimals(typed.value)) };
    case 'uniform':
      return { ...common, low: number('low'), high: number('high'), step: number('step') };
    case 'choice': {
      const list = readTypedList(typed.values);
      if ('wrong' in list) faults.add({ path: [...path, 'values'], message: `“${list.wrong}” is not a number.` });
      return { ...common, values: 'wrong' in list ? [] : list.values };
    }
    case 'derived':
      return {
        ...common,
        expression: typed.expression,
        ...present('significantFigures', number('significantFigures')),
      };
  }
}

function candidatePart(typed: DraftPart, path: Path, faults: Faults): unknown {
  return {
    ...typed,
    // What is written in words is always marked by a person; the box is kept for when the form is another one again.
    standsAlone:
      typed.answer.form === 'worked' ? typed.standsAlone.filter((each) => each !== 'right') : typed.standsAlone,
    answer: candidateAnswer(typed.answer, [...path, 'answer'], faults),
    criteria: typed.criteria.map((each, index) => ({
      ...each,
      marks: faults.number(each.marks, [...path, 'criteria', index, 'marks']),
    })),
  };
}

function candidateAnswer(typed: DraftAnswer, path: Path, faults: Faults): unknown {
  const number = (text: string, ...place: Path) => faults.number(text, [...path, ...place]);
  const { form } = typed;
  if (form === 'worked') return { form };
  if (form === 'choice') {
    const options = typed.options.map(({ label, text }) => (text.trim() === '' ? label : { label, text }));
    const correct = typed.options.filter((option) => option.correct).map((option) => option.label);
    return { form, options, correct, ...present('several', typed.several || undefined) };
  }
  const computed = {
    form,
    key: typed.key,
    ...present(
      'slips',
      typed.slips.length === 0
        ? undefined
        : typed.slips.map((slip, index) => ({
            ...present('name', slip.name.trim()),
            expression: slip.expression,
            feedback: slip.feedback,
            fraction: number(slip.fraction, 'slips', index, 'fraction'),
          })),
    ),
    ...present('followThrough', number(typed.followThrough, 'followThrough')),
  };
  if (form === 'state') return { ...computed, minimumFidelity: number(typed.minimumFidelity, 'minimumFidelity') };
  if (form === 'distribution')
    return {
      ...computed,
      tolerance: present('totalVariation', number(typed.tolerance.totalVariation, 'tolerance', 'totalVariation')),
    };
  const tolerance = {
    ...present('relative', number(typed.tolerance.relative, 'tolerance', 'relative')),
    ...present('absolute', number(typed.tolerance.absolute, 'tolerance', 'absolute')),
    ...present('significantFigures', number(typed.tolerance.significantFigures, 'tolerance', 'significantFigures')),
  };
  switch (form) {
    case 'number':
      return {
        ...computed,
        tolerance,
        ...present('unit', typed.unit.trim()),
        ...present('unitFraction', number(typed.unitFraction, 'unitFraction')),
      };
    case 'complex':
      return { ...computed, tolerance, ...present('upToPhase', typed.upToPhase || undefined) };
    case 'formula':
      return {
        ...computed,
        tolerance,
        ...candidateVariables(typed.variables, [...path, 'variables'], faults),
      };
    case 'list':
    case 'matrix':
      return { ...computed, tolerance };
  }
}

/** A formula's variables by name, with their ranges and, where the author writes them otherwise, their symbols. */
function candidateVariables(
  typed: readonly DraftVariable[],
  path: Path,
  faults: Faults,
): { readonly variables: Readonly<Record<string, unknown>>; readonly symbols?: unknown } {
  const variables: Record<string, unknown> = {};
  const symbols: Record<string, unknown> = {};
  for (const [index, each] of typed.entries()) {
    const name = each.name.trim();
    if (name === '') {
      faults.add({ path: [...path, index, 'name'], message: 'Name the variable, or remove it.' });
      continue;
    }
    if (Object.hasOwn(variables, name)) {
      faults.add({ path: [...path, index, 'name'], message: `Another variable is called ${name} already.` });
      continue;
    }
    const bound = (end: 'low' | 'high') => {
      if (each[end].trim() === '')
        faults.add({ path: [...path, index, end], message: `Give the ${end}est value of ${name}.` });
      return faults.number(each[end], [...path, index, end]);
    };
    const range = [bound('low'), bound('high')];
    variables[name] = each.integers ? { integers: range } : range;
    const spellings = splitWords(each.spellings);
    const writing = {
      ...present('symbol', each.symbol.trim()),
      ...present('spellings', spellings.length > 0 ? spellings : undefined),
    };
    if (Object.keys(writing).length > 0) symbols[name] = writing;
  }
  return { variables, ...present('symbols', Object.keys(symbols).length > 0 ? symbols : undefined) };
}

/** The draft that reads as the given content: the way back of `readDraft`. */
export function draftOf(content: ProblemContent): ProblemDraft {
  return {
    title: content.title,
    statement: content.statement,
    tags: content.tags.join(', '),
    safety: content.safety,
    givens: content.givens.map(draftOfGiven),
    parts: content.parts.map((each) => ({
      ...each,
      answer: draftOfAnswer(each.answer),
      criteria: each.criteria.map((one) => ({ ...one, marks: typeNumber(one.marks) })),
    })),
    convention: content.convention,
  };
}

function draftOfGiven(content: Given): DraftGiven {
  const empty = { value: '', low: '', high: '', step: '', values: '', expression: '', significantFigures: '4' };
  const common = {
    ...empty,
    name: content.name,
    symbol: content.symbol,
    spellings: content.spellings.join(', '),
    unit: content.unit ?? '',
    kind: content.kind,
  };
  switch (content.kind) {
    case 'fixed': {
      const { value, decimals } = content;
      return { ...common, value: decimals === undefined ? typeNumber(value) : value.toFixed(decimals) };
    }
    case 'uniform':
      return {
        ...common,
        low: typeNumber(content.low),
        high: typeNumber(content.high),
        step: typeNumber(content.step),
      };
    case 'choice':
      return { ...common, values: content.values.map(typeNumber).join('; ') };
    case 'derived':
      return { ...common, expression: content.expression, significantFigures: typeNumber(content.significantFigures) };
  }
}

function typeOptional(value: number | undefined, type = typeNumber): string {
  return value === undefined ? '' : type(value);
}

function draftOfAnswer(answer: AnswerSpecification): DraftAnswer {
  const computed = 'key' in answer ? answer : undefined;
  const tolerance = 'tolerance' in answer ? answer.tolerance : {};
  const pick = (name: string) => typeOptional((tolerance as Readonly<Record<string, number | undefined>>)[name]);
  return {
    form: answer.form,
    key: computed?.key ?? '',
    unit: answer.form === 'number' ? (answer.unit ?? '') : '',
    unitFraction: answer.form === 'number' ? typeOptional(answer.unitFraction, typeFraction) : '',
    tolerance: {
      relative: percentOf(pick('relative')),
      absolute: pick('absolute'),
      significantFigures: pick('significantFigures'),
      totalVariation: pick('totalVariation'),
    },
    minimumFidelity: answer.form === 'state' ? typeNumber(answer.minimumFidelity) : '',
    upToPhase: answer.form === 'complex' && answer.upToPhase === true,
    variables:
      answer.form === 'formula'
        ? Object.entries(answer.variables).map(([name, range]) => {
            const [low, high] = Array.isArray(range) ? range : range.integers;
            const writing = answer.symbols?.[name];
            return {
              name,
              low: typeNumber(low),
              high: typeNumber(high),
              integers: !Array.isArray(range),
              symbol: writing?.symbol ?? '',
              spellings: (writing?.spellings ?? []).join(', '),
            };
          })
        : [],
    options:
      answer.form === 'choice'
        ? answer.options.map((option) => ({
            label: optionLabel(option),
            text: typeof option === 'string' ? '' : option.text,
            correct: answer.correct.some((label) => label.toLowerCase() === optionLabel(option).toLowerCase()),
          }))
        : [],
    several: answer.form === 'choice' && answer.several === true,
    slips: (computed?.slips ?? []).map((slip) => ({
      name: slip.name ?? '',
      expression: slip.expression,
      feedback: slip.feedback,
      fraction: typeFraction(slip.fraction),
    })),
    followThrough: typeOptional(computed?.followThrough, typeFraction),
  };
}

/** A relative tolerance as an author thinks of it, where the per cent read back as the same number. */
function percentOf(text: string): string {
  if (text === '') return '';
  const percent = `${typeNumber(Number((Number(text) * 100).toPrecision(12)))}%`;
  return readTypedNumber(percent) === Number(text) ? percent : text;
}
