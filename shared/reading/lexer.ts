import { lexNumber, startsNumber, type CommaRole } from './lex-number';
import { greekCommand, isGreek, plainSubscript } from './names';
import { quote, ReadingProblem } from './problem';

export type TokenKind =
  | 'number'
  | 'name'
  | 'operator'
  | 'open'
  | 'close'
  | 'comma'
  | 'semicolon'
  | 'bar'
  | 'rangle'
  | 'langle'
  | 'command'
  | 'end';

/** One sign of the text, with where it stands. */
export interface Token {
  readonly kind: TokenKind;
  /** For names as typed; for operators, brackets and commands their plain form. */
  readonly text: string;
  readonly value?: number;
  /** Digits as typed, for numbers. */
  readonly digits?: string;
  readonly exponent?: number;
  readonly start: number;
  readonly end: number;
  /** Whether a space stands before it. */
  readonly spaced: boolean;
}

export interface LexerOptions {
  readonly comma: CommaRole;
  /** Whether a name, as typed, stands for something here: a run of letters that does not is split at Greek letters. */
  readonly known: (name: string) => boolean;
  /** Whether brackets of kets are expected, so that `<` and `>` are theirs. */
  readonly kets?: boolean;
}

/** Longest text that is read, in characters. */
export const longestAnswer = 2000;

const minus = /[-\u2212\u2013\u2010\u2011\ufe63\uff0d]/;
const times = /[*×✕⨯·⋅∙•∗⸱・⊗]/;
const divided = /[/÷∕⁄]/;
const space = /[\s\u200b-\u200f\u2060\ufeff$]/u;
const letter = /[\p{L}\p{M}ℏ∆]/u;
const superscripts = '⁰¹²³⁴⁵⁶⁷⁸⁹⁺⁻';
const plainSuperscripts = '0123456789+-';
const superscriptLetters: Readonly<Record<string, string>> = { ⁿ: 'n', ⁱ: 'i', ᵗ: 't', ˣ: 'x' };
const ignoredCommands = new Set([
  'left',
  'right',
  'mathrm',
  'text',
  'mathit',
  'mathbf',
  'operatorname',
  'rm',
  'displaystyle',
  'big',
  'Big',
  'bigl',
  'bigr',
  'quad',
  'qquad',
  'limits',
]);
const accents: Readonly<Record<string, string>> = { bar: 'bar', overline: 'bar', hat: 'hat', tilde: 'tilde' };
const signs: Readonly<Record<string, readonly [TokenKind, string]>> = {
  cdot: ['operator', '*'],
  times: ['operator', '*'],
  ast: ['operator', '*'],
  otimes: ['operator', '*'],
  div: ['operator', '/'],
  pm: ['operator', '±'],
  langle: ['langle', '⟨'],
  rangle: ['rangle', '⟩'],
  vert: ['bar', '|'],
  lvert: ['bar', '|'],
  rvert: ['bar', '|'],
  mid: ['bar', '|'],
  lbrace: ['open', '('],
  rbrace: ['close', ')'],
  frac: ['command', 'frac'],
  dfrac: ['command', 'frac'],
  tfrac: ['command', 'frac'],
  sqrt: ['command', 'sqrt'],
  ket: ['command', 'ket'],
  infty: ['name', '∞'],
  circ: ['operator', '°'],
  degree: ['operator', '°'],
};
const simple: Readonly<Record<string, readonly [TokenKind, string]>> = {
  '+': ['operator', '+'],
  '^': ['operator', '^'],
  '!': ['operator', '!'],
  '%': ['operator', '%'],
  '±': ['operator', '±'],
  '=': ['operator', '='],
  '≈': ['operator', '='],
  '(': ['open', '('],
  '[': ['open', '['],
  '{': ['open', '{'],
  ')': ['close', ')'],
  ']': ['close', ']'],
  '}': ['close', '}'],
  ',': ['comma', ','],
  ';': ['semicolon', ';'],
  '|': ['bar', '|'],
  '∣': ['bar', '|'],
  '❘': ['bar', '|'],
  '⟩': ['rangle', '⟩'],
  '〉': ['rangle', '⟩'],
  '❯': ['rangle', '⟩'],
  '›': ['rangle', '⟩'],
  '⟨': ['langle', '⟨'],
  '〈': ['langle', '⟨'],
  '√': ['operator', '√'],
  '°': ['operator', '°'],
  º: ['operator', '°'],
  '˚': ['operator', '°'],
  '∞': ['name', '∞'],
  '&': ['comma', ','],
};

class Lexer {
  private readonly tokens: Token[] = [];
  private at = 0;
  private spaced = false;
  private insideKet = false;

  constructor(
    private readonly text: string,
    private readonly options: LexerOptions,
  ) {}

