import type { AuditFinding } from '@shared/audit';
import { isComputed } from '@shared/answer-forms';
import { partLabel } from '@shared/problems';
import { real } from '@shared/reading/complex';
import { namedGivens, splitStatement } from '@shared/statement';
import { numberKey } from '../compare-number';
import { KeyProblem } from '../key-value';
import { within } from '../tolerance';
import {
  findingsOf,
  inVariants,
  shownVariant,
  type AuditedVariant,
  type AuditInput,
  type OtherConvention,
} from './audited';
import { passing } from './passes';

/** Below this share of the variants a number of the text that equals the key is chance. */
const moreThanChance = 0.1;

/** Fewer variants than this are shared by many students. Our own choice. */
const fewVariants = 30;

/** What an audit finds about the problem as a whole: its givens and its variants. */
export function problemFindings(input: AuditInput): AuditFinding[] {
  const { whole, of } = findingsOf(input, null);
  const findings: AuditFinding[] = [];
  const [undrawn] = input.undrawn;
  if (undrawn) {
    const where = inVariants(input.undrawn.length, of + input.undrawn.length);
    findings.push({
      kind: 'given without value',
      grade: 'stops use',
      part: null,
      sentence: `A derived given has no value in ${where}: ${undrawn.why}`,
      variant: shownVariant(undrawn),
      count: input.undrawn.length,
    });
  }
  const idle = idleGivens(input);
  if (idle.length > 0 && input.content.parts.some((part) => isComputed(part.answer))) {
    const names = idle.join(', ');
    findings.push(
      whole(
        'given without use',
        'look at this',
        `No key uses ${names}. Is ${idle.length === 1 ? 'it' : 'each of them'} meant to mislead, or left over?`,
      ),
    );
  }
  const distinct = new Set(input.variants.map((variant) => JSON.stringify(variant.givens))).size;
  if (distinct < of && input.possible <= of) {
    const sentence = `Of ${String(of)} variants only ${String(distinct)} differ: a value stands in a list twice, or steps are finer than what is printed.`;
    findings.push(whole('variants repeat', 'look at this', sentence, of - distinct));
  } else if (input.possible > 1 && distinct < fewVariants) {
    const share = Math.ceil(100 / distinct);
    findings.push(
      whole(
        'variants repeat',
        'look at this',
        `There are only ${String(distinct)} variants: of a hundred students about ${String(share)} share each.`,
      ),
    );
  }
  return findings;
}

const nameIn = /[A-Za-z][A-Za-z0-9_]*/g;

/** The givens that no key and no slip uses, by themselves or through what is derived from them. */
function idleGivens({ content }: AuditInput): readonly string[] {
  const used = new Set(
    content.parts.flatMap(({ answer }) => {
      if (!isComputed(answer)) return [];
      const variables = answer.form === 'formula' ? Object.keys(answer.variables) : [];
      const expressions = [answer.key, ...(answer.slips ?? []).map((slip) => slip.expression)];
      return [...variables, ...expressions.flatMap((expression) => expression.match(nameIn) ?? [])];
    }),
  );
  for (let grown = true; grown;) {
    grown = false;
    for (const given of content.givens) {
      if (given.kind !== 'derived' || !used.has(given.name)) continue;
      for (const name of given.expression.match(nameIn) ?? []) {
        if (used.has(name)) continue;
        used.add(name);
        grown = true;
      }
    }
  }
  return content.givens.map(({ name }) => name).filter((name) => !used.has(name));
}

/** What an audit finds between a part and the words around it: the answer in the text, the convention that is not named. */
export function statementFindings(input: AuditInput, index: number): AuditFinding[] {
  return [...answerInStatement(input, index), ...conventionFindings(input, index)];
}

