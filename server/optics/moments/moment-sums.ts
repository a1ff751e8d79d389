import { abs, complex, multiply, times, type Complex } from '../complex';
import { StateVanishes } from '../method-does-not-apply';
import type { Moment } from './moment-figures';

const EPS = 2 ** -52;

/** Adds up weighted moments with their errors. */
export class Sum {
  private re = 0;
  private im = 0;
  private error = 0;

  add(factor: Complex, moment: Moment): void {
    const { value, error } = moment;
    this.re += factor.re * value.re - factor.im * value.im;
    this.im += factor.re * value.im + factor.im * value.re;
    const size = abs(factor);
    this.error += size * error + 3 * EPS * size * abs(value);
  }

  get moment(): Moment {
    return { value: { re: this.re, im: this.im }, error: this.error };
  }
}

/** ⟨a₁†ᵖ a₁^q a₂†ʳ a₂ˢ⟩ as it is worked out, not yet remembered. */
export type Raw = (p: number, q: number, r: number, s: number) => Moment;

/** A moment from a closed form. */
export const exact = (value: Complex): Moment => ({ value, error: 4 * EPS * abs(value) });

/** A power with a whole exponent from 0. */
export function power(base: Complex, exponent: number): Complex {
  let result = complex(1);
  for (let k = 0; k < exponent; k++) result = multiply(result, base);
  return result;
}

/** A moment times a factor. */
export function scaled({ value, error }: Moment, factor: Complex): Moment {
  const size = abs(factor);
  return { value: multiply(value, factor), error: error * size + 3 * EPS * size * abs(value) };
}

/** A moment divided by a norm. @throws StateVanishes where the norm is rounding */
export function quotient(top: Moment, bottom: Moment): Moment {
  if (!(bottom.value.re > 16 * bottom.error)) {
    throw new StateVanishes('the state that is left has no weight to rounding');
  }
  const value = times(top.value, 1 / bottom.value.re);
  return { value, error: (top.error + abs(value) * bottom.error) / bottom.value.re + 2 * EPS * abs(value) };
}
