/** What an `OpticsError` knows besides its sentence. */
export interface OpticsErrorDetail {
  readonly functionName: string;
  /** The argument's word in the sentence, such as "transmissivity". */
  readonly argument?: string;
  /** Position of the argument in the call, from 0. */
  readonly argumentIndex?: number;
  readonly given?: unknown;
  readonly allowed?: string;
}

/** An argument outside its range, or a figure that is not defined: a sentence that an author can act on. */
export class OpticsError extends Error {
  readonly functionName: string;
  readonly argument: string | undefined;
  readonly argumentIndex: number | undefined;
  readonly given: unknown;
  readonly allowed: string | undefined;

  constructor(message: string, detail: OpticsErrorDetail) {
    super(`\`${detail.functionName}\`: ${message}`);
    this.name = 'OpticsError';
    this.functionName = detail.functionName;
    this.argument = detail.argument;
    this.argumentIndex = detail.argumentIndex;
    this.given = detail.given;
    this.allowed = detail.allowed;
  }
}
