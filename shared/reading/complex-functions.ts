import {
  add,
  argument,
  conjugate,
  divide,
  exp,
  imaginaryUnit,
  ln,
  modulus,
  multiply,
  negate,
  one,
  power,
  real,
  sqrt,
  subtract,
  type Complex,
} from './complex';

const half = real(0.5);
const minusI: Complex = { re: 0, im: -1 };

function sin(a: Complex): Complex {
  if (a.im === 0) return real(Math.sin(a.re));
  return { re: Math.sin(a.re) * Math.cosh(a.im), im: Math.cos(a.re) * Math.sinh(a.im) };
}

function cos(a: Complex): Complex {
  if (a.im === 0) return real(Math.cos(a.re));
  return { re: Math.cos(a.re) * Math.cosh(a.im), im: -Math.sin(a.re) * Math.sinh(a.im) };
}

function sinh(a: Complex): Complex {
  if (a.im === 0) return real(Math.sinh(a.re));
  return { re: Math.sinh(a.re) * Math.cos(a.im), im: Math.cosh(a.re) * Math.sin(a.im) };
}

function cosh(a: Complex): Complex {
  if (a.im === 0) return real(Math.cosh(a.re));
  return { re: Math.cosh(a.re) * Math.cos(a.im), im: Math.sinh(a.re) * Math.sin(a.im) };
}

function tanh(a: Complex): Complex {
  if (a.im === 0) return real(Math.tanh(a.re));
  if (Math.abs(a.re) > 20)
    return { re: Math.sign(a.re), im: 4 * Math.sin(a.im) * Math.cos(a.im) * Math.exp(-2 * Math.abs(a.re)) };
  return divide(sinh(a), cosh(a));
}

function tan(a: Complex): Complex {
  if (a.im === 0) return real(Math.tan(a.re));
  return multiply(minusI, tanh(multiply(imaginaryUnit, a)));
}

function asin(a: Complex): Complex {
  if (a.im === 0 && Math.abs(a.re) <= 1) return real(Math.asin(a.re));
  return multiply(minusI, ln(add(multiply(imaginaryUnit, a), sqrt(subtract(one, multiply(a, a))))));
}

function acos(a: Complex): Complex {
  if (a.im === 0 && Math.abs(a.re) <= 1) return real(Math.acos(a.re));
  return subtract(real(Math.PI / 2), asin(a));
}

function atan(a: Complex): Complex {
  if (a.im === 0) return real(Math.atan(a.re));
  const ia = multiply(imaginaryUnit, a);
  return multiply({ re: 0, im: 0.5 }, subtract(ln(subtract(one, ia)), ln(add(one, ia))));
}

function asinh(a: Complex): Complex {
  if (a.im === 0) return real(Math.asinh(a.re));
  return ln(add(a, sqrt(add(multiply(a, a), one))));
}

function acosh(a: Complex): Complex {
  if (a.im === 0 && a.re >= 1) return real(Math.acosh(a.re));
  return ln(add(a, multiply(sqrt(add(a, one)), sqrt(subtract(a, one)))));
}

function atanh(a: Complex): Complex {
  if (a.im === 0 && Math.abs(a.re) < 1) return real(Math.atanh(a.re));
  return multiply(half, subtract(ln(add(one, a)), ln(subtract(one, a))));
}

// Coefficients of the Lanczos approximation with g = 7, n = 9 (from memory; the spec compares with factorials).
const lanczos = [
  0.99999999999980993, 676.5203681218851, -1259.1392167224028, 771.32342877765313, -176.61502916214059,
  12.507343278686905, -0.13857109526572012, 9.9843695780195716e-6, 1.5056327351493116e-7,
];

/**
 * Γ(z). Whole numbers give exact factorials; elsewhere relative accuracy about 1e-13. At the poles 0, −1, −2 … it is NaN.
 */
export function gamma(a: Complex): Complex {
  if (a.im === 0 && Number.isInteger(a.re)) {
    if (a.re <= 0) return real(NaN);
    if (a.re > 171) return real(Infinity);
    let product = 1;
    for (let factor = 2; factor < a.re; factor += 1) product *= factor;
    return real(product);
  }
  if (a.re < 0.5) {
    return divide(real(Math.PI), multiply(sin(multiply(real(Math.PI), a)), gamma(subtract(one, a))));
  }
  const z = subtract(a, one);
  const series = lanczos
    .slice(1)
    .reduce<Complex>(
      (sum, coefficient, index) => add(sum, divide(real(coefficient), add(z, real(index + 1)))),
      real(lanczos[0] ?? 1),
    );
  const shifted = add(z, real(7.5));
  // The power is split in two, so that Γ(170.5) does not overflow on the way.
  const halfPower = power(shifted, multiply(half, add(z, half)));
  return multiply(
    multiply(real(Math.sqrt(2 * Math.PI)), halfPower),
    multiply(multiply(halfPower, exp(negate(shifted))), series),
  );
}

/** n! = Γ(n + 1). */
export const factorial = (a: Complex): Complex => gamma(add(a, one));

const reciprocalOf = (f: (a: Complex) => Complex) => (a: Complex) => divide(one, f(a));

/** The functions of one argument that an answer may use, under every accepted spelling. */
export const answerFunctions: ReadonlyMap<string, (a: Complex) => Complex> = new Map<string, (a: Complex) => Complex>([
  ['sqrt', sqrt],
  ['exp', exp],
  ['ln', ln],
  ['log', ln],
  ['log10', (a) => (a.im === 0 && a.re >= 0 ? real(Math.log10(a.re)) : divide(ln(a), real(Math.LN10)))],
  ['lg', (a) => (a.im === 0 && a.re >= 0 ? real(Math.log10(a.re)) : divide(ln(a), real(Math.LN10)))],
  ['log2', (a) => (a.im === 0 && a.re >= 0 ? real(Math.log2(a.re)) : divide(ln(a), real(Math.LN2)))],
  ['sin', sin],
  ['cos', cos],
  ['tan', tan],
  ['sec', reciprocalOf(cos)],
  ['csc', reciprocalOf(sin)],
  ['cot', reciprocalOf(tan)],
  ['asin', asin],
  ['acos', acos],
  ['atan', atan],
  ['arcsin', asin],
  ['arccos', acos],
  ['arctan', atan],
  ['sinh', sinh],
  ['cosh', cosh],
  ['tanh', tanh],
  ['sech', reciprocalOf(cosh)],
  ['csch', reciprocalOf(sinh)],
  ['coth', reciprocalOf(tanh)],
  ['asinh', asinh],
  ['acosh', acosh],
  ['atanh', atanh],
  ['arsinh', asinh],
  ['arcosh', acosh],
  ['artanh', atanh],
  ['arcsinh', asinh],
  ['arccosh', acosh],
  ['arctanh', atanh],
  ['abs', (a) => real(modulus(a))],
  ['arg', (a) => real(argument(a))],
  ['re', (a) => real(a.re)],
  ['im', (a) => real(a.im)],
  ['conj', conjugate],
  ['gamma', gamma],
  ['factorial', factorial],
]);
