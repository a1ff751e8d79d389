import { answerFunctions } from './complex-functions';
import { binary, contains, type ConstantName, type Expression } from './expression';
import { constants, isKnown, namedStates, type Grammar } from './grammar';
import { lex, type Token, type TokenKind } from './lexer';
import { canonicalName } from './names';
import { quote, ReadingProblem } from './problem';
import { unitByName } from './units';
import { unknownName } from './unknown-name';

const isUnitPower = (node: Expression): boolean =>
  node.type === 'unit' || (node.type === 'binary' && node.operator === '^' && node.left.type === 'unit');

const deepest = 60;
const mostNodes = 600;
/** A recursive-descent parser with the precedences of `mathjs`: an implicit product binds tighter than a quotient. */
export class Parser {
  private at = 0;
  private depth = 0;
  private nodes = 0;
  private bars = 0;
  /** The node that was last written as a number, and the one last closed by a bracket: they decide what may follow. */
  private literal: Expression | undefined;
  private bracketed: Expression | undefined;

  constructor(
    private readonly tokens: readonly Token[],
    private readonly text: string,
    private readonly grammar: Grammar,
  ) {}

  get token(): Token {
    return this.peek(0);
  }

  peek(ahead: number): Token {
    const last = this.tokens[this.tokens.length - 1];
    const token = this.tokens[Math.min(this.at + ahead, this.tokens.length - 1)] ?? last;
    if (!token) throw new ReadingProblem('There is nothing to read.');
    return token;
  }

  is(kind: TokenKind, text?: string): boolean {
    return this.token.kind === kind && (text === undefined || this.token.text === text);
  }

  take(): Token {
    const token = this.token;
    this.at += 1;
    return token;
  }

  /** Reads a sum; what follows it is left to the caller. */
  sum(): Expression {
    this.depth += 1;
    if (this.depth > deepest)
      throw new ReadingProblem('The answer has too many brackets inside each other.', this.token.start);
    let node = this.product();
    while (this.is('operator', '+') || this.is('operator', '-')) {
      const operator = this.take().text === '+' ? '+' : '-';
      node = this.made(binary(operator, node, this.product()));
    }
    this.depth -= 1;
    return node;
  }

  /** Reads a whole text as one expression. */
  whole(): Expression {
    const node = this.sum();
    if (!this.is('end')) throw this.unexpected();
    return node;
  }

  /** Why the present sign cannot stand where it does. */
  unexpected(): ReadingProblem {
    const { kind, text, start, end } = this.token;
    const typed = quote(this.text.slice(start, end) || text);
    if (kind === 'end') return new ReadingProblem('The answer ends too early; something is missing at its end.', start);
    if (kind === 'number')
      return new ReadingProblem('Two numbers stand side by side; write × between them, or only one number.', start);
    if (kind === 'comma' || kind === 'semicolon')
      return new ReadingProblem('There are several values; this field takes one.', start);
    if (kind === 'close') return new ReadingProblem(`The bracket ${typed} closes nothing.`, start);
    if (text === '=') return new ReadingProblem('Write one value, without a second “=”.', start);
    if (text === '±') return new ReadingProblem('“±” gives two values; write one.', start);
    if (kind === 'langle' && this.grammar.kets) {
      return new ReadingProblem('A bra has no place here; write kets such as |0⟩.', start);
    }
    if (kind === 'bar' || kind === 'rangle' || kind === 'langle') {
      return new ReadingProblem(`${typed} belongs to a state, and this field does not take one here.`, start);
    }
    return new ReadingProblem(`${typed} cannot stand here.`, start);
  }

  private made<Node extends Expression>(node: Node): Node {
    this.nodes += 1;
    if (this.nodes > mostNodes) throw new ReadingProblem('The answer is too long to be read.', this.token.start);
    return node;
  }

  private product(): Expression {
    let node = this.implicitProduct();
    for (;;) {
      if (this.is('operator', '*') || this.is('operator', '/')) {
        const operator = this.take().text === '*' ? '*' : '/';
        const right = this.implicitProduct();
        node =
          operator === '/' && this.grammar.units
            ? this.unitsApart(node, right)
            : this.made(binary(operator, node, right));
      } else if (this.startsReciprocalUnit()) {
        this.take();
        this.take();
        node = this.made(binary('/', node, this.implicitProduct()));
      } else if (this.grammar.kets && this.startsFactor(node)) {
        node = this.made(binary('*', node, this.quotient(), true));
      } else return node;
    }
  }