function answerInStatement(input: AuditInput, index: number): AuditFinding[] {
  const answer = input.content.parts[index]?.answer;
  if (answer?.form !== 'number') return [];
  const { over, of } = findingsOf(input, index);
  const { stem, parts } = splitStatement(input.content.statement);
  const own = parts.find((part) => part.label === partLabel(index))?.text ?? '';
  const text = `${stem}\n${own}`;
  const literals = numbersIn(text);
  const derived = new Set(input.content.givens.flatMap(({ kind, name }) => (kind === 'derived' ? [name] : [])));
  const names = [...namedGivens(text)].sort((one, other) => Number(derived.has(other)) - Number(derived.has(one)));
  // A figure that equals a plain given may be the physics of it; a derived value or a decimal was put there.
  const isPlain = (place: string) => /^[A-Za-z]/.test(place) && !derived.has(place.split(' ')[0] ?? '');
  const found = (variant: AuditedVariant): string | undefined => {
    const key = variant.parts[index]?.key?.key;
    if (!key) return undefined;
    try {
      const its = real(numberKey(key, answer.unit).value);
      const close = (value: number) => within(real(value), its, { ...answer.tolerance, absolute: undefined });
      const name = names.find((each) => {
        const given = variant.givens[each];
        return given && given.unit === answer.unit && close(given.value);
      });
      if (name !== undefined) return `${name} = ${variant.givens[name]?.printed ?? ''}`;
      return literals.find((each) => close(Number(each)));
    } catch (error) {
      if (error instanceof KeyProblem) return undefined;
      throw error;
    }
  };
  return over(
    'answer in the statement',
    (count) => {
      if (count === of && !input.variants.some((variant) => isPlain(found(variant) ?? ''))) return 'stops use';
      return count > moreThanChance * of ? 'look at this' : null;
    },
    (variant) => found(variant) !== undefined,
    (first, where) =>
      `The answer to (${partLabel(index)}) can be read in the statement in ${where}: ${found(first) ?? ''} is within the tolerance of the key.`,
  );
}

/** Numbers that a text prints as its own, small whole numbers apart, which stand for anything. */
function numbersIn(text: string): readonly string[] {
  const plain = text.replace(/\\val\{[^}]*\}/g, ' ');
  return [...plain.matchAll(/(?<![\w.])\d+(?:\.\d+)?(?![\w.]*[\w])/g)]
    .map((match) => match[0])
    .filter((number) => number.includes('.') || Number(number) > 20);
}

/** Words by which a statement says which convention it is written under. */
const naming: Readonly<Record<OtherConvention['kind'], RegExp>> = {
  'vacuum variance':
    /vacuum[^.]{0,80}(varian|noise|1\/2|1\/4|½|¼|\\frac)|\\?hbar\s*=|ħ\s*=|convention|a\s*[+-]\s*a\^?\{?\\dagger/i,
  'sign of squeezing': /squeez[^.]{0,120}(quadrature|\bx\b|\bp\b|e\^\{?-)|convention|S\(/i,
  'splitter phase': /reflect[^.]{0,80}phase|phase[^.]{0,80}reflect|convention|i\s*\\sqrt|\\pi\/2/i,
};

function conventionFindings(input: AuditInput, index: number): AuditFinding[] {
  const answer = input.content.parts[index]?.answer;
  if (!answer || !isComputed(answer)) return [];
  const { over } = findingsOf(input, index);
  const { stem, parts } = splitStatement(input.content.statement);
  const text = `${stem}\n${parts.map((part) => part.text).join('\n')}`;
  const changes = (variant: AuditedVariant) =>
    (variant.parts[index]?.conventions ?? []).find(({ kind, key: other }) => {
      const key = variant.parts[index]?.key?.key;
      if (!key || !other || naming[kind].test(text)) return false;
      try {
        return other.key === undefined || passing(answer, key, other.key) === 'told apart';
      } catch (error) {
        if (error instanceof KeyProblem) return false;
        throw error;
      }
    });
  return over(
    'convention not named',
    'look at this',
    (variant) => changes(variant) !== undefined,
    (first) =>
      `Under another course’s convention, ${changes(first)?.words ?? ''}, the key of (${partLabel(index)}) is another one, and the statement names no convention. Sheets print the course’s own; name it where the problem may be used elsewhere.`,
  );
}
