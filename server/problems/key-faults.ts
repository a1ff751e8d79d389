import { partLabel, type ProblemContent } from '@shared/problems';
import type { FieldProblem } from '@shared/problem-details';
import { drawNumbers, plainGivensOf } from '../variants/draw-givens';
import { deriveGivens } from '../variants/derive-givens';
import type { Keys } from '../variants/evaluate-outcomes';
import { evaluateKeys, expressionsOf } from '../variants/evaluate-variant-keys';

/** How many variants are tried before a problem may be used. */
export const triedVariants = 24;

/**
 * Why a problem's keys cannot be relied on: derived givens, keys and slips evaluated on 24 variants, or all there are.
 * A key must have a value on every one; a slip may be undefined on some, as it is wrong anyway, but not on all.
 *
 * @returns one fault for each expression, that of the first variant on which it fails
 */
export async function keyFaults(keys: Keys, content: ProblemContent): Promise<readonly FieldProblem[]> {
  const drawn = drawNumbers(content, triedVariants, 'tried before use').map((number) => plainGivensOf(content, number));
  const derived = await deriveGivens(keys, content, drawn);
  const failed = derived.find((variant) => variant.faults.length > 0);
  if (failed) return failed.faults;

  const variants = derived.map((variant) => variant.givens);
  const results = await evaluateKeys(keys, content.parts.map(expressionsOf), content.convention, variants);
  return content.parts.flatMap((part, index) => {
    const inVariants = results.map((result) => result[index]);
    const faults: FieldProblem[] = [];
    const place = inVariants.findIndex((result) => result?.key?.fault);
    const fault = inVariants[place]?.key?.fault;
    if (fault) {
      const where = Object.entries(variants[place] ?? {}).map(([name, { printed }]) => `${name} = ${printed}`);
      faults.push({
        ...fault,
        path: ['parts', index, 'answer', 'key'],
        message: `Key of (${partLabel(index)})${where.length > 0 ? ` where ${where.join(', ')}` : ''}: ${fault.message}`,
      });
    }
    const slips = inVariants[0]?.slips.length ?? 0;
    for (let slip = 0; slip < slips; slip++) {
      const outcomes = inVariants.map((result) => result?.slips[slip]);
      const first = outcomes[0]?.fault;
      if (first && outcomes.every((outcome) => outcome?.fault))
        faults.push({ ...first, path: ['parts', index, 'answer', 'slips', slip, 'expression'] });
    }
    return faults;
  });
}
