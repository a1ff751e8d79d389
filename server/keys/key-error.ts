/** Where and why an expression has no value; plain, so that it can cross threads and be sent to an editor. */
export interface KeyFault {
  /** A sentence for the author. */
  readonly message: string;
  /** The function that refused, where one did. */
  readonly functionName?: string;
  /** Its argument, where one is at fault. */
  readonly argument?: string;
  /** The first character at fault, from 0. */
  readonly position?: number;
  /** How many characters are at fault. */
  readonly length?: number;
}

/** An expression that has no value. The message ends with the place, counted from 1 as people count. */
export class KeyError extends Error {
  constructor(
    readonly sentence: string,
    readonly place: { readonly position: number; readonly length: number } | null,
    readonly detail: { readonly functionName?: string | undefined; readonly argument?: string | undefined } = {},
  ) {
    super(place ? `${sentence} (at character ${String(place.position + 1)})` : sentence);
    this.name = 'KeyError';
  }

  /** The same as plain data. */
  toFault(): KeyFault {
    return {
      message: this.message,
      ...(this.detail.functionName === undefined ? {} : { functionName: this.detail.functionName }),
      ...(this.detail.argument === undefined ? {} : { argument: this.detail.argument }),
      ...(this.place ?? {}),
    };
  }
}
