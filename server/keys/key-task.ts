import type { Convention } from '../optics/convention';
import { compileKey, type CompiledKey } from './compile-key';
import { evaluateKey, readGivens, type KeyResult } from './evaluate-key';
import { KeyError, type KeyFault } from './key-error';
import type { GivenValue } from './value';
import { evaluateWanted, type Wanted, type WrittenKey } from './written-key';

/** An expression to be evaluated, with the values of the names that it may use. */
export interface KeyRequest {
  readonly expression: string;
  readonly givens: Readonly<Record<string, GivenValue>>;
  readonly convention: Convention;
  /** What it is to come to; a number or a list where nothing is said. */
  readonly wanted?: Wanted | undefined;
  /** Fixes what is drawn at random; without it nothing may be. */
  readonly seed?: string | undefined;
}

/** What an expression came to, or why it has no value. */
export type KeyOutcome =
  | { readonly key: KeyResult | WrittenKey; readonly fault?: undefined }
  | { readonly key?: undefined; readonly fault: KeyFault };

const mostKept = 256;

/** Evaluates requests one after the other; an expression is compiled once for all its variants. */
export class KeyEvaluator {
  private readonly compiled = new Map<string, CompiledKey>();

  evaluate(request: KeyRequest): KeyOutcome {
    try {
      const compiled = this.compile(request);
      const givens = readGivens(request.givens);
      return {
        key: request.wanted
          ? evaluateWanted(compiled, givens, request.wanted)
          : evaluateKey(compiled, givens, request.seed),
      };
    } catch (error) {
      if (error instanceof KeyError) return { fault: error.toFault() };
      throw error;
    }
  }

  private compile({ expression, givens, convention, wanted }: KeyRequest): CompiledKey {
    const variables = wanted?.kind === 'formula' ? Object.keys(wanted.points[0] ?? {}) : [];
    const names = [...new Set([...Object.keys(givens), ...variables])];
    const { vacuumVariance, squeezingSign, splitterPhase } = convention;
    const identity = JSON.stringify([expression, names, vacuumVariance, squeezingSign, splitterPhase]);
    const kept = this.compiled.get(identity);
    if (kept) return kept;
    const made = compileKey(expression, { names, convention });
    if (this.compiled.size >= mostKept) this.compiled.clear();
    this.compiled.set(identity, made);
    return made;
  }
}
