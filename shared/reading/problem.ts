/** Why a text cannot be read, in a sentence for the student, with the place: thrown inside the reader, never out of it. */
export class ReadingProblem extends Error {
  /** Offset of the character in the text as typed, from 0. */
  readonly at: number | undefined;

  constructor(sentence: string, at?: number) {
    super(sentence);
    this.name = 'ReadingProblem';
    this.at = at;
  }
}

/** A number whose comma could be a decimal comma or group thousands: the student decides. */
export class AmbiguousComma extends Error {
  constructor(
    /** Offset of the first character of the number. */
    readonly start: number,
    /** The number as typed. */
    readonly typed: string,
  ) {
    super(`${typed} can be read in two ways.`);
    this.name = 'AmbiguousComma';
  }
}

/** A piece of the student's text for use in a sentence, shortened. */
export function quote(text: string): string {
  const characters = [...text.trim()];
  return characters.length > 24 ? `“${characters.slice(0, 22).join('')}…”` : `“${characters.join('')}”`;
}