  /** `π/2 rad`: the unit at the end belongs to the whole quotient, where nothing above the line has one. */
  private unitsApart(above: Expression, right: Expression): Expression {
    const units: Expression[] = [];
    let below = right;
    while (below.type === 'binary' && below.implicit && below !== this.bracketed && isUnitPower(below.right)) {
      units.unshift(below.right);
      below = below.left;
    }
    if (units.length === 0 || contains(above, 'unit') || contains(below, 'unit'))
      return this.made(binary('/', above, right));
    return units.reduce<Expression>(
      (product, unit) => this.made(binary('*', product, unit, true)),
      this.made(binary('/', above, below)),
    );
  }

  /** `7.65e6 1/s`: a one over a unit behind a number belongs to the unit. */
  private startsReciprocalUnit(): boolean {
    const [first, slash, name] = [this.token, this.peek(1), this.peek(2)];
    if (!this.grammar.units || first.digits !== '1' || first.exponent !== undefined || slash.text !== '/') return false;
    return name.kind === 'open' || (name.kind === 'name' && unitByName(name.text) !== undefined);
  }

  private implicitProduct(): Expression {
    let node = this.quotient();
    // Beside kets a product without sign binds no tighter than a quotient: 1/√2 (|0⟩ + |1⟩).
    if (this.grammar.kets) return node;
    while (this.startsFactor(node)) node = this.made(binary('*', node, this.quotient(), true));
    return node;
  }

  /** As in mathjs, `1/2 pi` is a half of π: a number over a number before a name or bracket is taken first. */
  private quotient(): Expression {
    let node = this.signed();
    const number = (token: Token) => token.kind === 'number';
    while (this.literal === node && this.is('operator', '/') && number(this.peek(1))) {
      const after = this.peek(2);
      if (this.grammar.kets || (after.kind !== 'name' && !(after.kind === 'open' && after.text === '('))) break;
      this.take();
      node = this.made(binary('/', node, this.signed()));
      this.literal = node;
    }
    return node;
  }

  private startsFactor(before: Expression): boolean {
    const { kind, text } = this.token;
    if (kind === 'name' || kind === 'open' || kind === 'command') return true;
    if (kind === 'operator') return text === '√';
    if (kind === 'bar') return this.grammar.kets || this.bars === 0;
    if (kind !== 'number') return false;
    const last = before.type === 'negative' ? before.argument : before;
    return (
      before === this.bracketed || last.type === 'constant' || last.type === 'variable' || last.type === 'factorial'
    );
  }

  private signed(): Expression {
    if (this.is('operator', '-')) {
      const { start } = this.take();
      return this.made({ type: 'negative', argument: this.nested(() => this.signed()), at: start });
    }
    if (this.is('operator', '+')) {
      this.take();
      return this.nested(() => this.signed());
    }
    return this.powered();
  }

  private nested<T>(read: () => T): T {
    this.depth += 1;
    if (this.depth > deepest * 2)
      throw new ReadingProblem('The answer is too deeply nested to be read.', this.token.start);
    const result = read();
    this.depth -= 1;
    return result;
  }

  private powered(): Expression {
    const base = this.postfixed();
    if (!this.is('operator', '^')) return base;
    this.take();
    if (this.is('operator', '°')) {
      // LaTeX writes a degree as ^\circ.
      return this.degrees(base);
    }
    return this.made(
      binary(
        '^',
        base,
        this.nested(() => this.signed()),
      ),
    );
  }

  private degrees(base: Expression): Expression {
    const { start } = this.take();
    const unit = this.grammar.units ? unitByName('°') : undefined;
    if (!unit) throw new ReadingProblem('A degree sign has no meaning here.', start);
    return this.made(binary('*', base, { type: 'unit', unit, at: start }, true));
  }