  run(): readonly Token[] {
    while (this.at < this.text.length) this.next();
    this.push('end', '', this.text.length, this.text.length);
    return this.tokens;
  }

  private push(kind: TokenKind, text: string, start: number, end: number, extra: Partial<Token> = {}): void {
    this.follow(kind, text);
    this.tokens.push({ kind, text, start, end, spaced: this.spaced, ...extra });
    this.spaced = false;
    this.at = end;
  }

  private next(): void {
    const start = this.at;
    const character = String.fromCodePoint(this.text.codePointAt(start) ?? 0);
    const end = start + character.length;
    if (space.test(character)) {
      this.spaced = true;
      this.at = end;
    } else if (startsNumber(this.text, start) || this.startsWithComma(start)) this.number(start);
    else if (superscripts.includes(character) || character in superscriptLetters) this.superscript(start);
    else if (character === '*' && this.text[end] === '*') this.push('operator', '^', start, end + 1);
    else if (minus.test(character)) this.push('operator', '-', start, end);
    else if (times.test(character)) this.push('operator', '*', start, end);
    else if (divided.test(character)) this.push('operator', '/', start, end);
    else if (character === '>') this.push('rangle', '⟩', start, end);
    else if (character === '<') this.push('langle', '⟨', start, end);
    else if (character === '\\') this.command(start);
    else if (/[°º˚]/.test(character) && /^C(?!\p{L})/u.test(this.text.slice(end)))
      this.push('name', '°C', start, end + 1);
    else if (Object.hasOwn(simple, character)) {
      const [kind, plain] = simple[character] ?? ['end', ''];
      this.push(kind, plain, start, end);
    } else if (this.isTimes(character, start)) this.push('operator', '*', start, end);
    else if (character === '℃' || letter.test(character)) this.names(start);
    else throw new ReadingProblem(`The sign ${quote(character)} has no meaning here.`, start);
  }

  /** `4.98x10^-2`: an x right between two numbers is a times sign, where no variable is called so. */
  private isTimes(character: string, start: number): boolean {
    if (!/^[xX]$/.test(character) || this.tokens[this.tokens.length - 1]?.kind !== 'number') return false;
    return /^\s*[\d.½]/.test(this.text.slice(start + 1)) && !this.options.known(character);
  }

  /** `,5`: a decimal comma may begin a number where no value stands before it. */
  private startsWithComma(start: number): boolean {
    if (this.options.comma !== 'decimal' || this.separates() || !/^,\d/.test(this.text.slice(start, start + 2)))
      return false;
    const before = this.tokens[this.tokens.length - 1]?.kind;
    return before === undefined || before === 'operator' || before === 'open' || before === 'semicolon';
  }

  private number(start: number): void {
    const written = lexNumber(this.text, start, this.separates() ? 'separator' : this.options.comma);
    const { value, digits, exponent } = written;
    this.push('number', this.text.slice(start, written.end), start, written.end, {
      value,
      digits,
      ...(exponent === undefined ? {} : { exponent }),
    });
  }

  /** Whether a comma here separates photon numbers: inside a ket, or inside the brackets of a state written by name. */
  private separates(): boolean {
    return this.options.kets === true && this.insideKet;
  }

  /** Follows where kets and named states begin and end. */
  private follow(kind: TokenKind, text: string): void {
    if (kind === 'bar' || (kind === 'command' && text === 'ket')) this.insideKet = true;
    else if (kind === 'rangle' || kind === 'close') this.insideKet = false;
    else if (kind === 'open' && /^(?:ket|cat)$/.test(this.tokens[this.tokens.length - 1]?.text ?? ''))
      this.insideKet = true;
  }

  /** Raised signs become an ordinary power: `10⁻³` is `10^(-3)`. */
  private superscript(start: number): void {
    let end = start;
    let plain = '';
    for (const character of this.text.slice(start)) {
      const index = superscripts.indexOf(character);
      const raised = index >= 0 ? plainSuperscripts[index] : superscriptLetters[character];
      if (raised === undefined) break;
      plain += raised;
      end += character.length;
    }
    this.push('operator', '^', start, start);
    this.push('open', '(', start, start);
    for (const piece of plain.match(/\d+|[+-]|[a-z]/g) ?? []) {
      if (/\d/.test(piece)) this.push('number', piece, start, start, { value: Number(piece), digits: piece });
      else this.push(/[+-]/.test(piece) ? 'operator' : 'name', piece, start, start);
    }
    this.push('close', ')', start, end);
  }

