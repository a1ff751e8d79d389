import type { MathNode } from 'mathjs';
import { defaultConvention, type Convention } from '../optics/convention';
import type { ComparedValue } from '../optics/methods';
import { isState } from '../optics/state';
import { forgetStates } from '../optics/state-memo';
import { stateFunctions } from '../optics/states';
import { KeyError } from './key-error';
import { guarded, parse } from './placed-errors';
import { mathematics } from './mathematics';
import { binaryOperators, truth, unaryOperators } from './operators';
import { opticsFunctions } from './optics-functions';
import { physicalConstants } from './physical-constants';
import { longestList, plainFunctions, Refusal } from './plain-functions';
import { SourceText, type Place } from './source-text';
import type { Surroundings } from './surroundings';
import { isUnitName, unitOf } from './unit-value';
import { hasNaN, kindOf, type Value } from './value';

/** Longest expression, in characters. */
export const longestExpression = 2000;
const mostNodes = 400;
const deepestNesting = 60;

/** Names that a given can never have. */
export const reservedNames: ReadonlySet<string> = new Set(['i', 'e', 'pi']);

/** What an expression is compiled under. */
export interface CompileOptions {
  /** Givens and `part_…` in scope. */
  readonly names: readonly string[];
  readonly convention?: Convention;
}

interface Run extends Surroundings {
  readonly values: ReadonlyMap<string, Value>;
  readonly look: Look | undefined;
}

/** Sees every question that is asked of a state of light, before it is answered. */
export type Look = (name: string, values: readonly Value[]) => void;

type Step = (run: Run) => Value;

/** A parsed and checked expression: evaluate it for as many variants as there are. */
export interface CompiledKey {
  readonly expression: string;
  /** The names in scope that it uses. */
  readonly uses: readonly string[];
  /** @throws KeyError where it has no value for these values */
  run(
    values: ReadonlyMap<string, Value>,
    look?: Look,
    seed?: string,
  ): { readonly value: Value; readonly figures: readonly ComparedValue[] };
}

/**
 * Parses an expression of the key language and checks everything that does not depend on values: length, size, names,
 * and that it only calls what the language has. Nothing of the host can be reached: names are looked up in tables
 * without prototypes, and assignment, definition, property access, texts and objects are refused.
 *
 * @throws KeyError with the place
 */
export function compileKey(expression: string, options: CompileOptions): CompiledKey {
  const source = new SourceText(expression);
  if (expression.trim() === '') throw new KeyError('Write an expression.', null);
  if (expression.length > longestExpression)
    throw new KeyError(
      `An expression has at most 2,000 characters; this one has ${expression.length.toLocaleString('en')}.`,
      null,
    );
  if (source.depth > deepestNesting)
    throw new KeyError(`Brackets are nested more than ${String(deepestNesting)} deep.`, null);
  const reserved = options.names.find((name) => reservedNames.has(name));
  if (reserved !== undefined)
    throw new KeyError(`“${reserved}” is a constant of the language; no given can have this name.`, null);
  const compiler = new Compiler(source, new Set(options.names));
  const step = compiler.compile(parse(expression, source));
  const convention = options.convention ?? defaultConvention;
  return {
    expression,
    uses: [...compiler.uses],
    run: (values, look, seed) => {
      const figures: ComparedValue[] = [];
      forgetStates();
      try {
        const value = guarded(source.whole, undefined, () =>
          step({ values, look, seed, convention, note: (figure) => void figures.push(figure) }),
        );
        return { value, figures };
      } finally {
        forgetStates();
      }
    },
  };
}

/** The nodes of the parser, as far as they are looked at. */
interface Node {
  readonly type: string;
  readonly name?: string;
  readonly value?: unknown;
  readonly fn?: string | Node;
  readonly op?: string;
  readonly args?: readonly Node[];
  readonly content?: Node;
  readonly items?: readonly Node[];
  readonly object?: Node;
  readonly index?: Node & { readonly dimensions: readonly Node[]; readonly dotNotation: boolean };
  readonly condition?: Node;
  readonly trueExpr?: Node;
  readonly falseExpr?: Node;
  readonly conditionals?: readonly string[];
  readonly params?: readonly Node[];
}

class Compiler {
  readonly uses = new Set<string>();
  private nodes = 0;
  /** How many names of the text have been passed. */
  private passed = 0;