  private postfixed(): Expression {
    let node = this.primary();
    for (;;) {
      if (this.is('operator', '!')) node = this.marked('factorial', node);
      else if (this.is('operator', '%')) node = this.marked('percent', node);
      else if (this.is('operator', '°')) node = this.degrees(node);
      else return node;
    }
  }

  private marked(type: 'factorial' | 'percent', argument: Expression): Expression {
    this.take();
    return this.made({ type, argument, at: argument.at });
  }

  private primary(): Expression {
    const token = this.token;
    switch (token.kind) {
      case 'number':
        this.take();
        this.literal = this.made({
          type: 'number',
          value: token.value ?? NaN,
          digits: token.digits ?? token.text,
          ...(token.exponent === undefined ? {} : { exponent: token.exponent }),
          at: token.start,
        });
        return this.literal;
      case 'name':
        return this.named();
      case 'open':
        return this.bracket();
      case 'command':
        return this.command();
      case 'bar':
        return this.grammar.kets ? this.ket() : this.absolute();
      case 'operator':
        if (token.text === '√') {
          this.take();
          return this.made({
            type: 'call',
            name: 'sqrt',
            argument: this.nested(() => this.primary()),
            at: token.start,
          });
        }
        throw this.unexpected();
      default:
        throw this.unexpected();
    }
  }

  /** A bracket of any kind and what it holds. */
  private bracket(): Expression {
    const open = this.take();
    const saved = this.bars;
    this.bars = 0;
    const node = this.sum();
    this.bars = saved;
    this.close(open);
    this.bracketed = node;
    this.literal = undefined;
    return node;
  }

  private close(open: Token): void {
    const wanted = open.text === '(' ? ')' : open.text === '[' ? ']' : '}';
    if (this.is('close', wanted)) {
      this.take();
      return;
    }
    if (!this.tokens.slice(this.at).some(({ kind }) => kind === 'close')) {
      throw new ReadingProblem(`The bracket ${quote(open.text)} is never closed.`, open.start);
    }
    if (!this.is('close')) throw this.unexpected();
    throw new ReadingProblem(
      `The bracket ${quote(open.text)} is closed by ${quote(this.token.text)}.`,
      this.token.start,
    );
  }

  private absolute(): Expression {
    const { start } = this.take();
    this.bars += 1;
    const argument = this.sum();
    this.bars -= 1;
    if (this.is('rangle')) throw this.unexpected();
    if (!this.is('bar')) throw new ReadingProblem('The bar “|” is never closed.', start);
    this.take();
    return this.made({ type: 'call', name: 'abs', argument, at: start });
  }

  private command(): Expression {
    const { text, start } = this.take();
    if (text === 'ket') {
      if (!this.grammar.kets) throw new ReadingProblem('A ket has no place in this field.', start);
      return this.ketInBraces(start);
    }
    if (text === 'frac') {
      const [above, below] = [this.braced('\\frac{…}{…}'), this.braced('\\frac{…}{…}')];
      const node = this.made(binary('/', above, below));
      this.bracketed = node;
      return node;
    }
    if (this.is('open', '[')) {
      const order = this.bracket();
      const radicand = this.braced('\\sqrt[3]{…}');
      const exponent = binary('/', { type: 'number', value: 1, digits: '1', at: start }, order);
      return this.made(binary('^', radicand, exponent));
    }
    const argument = this.is('open') ? this.bracket() : this.nested(() => this.primary());
    return this.made({ type: 'call', name: 'sqrt', argument, at: start });
  }

  private braced(example: string): Expression {
    if (!this.is('open', '{')) throw new ReadingProblem(`Write braces, as in ${example}.`, this.token.start);
    return this.bracket();
  }

  private named(): Expression {
    const token = this.take();
    const name = canonicalName(token.text);
    const at = token.start;
    const variable = this.grammar.variables.get(name);
    if (variable !== undefined) return this.made({ type: 'variable', name: variable, at });
    if (constants.has(name)) return this.made({ type: 'constant', name: name as ConstantName, at });
    if (this.grammar.kets && Object.hasOwn(namedStates, name)) return this.namedState(name, at);
    const unit = this.grammar.units ? unitByName(token.text) : undefined;
    if (answerFunctions.has(name) && (unit === undefined || this.is('open'))) return this.call(name, token);
    if (unit) return this.made({ type: 'unit', unit, at });
    throw unknownName(token, this.grammar);
  }