  private command(start: number): void {
    const word = /^[A-Za-z]+/.exec(this.text.slice(start + 1))?.[0];
    if (word === undefined) {
      const sign = this.text[start + 1] ?? '';
      const end = Math.min(start + 2, this.text.length);
      if (/[,;:! ]/.test(sign)) {
        this.spaced = true;
        this.at = end;
      } else if (sign === '%') this.push('operator', '%', start, end);
      else if (sign === '|') this.push('bar', '|', start, end);
      else if (sign === '\\') this.push('semicolon', ';', start, end);
      else if (sign === '{' || sign === '}') this.push(sign === '{' ? 'open' : 'close', sign, start, end);
      else throw new ReadingProblem('A backslash begins a command such as \\kappa or \\sqrt.', start);
      return;
    }
    const end = start + 1 + word.length;
    const sign = Object.hasOwn(signs, word) ? signs[word] : undefined;
    const accent = Object.hasOwn(accents, word) ? accents[word] : undefined;
    if (ignoredCommands.has(word)) {
      this.spaced = true;
      this.at = end;
    } else if (sign) this.push(sign[0], sign[1], start, end);
    else if (accent !== undefined) this.accented(start, end, accent);
    else if (word === 'mu' && this.microUnit(start, end)) return;
    else if (greekCommand(word) !== undefined || word === 'hbar' || word === 'ell' || this.options.known(word)) {
      const index = this.subscriptEnd(end);
      this.push('name', this.text.slice(start, index), start, index);
    } else throw new ReadingProblem(`The command ${quote(`\\${word}`)} is not known here.`, start);
  }

  /** `\mu s` is the unit µs where that is known and mu itself is not. */
  private microUnit(start: number, end: number): boolean {
    const unit = /^\s*([A-Za-z]+)/.exec(this.text.slice(end));
    if (!unit || this.options.known('mu') || !this.options.known(`µ${unit[1]}`)) return false;
    this.push('name', `µ${unit[1]}`, start, end + unit[0].length);
    return true;
  }

  private accented(start: number, end: number, accent: string): void {
    const argument = /^\s*(?:\{\s*\\?([^{}]{1,20})\}|\\?([A-Za-z]+))/u.exec(this.text.slice(end));
    const name = argument?.[1] ?? argument?.[2];
    if (!argument || name === undefined) throw new ReadingProblem(`Write what carries the bar, as in \\bar{n}.`, start);
    const last = this.subscriptEnd(end + argument[0].length);
    this.push('name', `${name.trim()}${accent}${this.text.slice(end + argument[0].length, last)}`, start, last);
  }

  /** Where an index such as `_0`, `_{out}` or `₁` behind a name ends. */
  private subscriptEnd(from: number): number {
    const index = /^(?:_\{[A-Za-z0-9, ]{1,12}\}|_[A-Za-z0-9]+|[₀-₉ₐₑₕᵢⱼₖₗₘₙₒₚᵣₛₜₓ]+)/u.exec(this.text.slice(from));
    return from + (index?.[0].length ?? 0);
  }

  /** A run of letters, at most 61 at a time: one name where it is known, else split where a Greek letter begins or ends. */
  private names(start: number): void {
    const run = /^(?:[\p{L}\p{M}ℏ∆℃][\p{L}\p{M}\p{Nd}ℏ∆]{0,60})/u.exec(this.text.slice(start, start + 130))?.[0] ?? '';
    const clean = [...run].filter((character) => !(character in superscriptLetters));
    const length = clean.length === [...run].length ? run.length : [...run].findIndex((c) => c in superscriptLetters);
    const end = this.subscriptEnd(start + Math.max(length, 1));
    const whole = this.text.slice(start, end);
    if (this.options.known(whole) || ![...whole].some(isGreek)) {
      this.name(start, end);
      return;
    }
    for (let from = start; from < end;) {
      const to = this.firstPiece(from, end);
      this.name(from, to);
      from = to;
    }
  }

  private name(start: number, end: number): void {
    this.push('name', this.text.slice(start, end), start, end);
  }

  /** The end of the first name in a run that mixes alphabets: one Greek letter with its marks and index, or the letters before one. */
  private firstPiece(start: number, end: number): number {
    const characters = [...this.text.slice(start, end)];
    const first = characters[0] ?? '';
    let at = start + first.length;
    for (const character of characters.slice(1)) {
      const belongs = isGreek(first)
        ? /\p{M}/u.test(character) || plainSubscript(character) !== undefined || character === '_'
        : !isGreek(character);
      if (!belongs) break;
      at += character.length;
      if (character === '_') return Math.max(this.subscriptEnd(at - 1), at);
    }
    return at;
  }
}

/** Splits a text into signs. Throws a ReadingProblem at the first that has no meaning. */
export function lex(text: string, options: LexerOptions): readonly Token[] {
  if (text.length > longestAnswer) {
    throw new ReadingProblem(`The answer is longer than ${longestAnswer} characters.`, longestAnswer);
  }
  return new Lexer(text, options).run();
}
