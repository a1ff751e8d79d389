import type { FieldProblem } from '@shared/problem-details';
import type { Given, ProblemContent } from '@shared/problems';
import type { GivenValue, GivenValues } from '@shared/variants';
import { evaluateOutcomes, type Keys } from './evaluate-outcomes';
import { scopeOf } from './key-outcome';
import { printGiven } from './print-given';

type Derived = Extract<Given, { kind: 'derived' }>;
type Content = Pick<ProblemContent, 'givens' | 'convention'>;

/** A variant whose derived givens were computed as far as that is possible. */
export interface DerivedVariant {
  readonly givens: GivenValues;
  /** Why a given could not be computed; the ones that need it are missing too. */
  readonly faults: readonly FieldProblem[];
}

/**
 * The derived givens in an order in which each follows from those before it.
 *
 * @returns the order, and a fault for each given that depends on itself, directly or through others
 */
export function derivationOrder(givens: readonly Given[]): {
  readonly order: readonly Derived[];
  readonly faults: readonly FieldProblem[];
} {
  const derived = new Map(
    givens.filter((given): given is Derived => given.kind === 'derived').map((given) => [given.name, given]),
  );
  const needs = (given: Derived) =>
    [...new Set(given.expression.match(/[A-Za-z][A-Za-z0-9_]*/g) ?? [])].filter((name) => derived.has(name));
  const order: Derived[] = [];
  const faults: FieldProblem[] = [];
  const done = new Set<string>();

  const visit = (given: Derived, path: readonly string[]): void => {
    if (done.has(given.name)) return;
    const at = path.indexOf(given.name);
    if (at >= 0) {
      const circle = [...path.slice(at), given.name];
      const message =
        circle.length === 2
          ? `${given.name} is derived from itself.`
          : `These givens are derived from each other in a circle: ${circle.join(' → ')}.`;
      faults.push({ path: ['givens', givens.indexOf(given), 'expression'], message });
      return;
    }
    for (const name of needs(given)) {
      const needed = derived.get(name);
      if (needed) visit(needed, [...path, given.name]);
    }
    if (!done.has(given.name)) {
      done.add(given.name);
      order.push(given);
    }
  };
  for (const given of derived.values()) visit(given, []);
  return { order, faults };
}

/**
 * Adds the derived givens to variants: each is rounded as it is printed, and what follows from it uses the printed
 * value.
 *
 * @param variants the givens that are drawn or fixed, of any number of variants; they are computed together
 * @param seeds fix the counts that are drawn, variant by variant; where they are left out the values of the variant do
 * @param deadline the time by `performance.now()` after which what is left is not evaluated
 */
export async function deriveGivens(
  keys: Keys,
  content: Content,
  variants: readonly GivenValues[],
  deadline = Infinity,
  seeds: readonly string[] = [],
): Promise<readonly DerivedVariant[]> {
  const { order, faults } = derivationOrder(content.givens);
  const results = variants.map((givens) => ({ givens: { ...givens }, faults: [...faults] }));
  if (faults.length > 0) return results;

  for (const given of order) {
    const at: FieldProblem['path'] = ['givens', content.givens.indexOf(given), 'expression'];
    const outcomes = await evaluateOutcomes(
      keys,
      results.map(({ givens }, index) => ({
        seed: `${seeds[index] ?? JSON.stringify(variants[index])}\n${given.name}`,
        expression: given.expression,
        givens: scopeOf(givens),
        convention: content.convention,
      })),
      deadline,
    );
    const inItsUnit = await valuesInUnit(keys, content, given, outcomes, results);
    for (const [index, result] of results.entries()) {
      const value = inItsUnit[index];
      const counts = countsIn(outcomes[index]);
      if (counts) result.givens[given.name] = countsGiven(counts);
      else if (typeof value === 'number') result.givens[given.name] = printGiven(given, value);
      else result.faults.push({ path: at, ...(value ?? { message: `${given.name} has no value.` }) });
    }
  }
  return results;
}

/** A list of counts that a derived given came to. */
function countsIn(outcome: Outcomes[number] | undefined): readonly number[] | undefined {
  const value = outcome?.key?.value;
  if (!Array.isArray(value) || value.length === 0) return undefined;
  const counts = (value as readonly unknown[]).filter(
    (each): each is number => typeof each === 'number' && Number.isInteger(each) && each >= 0,
  );
  return counts.length === value.length ? counts : undefined;
}

function countsGiven(counts: readonly number[]): GivenValue {
  const { length } = counts;
  return { value: length, printed: String(length), unit: length === 1 ? 'count' : 'counts', counts };
}

type Outcomes = Awaited<ReturnType<typeof evaluateOutcomes>>;
type ValueOrFault = number | { readonly message: string; readonly position?: number; readonly length?: number };

/** The numbers that a derived given came to, in the unit in which it is printed. */
async function valuesInUnit(
  keys: Keys,
  content: Content,
  given: Derived,
  outcomes: Outcomes,
  variants: readonly { readonly givens: GivenValues }[],
): Promise<readonly ValueOrFault[]> {
  const values: ValueOrFault[] = outcomes.map((outcome) => {
    if (outcome.fault) return outcome.fault;
    const { value, unit } = outcome.key;
    if (typeof value !== 'number')
      return { message: `${given.name} must come to one real number, or to a list of counts.` };
    if (unit !== undefined && given.unit === undefined)
      return { message: `${given.name} comes out in ${unit}; name the unit in which it is printed.` };
    return value;
  });
  const withUnit = outcomes.flatMap(({ key }, index) =>
    key?.unit !== undefined && typeof values[index] === 'number' ? [index] : [],
  );
  if (withUnit.length === 0) return values;
  // Divided by its own unit the value is the plain number to print; a unit of another dimension shows by staying.
  const ratios = await evaluateOutcomes(
    keys,
    withUnit.map((index) => ({
      expression: `(${given.expression}) / (1 ${given.unit ?? ''})`,
      givens: scopeOf(variants[index]?.givens ?? {}),
      convention: content.convention,
    })),
  );
  for (const [place, index] of withUnit.entries()) {
    const ratio = ratios[place]?.key;
    values[index] =
      typeof ratio?.value === 'number' && ratio.unit === undefined
        ? ratio.value
        : {
            message: `${given.name} comes out in ${outcomes[index]?.key?.unit ?? '?'}, which is no ${given.unit ?? ''}.`,
          };
  }
  return values;
}
