/** Pieces that answers are made of, well placed or not. */
const pieces = [
  '0',
  '1',
  '2',
  '3.14',
  '0.5',
  '1e-3',
  '1,234',
  '1,2,3',
  '12 345',
  '½',
  '1½',
  '⅞',
  '.',
  ',',
  ';',
  ' ',
  '\u2009',
  '\n',
  '+',
  '-',
  '−',
  '*',
  '×',
  '·',
  '/',
  '÷',
  '^',
  '**',
  '⁻¹',
  '²',
  '⁽',
  'ⁿ',
  '!',
  '!!',
  '%',
  '(',
  ')',
  '[',
  ']',
  '{',
  '}',
  '|',
  '⟩',
  '>',
  '<',
  '⟨',
  '=',
  '≈',
  '±',
  '√',
  '∞',
  'pi',
  'π',
  'e',
  'i',
  'j',
  'x',
  'X',
  'sqrt',
  'sqrt(',
  'exp(',
  'ln(',
  'log10(',
  'cos(',
  'sinh(',
  'gamma(',
  'abs(',
  'atanh(',
  '\\frac',
  '\\frac{1}{2}',
  '\\sqrt',
  '\\sqrt[3]{',
  '\\kappa',
  '\\alpha',
  '\\bar{n}',
  '\\left(',
  '\\right)',
  '\\times',
  '\\,',
  '\\',
  '\\rangle',
  '\\ket{0}',
  '\\mu',
  '\\begin{pmatrix}',
  '\\\\',
  '&',
  'κ',
  'ω',
  'n̄',
  'α',
  'nbar',
  'kappa',
  'G',
  'T_1',
  'ħ',
  'MHz',
  's',
  'm',
  's^-1',
  '1/s',
  'rad/s',
  'µs',
  'us',
  'nm',
  '°',
  '°C',
  'dB',
  'Å',
  'eV',
  'Hz',
  'k',
  'coherent(',
  'cat(',
  'ket(1,0)',
  '|0>',
  '|1,0⟩',
  '|02>',
  'P = ',
  'x = ',
  'a',
  'b',
  'C',
  '(a)',
  '$',
  '\u200b',
  '\u0304',
  '😀',
  '\ud800',
  'NaN',
  'Infinity',
  '__proto__',
  'constructor',
  'toString',
  '1e999',
  '1e-999',
  '9999999999',
  '170!',
  '-0',
  '0.000 001',
  '10^',
  '²³',
  'e^',
  '2^3^2',
  '0/0',
  'x 10^-3',
] as const;

const seeds = [
  '4.98×10^-2',
  '7.65e6 1/s',
  '1 234.5',
  '-i/sqrt(2)',
  '2 e^{i pi/4}',
  '[0.1, 0.2, 0.7]',
  '0.1; 0.2; 0.7',
  '0.625, -0.375i; 0.375i, 0.375',
  '(|0> - i|2>)/sqrt(2)',
  '1/√2 (|0⟩+|1⟩)',
  'coherent(2) + coherent(-2)',
  'α e^{-(κ/2 + i ω) t}',
  'G/(G+2(G-1))',
  'e^(-nbar) nbar^n / n!',
  '\\frac{1}{\\sqrt{2}}\\left(|0\\rangle + |1\\rangle\\right)',
  '3 MHz',
  '2 rad/µs',
  '35%',
  'P = 0.35',
  'a, c',
  '\\begin{pmatrix} 1 & 2 \\\\ 3 & 4 \\end{pmatrix}',
] as const;

/** Uniform numbers in [0, 1) from a seed (xorshift32). */
export function seeded(seed: number): () => number {
  let state = seed >>> 0 || 1;
  return () => {
    state ^= state << 13;
    state >>>= 0;
    state ^= state >>> 17;
    state ^= state << 5;
    state >>>= 0;
    return state / 4294967296;
  };
}

const pick = <T>(list: readonly T[], next: () => number): T => {
  const item = list[Math.floor(next() * list.length)];
  if (item === undefined) throw new RangeError('Nothing to pick from.');
  return item;
};

function assembled(next: () => number): string {
  const length = 1 + Math.floor(next() * 14);
  return Array.from({ length }, () => pick(pieces, next)).join(next() < 0.3 ? ' ' : '');
}

function mutated(next: () => number): string {
  const text = pick(seeds, next);
  const at = Math.floor(next() * (text.length + 1));
  const choice = next();
  if (choice < 0.3) return text.slice(0, at) + text.slice(at + 1);
  if (choice < 0.7) return text.slice(0, at) + pick(pieces, next) + text.slice(at);
  if (choice < 0.85) return text.slice(0, at) + text.slice(at).split('').reverse().join('');
  return text + pick(seeds, next);
}

function noise(next: () => number): string {
  const length = Math.floor(next() * 24);
  return Array.from({ length }, () => String.fromCodePoint(32 + Math.floor(next() * (next() < 0.8 ? 95 : 9000)))).join(
    '',
  );
}

/** Something much too long or too deep, now and then. */
function extreme(next: () => number): string {
  const piece = pick(pieces, next);
  return piece.repeat(1 + Math.floor(next() * (next() < 0.5 ? 60 : 2500 / piece.length)));
}

/** A random text of the kind that ends up in an answer field, or should not. */
export function randomAnswer(next: () => number): string {
  const choice = next();
  if (choice < 0.45) return assembled(next);
  if (choice < 0.9) return mutated(next);
  return choice < 0.97 ? noise(next) : extreme(next);
}
