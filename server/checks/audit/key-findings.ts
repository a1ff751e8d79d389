import type { AuditFinding } from '@shared/audit';
import { isComputed, type ComputedSpecification, type Tolerance } from '@shared/answer-forms';
import { partLabel } from '@shared/problems';
import { modulus, type Complex } from '@shared/reading/complex';
import { numberKey } from '../compare-number';
import { asComplex, asFormula, asList, asMatrix, asState, KeyProblem, type ComputedKey } from '../key-value';
import { findingsOf, inFigures, inVariants, type AuditedVariant, type AuditInput } from './audited';

/** Two methods that agree to fewer digits than this are no proof. Engines refuse below nine; this is a second guard. */
const fewestDigits = 9;

/** A key below this share of the usual one is as good as 0: a relative tolerance there accepts nothing. */
const asGoodAsZero = 1e-9;
const nearZero = 1e-4;

/** Keys that differ by this factor are not equally hard to write. Our own choice. */
const unequal = 1000;

/** So few keys go round among a hundred students. Our own choice. */
const fewKeys = 8;

/** What an audit finds in the keys of a part by themselves: that they are there, of the right kind, and can be answered. */
export function keyFindings(input: AuditInput, index: number): AuditFinding[] {
  const answer = input.content.parts[index]?.answer;
  if (!answer || !isComputed(answer)) return [];
  const { over, of, whole } = findingsOf(input, index);
  const label = `(${partLabel(index)})`;
  const faultIn = (variant: AuditedVariant) => variant.parts[index]?.key?.fault;
  const disagrees = (fault: string | undefined) => fault?.includes(' disagree: ') === true;
  const problemIn = (variant: AuditedVariant) => kindProblem(answer, variant.parts[index]?.key?.key);
  const findings = [
    ...over(
      'methods disagree',
      'stops use',
      (variant) => disagrees(faultIn(variant)) || fewAgree(variant, index),
      (first, where) =>
        `Two methods come to different values for the key of ${label} in ${where}${
          disagrees(faultIn(first)) ? `: ${faultIn(first) ?? ''}` : ''
        }. One of them is wrong; write the key in another way, or tell who keeps the installation.`,
    ),
    ...over(
      'key without value',
      'stops use',
      (variant) => faultIn(variant) !== undefined && !disagrees(faultIn(variant)),
      (first, where) => `The key of ${label} has no value in ${where}: ${faultIn(first) ?? ''}`,
    ),
    ...over(
      answer.form === 'number' ? 'unit mismatch' : 'key of another kind',
      'stops use',
      (variant) => problemIn(variant) !== undefined,
      (first, where) => `In ${where}: ${problemIn(first) ?? ''}`,
    ),
  ];
  if (answer.form === 'number') findings.push(...unitFindings(input, index, answer));
  findings.push(...zeroFindings(input, index, answer));

  const sizes = sizesOf(input, index, answer);
  const [least, most] = [Math.min(...sizes.filter((size) => size > 0)), Math.max(...sizes)];
  if (sizes.length > 1 && Number.isFinite(least) && most / least >= unequal) {
    const sentence = `Keys of ${label} run from ${inFigures(least)} to ${inFigures(most)}, a factor of ${inFigures(most / least, 2)}: some students meet much easier numbers than others.`;
    findings.push(whole('variants unequal', 'look at this', sentence));
  }
  const different = new Set(keyTexts(input, index)).size;
  const distinct = new Set(input.variants.map((variant) => JSON.stringify(variant.givens))).size;
  if (distinct > fewKeys && different > 0 && different <= fewKeys && answer.form !== 'state') {
    const keys = different === 1 ? 'the same key' : `only ${String(different)} different keys`;
    const sentence = `${label} has ${keys} in ${inVariants(of, of)}: neighbours can share the answer.`;
    findings.push(whole('variants repeat', 'look at this', sentence));
  }
  return findings;
}

function fewAgree(variant: AuditedVariant, index: number): boolean {
  const outcome = variant.parts[index]?.key;
  return outcome?.fault === undefined && outcome?.agreesTo !== undefined && outcome.agreesTo < fewestDigits;
}

/** Why a key cannot be compared with answers of its form; undefined where it can, or has no value. */
function kindProblem(answer: ComputedSpecification, key: ComputedKey | undefined): string | undefined {
  if (!key) return undefined;
  try {
    switch (answer.form) {
      case 'number':
        numberKey(key, answer.unit);
        return undefined;
      case 'formula':
        return asFormula(key.value).atPoints.some((point) => point)
          ? undefined
          : 'The key is undefined everywhere in the ranges of its variables.';
      case 'state':
        asState(key.value);
        return undefined;
      case 'distribution':
        return distributionProblem(asList(key.value));
      default:
        if (key.unit) return `The key has the unit ${key.unit}, and the part asks for pure numbers; divide by it.`;
        if (answer.form === 'complex') asComplex(key.value);
        else if (answer.form === 'list') asList(key.value);
        else asMatrix(key.value);
        return undefined;
    }
  } catch (error) {
    if (error instanceof KeyProblem) return error.message;
    throw error;
  }
}

