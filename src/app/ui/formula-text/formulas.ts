import katex, { ParseError } from 'katex';

/** A formula set once, kept to be copied. */
interface SetFormula {
  readonly node: HTMLElement;
  /** What is wrong with it, in KaTeX's words. */
  readonly problem?: string;
}

/** Formulas kept, most recently used last. */
const kept = new Map<string, SetFormula>();
const keptAtMost = 2000;
const longestFormula = 4000;

/**
 * Typesets a formula into an element of its own. Formulas are kept, so that a statement that changes by a letter sets only
 * the formula with that letter anew. Links, classes and styles inside formulas are refused, expansion and sizes are bounded.
 */
export function setFormula(
  source: string,
  display: boolean,
): { readonly element: HTMLElement; readonly problem?: string } {
  const key = `${display ? 'd' : 'i'}${source}`;
  let found = kept.get(key);
  if (found) {
    kept.delete(key);
  } else {
    found = typeset(source, display);
    if (kept.size >= keptAtMost) {
      const oldest = kept.keys().next().value;
      if (oldest !== undefined) kept.delete(oldest);
    }
  }
  kept.set(key, found);
  const element = found.node.cloneNode(true) as HTMLElement;
  return found.problem === undefined ? { element } : { element, problem: found.problem };
}

function typeset(source: string, display: boolean): SetFormula {
  const node = document.createElement('span');
  node.className = display ? 'formula display' : 'formula';
  if (source.length > longestFormula) {
    return { node: asWritten(node, source), problem: `The formula is longer than ${longestFormula} characters.` };
  }
  try {
    katex.render(source, node, {
      displayMode: display,
      throwOnError: true,
      trust: false,
      strict: 'ignore',
      maxExpand: 300,
      maxSize: 12,
    });
    return { node };
  } catch (error) {
    if (error instanceof RangeError)
      return { node: asWritten(node, source), problem: 'The formula is nested too deeply.' };
    if (!(error instanceof ParseError)) throw error;
    return { node: asWritten(node, source), problem: error.rawMessage };
  }
}

/** A formula that cannot be read stands as it was written. KaTeX's own way to show it sets a style that the page refuses. */
function asWritten(node: HTMLElement, source: string): HTMLElement {
  node.className = 'formula-wrong';
  node.textContent = source.length > 80 ? `${source.slice(0, 80)}…` : source;
  return node;
}