  constructor(
    private readonly source: SourceText,
    private readonly names: ReadonlySet<string>,
  ) {}

  compile(tree: MathNode): Step {
    return this.step(tree);
  }

  private step(node: Node): Step {
    this.nodes += 1;
    if (this.nodes > mostNodes) throw new KeyError(`An expression has at most ${String(mostNodes)} parts.`, null);
    switch (node.type) {
      case 'ConstantNode':
        return this.constant(node.value);
      case 'ParenthesisNode':
        return this.step(required(node.content));
      case 'SymbolNode':
        return this.symbol(node.name ?? '');
      case 'OperatorNode':
        return this.operator(node);
      case 'FunctionNode':
        return this.call(node);
      case 'ArrayNode':
        return this.list(node);
      case 'AccessorNode':
        return this.entry(node);
      case 'ConditionalNode':
        return this.conditional(node);
      case 'RelationalNode':
        return this.relational(node);
      default:
        throw new KeyError(refusals[node.type] ?? 'This is not part of the key language.', this.source.whole);
    }
  }

  private place(name: string): Place {
    const place = this.source.nameAt(this.passed, name);
    this.passed += 1;
    return place;
  }

  private constant(value: unknown): Step {
    if (typeof value === 'number') {
      if (!Number.isFinite(value)) throw new KeyError('This number is beyond the range of numbers.', this.source.whole);
      return () => value;
    }
    if (typeof value === 'boolean') return () => value;
    throw new KeyError('Texts are not part of the key language.', this.source.whole);
  }

  private symbol(name: string): Step {
    const place = this.place(name);
    if (this.names.has(name)) {
      this.uses.add(name);
      return ({ values }) => {
        const value = values.get(name);
        if (value === undefined) throw new KeyError(`“${name}” has no value here.`, place);
        return value;
      };
    }
    if (name === 'pi') return () => Math.PI;
    if (name === 'e') return () => Math.E;
    if (name === 'i') {
      const unit = mathematics.complex(0, 1);
      return () => unit;
    }
    if (plainFunctions[name] || opticsFunctions[name])
      throw new KeyError(`“${name}” is a function; write ${name}(…).`, place, { functionName: name });
    const constant = Object.hasOwn(physicalConstants, name) ? physicalConstants[name] : undefined;
    if (constant) {
      const value = unitOf(constant.value, constant.unit);
      return () => value;
    }
    // A mean photon number that nobody gave would pass for a billionth of a bar.
    if (name !== 'nbar' && isUnitName(name)) {
      const unit = unitOf(1, name);
      return () => unit;
    }
    throw new KeyError(unknownName(name, this.names), place);
  }

  private operator(node: Node): Step {
    const args = (node.args ?? []).map((arg) => this.step(arg));
    const fn = typeof node.fn === 'string' ? node.fn : '';
    const [first, second] = args;
    const whole = this.source.whole;
    if (args.length === 1 && first && Object.hasOwn(unaryOperators, fn)) {
      const act = unaryOperators[fn];
      if (act)
        return (run) =>
          number(
            guarded(whole, undefined, () => act(first(run))),
            node.op ?? '',
            whole,
          );
    }
    if (args.length === 2 && first && second && Object.hasOwn(binaryOperators, fn)) {
      const act = binaryOperators[fn];
      if (act)
        return (run) => {
          const left = first(run);
          const right = second(run);
          return number(
            guarded(whole, undefined, () => act(left, right)),
            node.op ?? '',
            whole,
          );
        };
    }
    throw new KeyError(`The operator ${node.op ?? ''} is not part of the key language.`, whole);
  }

