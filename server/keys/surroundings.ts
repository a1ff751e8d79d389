import type { Convention } from '../optics/convention';
import type { ComparedValue } from '../optics/methods';
import type { Value } from './value';

/** What a call is made under: the convention, and where computed figures are noted. */
export interface Surroundings {
  readonly convention: Convention;
  /** Fixes what is drawn at random; absent where nothing may be. */
  readonly seed?: string | undefined;
  /** Takes note of a figure, for the method and agreement of the result. */
  note(figure: ComparedValue): void;
}

/** A function of the language that knows of light. */
export type OpticsFunction = (values: readonly Value[], surroundings: Surroundings) => Value;
