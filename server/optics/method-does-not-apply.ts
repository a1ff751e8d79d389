/** Thrown inside one method where it does not apply; the others go on. The message is the reason that authors see. */
export class MethodDoesNotApply extends Error {
  constructor(reason: string) {
    super(reason);
    this.name = 'MethodDoesNotApply';
  }
}

/** Thrown where a state cannot be normalised: it vanishes, or its condition never happens. */
export class StateVanishes extends MethodDoesNotApply {
  constructor(reason: string) {
    super(reason);
    this.name = 'StateVanishes';
  }
}
