import type { Complex } from './complex';
import { OpticsError } from './optics-error';

/** Largest photon number that may be written. */
export const LARGEST_PHOTON_NUMBER = 16_383;
/** Largest |α|² that may be written. */
export const LARGEST_MEAN = 10_000;
/** Largest squeezing parameter that may be written. */
export const LARGEST_SQUEEZING = 6;
/** Largest number of entries of a list. */
export const LONGEST_LIST = 10_000;

/** Names a value in an error's sentence: numbers as they are, the rest by their kind. */
export function describe(given: unknown): string {
  if (given === undefined) return 'nothing';
  if (typeof given === 'number') return String(given);
  if (typeof given === 'string') return 'a text';
  if (typeof given === 'boolean') return String(given);
  if (Array.isArray(given)) return `a list of ${given.length}`;
  if (isComplexObject(given)) return `${given.re} ${given.im < 0 ? '-' : '+'} ${Math.abs(given.im)}i`;
  if (typeof given === 'object' && given !== null && 'modes' in given) {
    return given.modes === 2 ? 'a state of two modes' : 'a state of one mode';
  }
  return 'another kind of value';
}

function isComplexObject(given: unknown): given is Complex {
  return (
    typeof given === 'object' &&
    given !== null &&
    're' in given &&
    'im' in given &&
    typeof given.re === 'number' &&
    typeof given.im === 'number'
  );
}

/** Reads the arguments of one call of one function, and refuses what its ranges do not allow. */
export class ArgumentReader {
  constructor(
    readonly functionName: string,
    private readonly given: readonly unknown[],
  ) {}

  get count(): number {
    return this.given.length;
  }

  at(index: number): unknown {
    return this.given[index];
  }

  refuse(index: number, argument: string, allowed: string): never {
    const given = this.given[index];
    throw new OpticsError(`${argument} must ${allowed}, got ${describe(given)}`, {
      functionName: this.functionName,
      argument,
      argumentIndex: index,
      given,
      allowed,
    });
  }

  /** Refuses more or fewer arguments than the call takes. */
  expectCount(least: number, most: number): void {
    if (this.given.length >= least && this.given.length <= most) return;
    const allowed = least === most ? `${least}` : most === least + 1 ? `${least} or ${most}` : `${least} to ${most}`;
    throw new OpticsError(
      `takes ${allowed} argument${least === most && least === 1 ? '' : 's'}, got ${this.given.length}`,
      { functionName: this.functionName, given: this.given.length, allowed },
    );
  }

  /** A finite real number; a complex number without imaginary part counts. */
  real(index: number, argument: string, fallback?: number): number {
    const given = this.given[index];
    if (given === undefined && fallback !== undefined) return fallback;
    if (typeof given === 'number' && Number.isFinite(given)) return given;
    if (isComplexObject(given) && given.im === 0 && Number.isFinite(given.re)) return given.re;
    return this.refuse(index, argument, 'be a finite real number');
  }

  /** A real number between `least` and `most`, both allowed. */
  between(index: number, argument: string, least: number, most: number, fallback?: number): number {
    const value = this.real(index, argument, fallback);
    if (value >= least && value <= most) return value;
    return this.refuse(index, argument, `lie between ${least} and ${most}`);
  }

  /** A real number of at least `least`. */
  atLeast(index: number, argument: string, least: number, fallback?: number): number {
    const value = this.real(index, argument, fallback);
    if (value >= least) return value;
    return this.refuse(index, argument, least === 0 ? 'not be negative' : `be at least ${least}`);
  }

  /** A whole number between `least` and `most`. */
  whole(index: number, argument: string, least = 0, most = LARGEST_PHOTON_NUMBER, fallback?: number): number {
    const given = this.given[index];
    if (given === undefined && fallback !== undefined) return fallback;
    const value = isComplexObject(given) && given.im === 0 ? given.re : given;
    if (typeof value === 'number' && Number.isInteger(value) && value >= least && value <= most) return value;
    return this.refuse(index, argument, `be a whole number from ${least} to ${most}`);
  }

  /** A finite complex number. */
  complex(index: number, argument: string, fallback?: Complex): Complex {
    const given = this.given[index];
    if (given === undefined && fallback !== undefined) return fallback;
    if (typeof given === 'number' && Number.isFinite(given)) return { re: given, im: 0 };
    if (isComplexObject(given) && Number.isFinite(given.re) && Number.isFinite(given.im)) {
      return { re: given.re, im: given.im };
    }
    return this.refuse(index, argument, 'be a finite complex number');
  }

  /** A complex amplitude α with |α|² ≤ 10,000. */
  amplitude(index: number, argument = 'amplitude'): Complex {
    const value = this.complex(index, argument);
    if (value.re * value.re + value.im * value.im <= LARGEST_MEAN * (1 + 1e-12)) return value;
    return this.refuse(index, argument, 'have |α|² of at most 10000');
  }

  /** A mode, 1 or 2. */
  mode(index: number): 1 | 2 {
    const value = this.whole(index, 'mode', 1, 2);
    return value === 1 ? 1 : 2;
  }

  /** A list of at most 10,000 entries. */
  list(index: number, argument: string): readonly unknown[] {
    const given = this.given[index];
    if (!Array.isArray(given)) return this.refuse(index, argument, 'be a list');
    if (given.length > LONGEST_LIST) return this.refuse(index, argument, `have at most ${LONGEST_LIST} entries`);
    return given as readonly unknown[];
  }

  /** A list of finite real numbers. */
  reals(index: number, argument: string): readonly number[] {
    return this.list(index, argument).map((entry) => {
      if (typeof entry === 'number' && Number.isFinite(entry)) return entry;
      return this.refuse(index, argument, 'be a list of finite real numbers');
    });
  }
}
