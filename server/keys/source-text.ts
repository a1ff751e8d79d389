/** A range of characters, from 0. */
export interface Place {
  readonly position: number;
  readonly length: number;
}

interface Token {
  readonly kind: 'name' | 'number' | 'sign';
  readonly text: string;
  readonly position: number;
}

/** Words that the parser takes as operators or constants, not as names. */
const words = new Set(['mod', 'to', 'in', 'and', 'or', 'xor', 'not', 'true', 'false', 'null', 'undefined', 'end']);
const lexer = /\s+|((?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?)|([\p{L}_$][\p{L}\p{N}_$]*)|(.)/gsu;

/**
 * The text of an expression, cut into tokens, so that errors can say where. The parser of the mathematics library keeps
 * no positions; but it reads from left to right, so its names come in the order of the names in the text.
 */
export class SourceText {
  private readonly tokens: readonly Token[];
  private readonly names: readonly Token[];

  constructor(readonly text: string) {
    const tokens: Token[] = [];
    for (const match of text.matchAll(lexer)) {
      const [whole, number, name, sign] = match;
      const position = match.index;
      if (number !== undefined) tokens.push({ kind: 'number', text: whole, position });
      else if (name !== undefined) tokens.push({ kind: 'name', text: whole, position });
      else if (sign !== undefined) tokens.push({ kind: 'sign', text: whole, position });
    }
    this.tokens = tokens;
    this.names = tokens.filter((token) => token.kind === 'name' && !words.has(token.text) && !isNumberWord(token.text));
  }

  /** The place of the whole text. */
  get whole(): Place {
    return { position: 0, length: this.text.length };
  }

  /** The place of the nth name that is no operator, from 0; the whole text where it cannot be told. */
  nameAt(index: number, expected: string): Place {
    const token = this.names[index];
    if (token?.text !== expected) return this.whole;
    return { position: token.position, length: token.text.length };
  }

  /** The places of the arguments of a call whose name stands at a place. */
  argumentsAfter(name: Place): readonly Place[] {
    const at = this.tokens.findIndex((token) => token.position === name.position);
    if (at < 0 || this.tokens[at + 1]?.text !== '(') return [];
    const places: Place[] = [];
    let depth = 0;
    let first: Token | null = null;
    let last: Token | null = null;
    for (const token of this.tokens.slice(at + 1)) {
      if ('([{'.includes(token.text)) depth += 1;
      if (')]}'.includes(token.text)) depth -= 1;
      const ends = depth === 0 || (depth === 1 && token.text === ',');
      if (ends) {
        if (first && last)
          places.push({ position: first.position, length: last.position + last.text.length - first.position });
        first = null;
        last = null;
        if (depth === 0) return places;
        continue;
      }
      if (
        depth === 1 &&
        token.text === '(' &&
        !first &&
        places.length === 0 &&
        token.position === this.tokens[at + 1]?.position
      )
        continue;
      first ??= token;
      last = token;
    }
    return places;
  }

  /** How deeply brackets are nested at most. */
  get depth(): number {
    let depth = 0;
    let most = 0;
    for (const token of this.tokens) {
      if ('([{'.includes(token.text)) most = Math.max(most, (depth += 1));
      else if (')]}'.includes(token.text)) depth -= 1;
    }
    return most;
  }
}

function isNumberWord(text: string): boolean {
  return text === 'NaN' || text === 'Infinity';
}
