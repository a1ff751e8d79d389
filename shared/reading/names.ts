/** Greek letters, as characters, with their Latin names. */
const greekLetters: Readonly<Record<string, string>> = {
  α: 'alpha',
  β: 'beta',
  γ: 'gamma',
  δ: 'delta',
  ε: 'epsilon',
  ϵ: 'epsilon',
  ζ: 'zeta',
  η: 'eta',
  θ: 'theta',
  ϑ: 'theta',
  ι: 'iota',
  κ: 'kappa',
  ϰ: 'kappa',
  λ: 'lambda',
  μ: 'mu',
  µ: 'mu',
  ν: 'nu',
  ξ: 'xi',
  ο: 'omicron',
  π: 'pi',
  ϖ: 'pi',
  ρ: 'rho',
  ϱ: 'rho',
  σ: 'sigma',
  ς: 'sigma',
  τ: 'tau',
  υ: 'upsilon',
  φ: 'phi',
  ϕ: 'phi',
  χ: 'chi',
  ψ: 'psi',
  ω: 'omega',
  Γ: 'Gamma',
  Δ: 'Delta',
  '∆': 'Delta',
  Θ: 'Theta',
  Λ: 'Lambda',
  Ξ: 'Xi',
  Π: 'Pi',
  Σ: 'Sigma',
  Υ: 'Upsilon',
  Φ: 'Phi',
  Ψ: 'Psi',
  Ω: 'Omega',
  '\u2126': 'Omega',
  ħ: 'hbar',
  ℏ: 'hbar',
  ℓ: 'ell',
};

const latinNames = new Set(Object.values(greekLetters));
const variants: Readonly<Record<string, string>> = {
  varepsilon: 'epsilon',
  vartheta: 'theta',
  varkappa: 'kappa',
  varpi: 'pi',
  varrho: 'rho',
  varsigma: 'sigma',
  varphi: 'phi',
};

const subscripts = '₀₁₂₃₄₅₆₇₈₉';
const subscriptLetters: Readonly<Record<string, string>> = {
  ₐ: 'a',
  ₑ: 'e',
  ₕ: 'h',
  ᵢ: 'i',
  ⱼ: 'j',
  ₖ: 'k',
  ₗ: 'l',
  ₘ: 'm',
  ₙ: 'n',
  ₒ: 'o',
  ₚ: 'p',
  ᵣ: 'r',
  ₛ: 's',
  ₜ: 't',
  ₓ: 'x',
};

/** Whether the character is a Greek letter that names a quantity by itself. */
export const isGreek = (character: string): boolean => character in greekLetters;

/** The Latin name of a Greek command such as `kappa` or `varphi`, or undefined. */
export function greekCommand(command: string): string | undefined {
  if (command in variants) return variants[command];
  return latinNames.has(command) ? command : undefined;
}

/** The digit or letter that a subscript character stands for, or undefined. */
export function plainSubscript(character: string): string | undefined {
  const digit = subscripts.indexOf(character);
  return digit >= 0 ? String(digit) : subscriptLetters[character];
}

/**
 * One spelling for all the ways to write a name: Greek letters become Latin names, a bar becomes `bar`, subscripts move
 * onto the line. `κ_0`, `κ₀`, `\kappa_{0}` and `kappa0` are the same.
 */
export function canonicalName(text: string): string {
  let result = '';
  const plain = text.replace(/\\var(?=epsilon|theta|kappa|pi|rho|sigma|phi)/g, '');
  for (const character of plain.normalize('NFD')) {
    if (character in greekLetters) result += greekLetters[character] ?? '';
    else if (character === '\u0304' || character === '\u0305') result += 'bar';
    else if (character === '\u0302') result += 'hat';
    else if (character === '\u0303') result += 'tilde';
    else if (!/[\s_{}\\]/u.test(character)) result += plainSubscript(character) ?? character;
  }
  return result;
}

/** KaTeX source for a name that has no symbol of its own: Greek letters as such, a bar or index where the name ends in one. */
export function texName(name: string): string {
  const match = /^(.*?)(bar|hat|tilde)?_?(\d*)$/.exec(name);
  const [, stem = name, accent, index] = match ?? [];
  const base = stem.length === 1 ? stem : latinNames.has(stem) ? (stem === 'omicron' ? 'o' : `\\${stem}`) : '';
  if (base === '') return `\\mathrm{${name.replace(/_/g, '\\_')}}`;
  const accented = accent ? `\\${accent}{${base}}` : base;
  return index ? `${accented}_{${index}}` : accented;
}