  private call(name: string, token: Token): Expression {
    let exponent: Expression | undefined;
    if (this.is('operator', '^')) {
      // sin²(x) is the square of the sine.
      this.take();
      exponent = this.is('open') ? this.bracket() : this.primary();
      if (exponent.type !== 'number' || !Number.isInteger(exponent.value) || exponent.value < 1) {
        throw new ReadingProblem(`Write the power of ${quote(token.text)} behind its bracket.`, token.start);
      }
    }
    if (!this.is('open')) {
      throw new ReadingProblem(`Write ${quote(token.text)} with brackets, as in ${name}(2).`, token.start);
    }
    const argument = this.bracket();
    const node = this.made({ type: 'call', name, argument, at: token.start } as const);
    return exponent ? this.made(binary('^', node, exponent)) : node;
  }

  private namedState(name: string, at: number): Expression {
    if (!this.is('open', '(')) throw new ReadingProblem(`Write ${quote(name)} with brackets, as in coherent(2).`, at);
    const open = this.take();
    const list: Expression[] = [];
    while (!this.is('close') && !this.is('end')) {
      list.push(this.sum());
      if (!this.is('comma')) break;
      this.take();
    }
    this.close(open);
    const [fewest, most] = namedStates[name] ?? [0, 0];
    if (list.length < fewest || list.length > most) {
      throw new ReadingProblem(
        `${quote(name)} takes ${most === fewest ? most : `${fewest} or ${most}`} values in its brackets.`,
        at,
      );
    }
    if (list.some((each) => contains(each, 'ket', 'state')))
      throw new ReadingProblem(`${quote(name)} takes numbers.`, at);
    return this.made({ type: 'state', name, arguments: list, at });
  }

  private ketInBraces(start: number): Expression {
    if (!this.is('open', '{')) throw new ReadingProblem('Write braces, as in \\ket{0}.', start);
    this.take();
    return this.photons(start, () => this.is('close', '}'));
  }

  private ket(): Expression {
    const { start } = this.take();
    return this.photons(start, () => this.is('rangle'));
  }

  /** The photon numbers of a ket and its closing sign. */
  private photons(start: number, closes: () => boolean): Expression {
    const numbers: number[] = [];
    for (;;) {
      const token = this.token;
      if (token.kind === 'end') throw new ReadingProblem('The ket is never closed; write it as |0⟩ or |0>.', start);
      if (token.kind !== 'number') {
        throw new ReadingProblem('A ket holds photon numbers, such as |2⟩ or |1,0⟩.', token.start);
      }
      if (!/^\d+$/.test(token.digits ?? '') || token.exponent !== undefined) {
        throw new ReadingProblem('A photon number is a whole number, such as 0, 1 or 2.', token.start);
      }
      if (/^0\d/.test(token.digits ?? '')) {
        const apart = numbers.length === 0 ? `: |${[...(token.digits ?? '')].join(',')}⟩` : ', as in |1,0⟩';
        throw new ReadingProblem(`Separate the modes by commas${apart}.`, token.start);
      }
      numbers.push(token.value ?? 0);
      this.take();
      if (closes()) break;
      if (!this.is('comma')) {
        if (this.is('end')) throw new ReadingProblem('The ket is never closed; write it as |0⟩ or |0>.', start);
        throw new ReadingProblem('Separate the modes of a ket by commas, and close it: |1,0⟩.', this.token.start);
      }
      this.take();
    }
    this.take();
    return this.made({ type: 'ket', photons: numbers, at: start });
  }
}

/** A parser over a text. Throws a ReadingProblem or AmbiguousComma where the text holds signs without meaning. */
export function parserFor(text: string, grammar: Grammar): Parser {
  const tokens = lex(text, { comma: grammar.comma, known: (name) => isKnown(grammar, name), kets: grammar.kets });
  return new Parser(tokens, text, grammar);
}

/** Reads a text as one expression. */
export function parseExpression(text: string, grammar: Grammar): Expression {
  return parserFor(text, grammar).whole();
}
