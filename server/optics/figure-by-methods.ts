import type { Figure, FigureKind, FigureValue } from './figures';
import { MethodDoesNotApply, StateVanishes } from './method-does-not-apply';
import { isValue, type MethodName, type MethodOutcome, type MethodValue } from './methods';
import { figureOfMoments, isMomentFigure } from './moments/moment-figures';
import { momentsOf } from './moments/moments-of-state';
import { numberFigure } from './number-basis/number-figures';
import { OpticsError } from './optics-error';
import { phaseSpaceFigure } from './phase-space/phase-space-figures';
import { abs } from './complex';

/** A method must expect at least this relative accuracy of itself … */
const RELATIVE = 1e-10;
/** … or this absolute one … */
const ABSOLUTE = 1e-13;
/** … or this, where the figure is a difference of numbers of the size of 1 and may vanish. */
const ABSOLUTE_OF_DIFFERENCES = 1e-12;
const differences: ReadonlySet<FigureKind> = new Set([
  'photonVariance',
  'mandelQ',
  'fanoFactor',
  'quadratureVariance',
  'covariance',
  'entropy',
  'logNegativity',
  'atomInversion',
  'parity',
  'characteristic',
  'wigner',
  'overlap',
]);

interface Tolerance {
  readonly relative: number;
  readonly absolute: number;
}

interface Found {
  readonly value: FigureValue;
  readonly error: number;
  readonly dimension?: number;
  readonly outsideWeight?: number;
}

/** One method's way to a figure. */
function attempt(
  method: MethodName,
  find: () => Found,
  tolerance: Tolerance,
  vanished: StateVanishes[],
): MethodOutcome {
  try {
    const { value, error, dimension, outsideWeight } = find();
    const scale = scaleOf(value);
    if (!Number.isFinite(scale) || Number.isNaN(error)) {
      return { method, notApplicable: 'the value is beyond the range of numbers' };
    }
    if (error > Math.max(tolerance.relative * scale, tolerance.absolute)) {
      return { method, notApplicable: `only accurate to about ${error.toExponential(0)} here` };
    }
    const found: MethodValue = {
      method,
      value,
      error,
      ...(dimension === undefined ? {} : { dimension }),
      ...(outsideWeight === undefined ? {} : { outsideWeight }),
    };
    return found;
  } catch (error) {
    if (error instanceof StateVanishes) vanished.push(error);
    if (error instanceof MethodDoesNotApply) return { method, notApplicable: error.message };
    throw error;
  }
}

function toleranceOf(kind: FigureKind): Tolerance {
  // An integral over what lies between zero lines, found numerically.
  if (kind === 'wignerNegativity') return { relative: 1e-6, absolute: 1e-8 };
  return { relative: RELATIVE, absolute: differences.has(kind) ? ABSOLUTE_OF_DIFFERENCES : ABSOLUTE };
}

function scaleOf(value: FigureValue): number {
  if (typeof value === 'number') return Math.abs(value);
  if ('re' in value) return abs(value);
  let most = 0;
  for (const entry of value) {
    for (const cell of typeof entry === 'number' ? [entry] : entry) {
      const size = typeof cell === 'number' ? Math.abs(cell) : abs(cell);
      if (Number.isNaN(size)) return NaN;
      most = Math.max(most, size);
    }
  }
  return most;
}

/** How the outcomes of single methods are asked for. */
export interface MethodChoice {
  /** Leave out methods that are not asked for; all three by default. */
  readonly methods?: readonly MethodName[];
}

/**
 * A figure by each method that applies.
 *
 * @param figure the figure with its convention
 * @returns for each method its value, or the reason why it does not apply
 * @throws OpticsError where the figure is not defined
 */
export function figureByMethods(figure: Figure, choice: MethodChoice = {}): readonly MethodOutcome[] {
  const wanted = choice.methods ?? ['phase space', 'number basis', 'moments'];
  const tolerance = toleranceOf(figure.kind);
  const outcomes: MethodOutcome[] = [];
  const vanished: StateVanishes[] = [];
  if (wanted.includes('phase space'))
    outcomes.push(attempt('phase space', () => phaseSpaceFigure(figure), tolerance, vanished));
  if (wanted.includes('number basis'))
    outcomes.push(attempt('number basis', () => numberFigure(figure), tolerance, vanished));
  if (wanted.includes('moments') && isMomentFigure(figure)) {
    outcomes.push(attempt('moments', () => figureOfMoments(figure, momentsOf(figure.state)), tolerance, vanished));
  }
  if (vanished.length > 0 && !outcomes.some(isValue)) {
    throw new OpticsError(
      'the state vanishes: a superposition cancels to rounding, or a condition has no probability, so that nothing is left to normalise',
      { functionName: figure.kind, given: figure.state, allowed: 'a state whose norm does not vanish' },
    );
  }
  return outcomes;
}