function distributionProblem(list: readonly Complex[]): string | undefined {
  if (list.some(({ re }) => re < 0)) return 'The key has a negative probability, so no answer could be right.';
  const sum = list.reduce((total, { re }) => total + re, 0);
  return sum > 1 + 1e-6
    ? `The probabilities of the key add to ${inFigures(sum, 7)}, so no answer could be right.`
    : undefined;
}

function unitFindings(
  input: AuditInput,
  index: number,
  answer: Extract<ComputedSpecification, { form: 'number' }>,
): AuditFinding[] {
  const { over } = findingsOf(input, index);
  const label = `(${partLabel(index)})`;
  const unitIn = (variant: AuditedVariant) => variant.parts[index]?.key?.key?.unit;
  if (answer.unit === undefined) {
    return over(
      'unit mismatch',
      'stops use',
      (variant) => Boolean(unitIn(variant)),
      (first, where) =>
        `The key of ${label} comes in ${unitIn(first) ?? ''} in ${where}, and the part names no unit: students are asked for a pure number. Name the unit, or divide by it.`,
    );
  }
  return over(
    'unit mismatch',
    'look at this',
    (variant) => variant.parts[index]?.key?.key !== undefined && !unitIn(variant),
    (_first, where) =>
      `The key of ${label} is a pure number in ${where}, and is taken to be in ${answer.unit ?? ''}. Give the givens their units, or make sure of the size.`,
  );
}

function toleranceOf(answer: ComputedSpecification): Tolerance | undefined {
  return answer.form === 'state' || answer.form === 'distribution' ? undefined : answer.tolerance;
}

function zeroFindings(input: AuditInput, index: number, answer: ComputedSpecification): AuditFinding[] {
  const tolerance = toleranceOf(answer);
  if (tolerance?.relative === undefined || tolerance.absolute !== undefined || answer.form === 'formula') return [];
  if (tolerance.significantFigures !== undefined && answer.form !== 'number') return [];
  const { over } = findingsOf(input, index);
  const label = `(${partLabel(index)})`;
  const single = answer.form === 'number' || answer.form === 'complex';
  const usual = median(sizesOf(input, index, answer));
  const sizeIn = (variant: AuditedVariant) => Math.min(...entrySizes(answer, variant.parts[index]?.key?.key));
  const isZero = (variant: AuditedVariant) => sizeIn(variant) <= asGoodAsZero * usual;
  return [
    ...over(
      'relative tolerance at zero',
      single ? 'stops use' : 'look at this',
      isZero,
      (_first, where) =>
        `${single ? 'The key' : 'An entry of the key'} of ${label} is 0 in ${where}, where a relative tolerance accepts nothing but 0 itself. Give an absolute tolerance too.`,
    ),
    ...over(
      'relative tolerance at zero',
      'look at this',
      (variant) => single && !isZero(variant) && sizeIn(variant) <= nearZero * usual,
      (first, where) =>
        `The key of ${label} is close to 0 in ${where} (${inFigures(sizeIn(first), 3)}, where ${inFigures(usual, 3)} is usual), and a relative tolerance is very strict there. Give an absolute tolerance too.`,
    ),
  ];
}

function median(values: readonly number[]): number {
  const sorted = [...values].sort((one, other) => one - other);
  return sorted[Math.floor(sorted.length / 2)] ?? 0;
}

/** The sizes of a key's entries, in the unit in which answers are compared; none where it is of another kind. */
function entrySizes(answer: ComputedSpecification, key: ComputedKey | undefined): readonly number[] {
  if (!key || kindProblem(answer, key) !== undefined) return [];
  switch (answer.form) {
    case 'number':
      return [Math.abs(numberKey(key, answer.unit).value)];
    case 'complex':
      return [modulus(asComplex(key.value))];
    case 'list':
    case 'distribution':
      return asList(key.value).map(modulus);
    case 'matrix':
      return asMatrix(key.value).flat().map(modulus);
    default:
      return [];
  }
}

/** How large the key of a part is in each variant: of a list its largest entry. */
export function sizesOf(input: AuditInput, index: number, answer: ComputedSpecification): readonly number[] {
  return input.variants.flatMap((variant) => {
    const sizes = entrySizes(answer, variant.parts[index]?.key?.key);
    return sizes.length === 0 ? [] : [Math.max(...sizes)];
  });
}

/** The keys as texts of ten digits, so that rounding does not tell them apart. */
function keyTexts(input: AuditInput, index: number): readonly string[] {
  return input.variants.flatMap((variant) => {
    const key = variant.parts[index]?.key?.key;
    if (!key) return [];
    return [
      JSON.stringify(key.value, (_name, value: unknown) =>
        typeof value === 'number' ? Number(value.toPrecision(10)) : value,
      ),
    ];
  });
}