  private call(node: Node): Step {
    const fn = node.fn as Node | undefined;
    const name = fn?.type === 'SymbolNode' ? (fn.name ?? '') : '';
    if (name === '') throw new KeyError('Only the functions of the key language can be called.', this.source.whole);
    const place = this.place(name);
    const places = this.source.argumentsAfter(place);
    if (this.names.has(name))
      throw new KeyError(`“${name}” is a given here and cannot be called; write ${name}*(…) for a product.`, place);
    const optics = opticsFunctions[name];
    const plain = plainFunctions[name];
    if (!optics && !plain) throw new KeyError(unknownFunction(name), place, { functionName: name });
    const args = (node.args ?? []).map((arg) => this.step(arg));
    const asks = optics !== undefined && !Object.hasOwn(stateFunctions, name);
    return (run) => {
      const values = args.map((arg) => arg(run));
      if (asks && run.look && values.some(isState)) run.look(name, values);
      const act = (): Value => {
        if (optics) return optics(values, run);
        const state = values.find(isState);
        if (state) throw new Refusal(`cannot take ${kindOf(state)}; ask a figure of it, such as \`meanPhotons\``);
        return plain ? plain(...values) : Number.NaN;
      };
      return number(guarded(place, name, act, places, values), name, place);
    };
  }

  private list(node: Node): Step {
    const items = (node.items ?? []).map((item) => this.step(item));
    if (items.length > longestList) throw new KeyError('A list has at most 10,000 entries.', this.source.whole);
    return (run) => items.map((item) => item(run));
  }

  private entry(node: Node): Step {
    if (node.index?.dotNotation) throw new KeyError(refusals['property'] ?? '', this.source.whole);
    const list = this.step(required(node.object));
    const indices = (node.index?.dimensions ?? []).map((dimension) => this.step(dimension));
    const whole = this.source.whole;
    return (run) => {
      let value = list(run);
      for (const index of indices) {
        const at = index(run);
        if (!Array.isArray(value)) throw new KeyError(`Only a list has entries; this is ${kindOf(value)}.`, whole);
        const entries = value as readonly Value[];
        if (typeof at !== 'number' || !Number.isInteger(at) || at < 1 || at > entries.length)
          throw new KeyError(
            `The list has the entries 1 to ${String(entries.length)}; there is no entry ${typeof at === 'number' ? String(at) : kindOf(at)}.`,
            whole,
          );
        value = entries[at - 1] ?? Number.NaN;
      }
      return value;
    };
  }

  private conditional(node: Node): Step {
    const condition = this.step(required(node.condition));
    const yes = this.step(required(node.trueExpr));
    const no = this.step(required(node.falseExpr));
    return (run) => (guarded(this.source.whole, undefined, () => truth(condition(run), '?')) ? yes(run) : no(run));
  }

  private relational(node: Node): Step {
    const steps = (node.params ?? []).map((param) => this.step(param));
    const acts = (node.conditionals ?? []).map((name) => binaryOperators[name]);
    const whole = this.source.whole;
    return (run) => {
      const values = steps.map((step) => step(run));
      return acts.every((act, index) => {
        const [left, right] = [values[index], values[index + 1]];
        if (!act || left === undefined || right === undefined) return false;
        return guarded(whole, undefined, () => act(left, right)) === true;
      });
    };
  }
}

/** Whatever comes out of a call is a number, or says why not. */
function number(value: Value, name: string, place: Place): Value {
  if (hasNaN(value)) throw new KeyError(`\`${name}\` has no value here: the result is not a number.`, place);
  return value;
}

function required(node: Node | undefined): Node {
  if (!node) throw new KeyError('The expression cannot be read.', null);
  return node;
}

/** Why a kind of node is refused. */
const refusals: Readonly<Record<string, string>> = {
  AssignmentNode: 'Nothing can be assigned in a key; add a given instead.',
  FunctionAssignmentNode: 'Functions cannot be defined in a key.',
  BlockNode: 'A key is one expression; ; and line breaks do not belong in it.',
  ObjectNode: 'Objects are not part of the key language.',
  RangeNode: 'Write range(first, last) for a list of numbers.',
  IndexNode: 'An index belongs behind a list.',
  property: 'Properties cannot be reached in a key.',
};

function unknownName(name: string, names: ReadonlySet<string>): string {
  const near = [...names].find((each) => each.toLowerCase() === name.toLowerCase());
  const hint = near ? ` Did you mean “${near}”?` : '';
  return `“${name}” is no given, constant or unit of this problem.${hint}`;
}

function unknownFunction(name: string): string {
  const all = [...Object.keys(opticsFunctions), ...Object.keys(plainFunctions)];
  const near = all.find((each) => each.toLowerCase() === name.toLowerCase());
  const hint = near ? ` Did you mean “${near}”?` : '';
  return `There is no function “${name}” in the key language.${hint}`;
}
