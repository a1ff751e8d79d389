import { setFormula } from './formulas';
import { type Block, type Figures, readBlocks, readLine } from './markdown';
import { givenInFormula, givenInText, type PrintedGivens } from './printed-given';

/** What a text is typeset with. */
export interface Setting {
  readonly givens: PrintedGivens;
  /** Whether what a variant draws is underlined. */
  readonly showGivens: boolean;
  readonly figures: Figures;
  /** Whether the text is a few words within a line. */
  readonly inline: boolean;
}

/** A formula that KaTeX cannot read. */
export interface FormulaProblem {
  readonly formula: string;
  readonly message: string;
}

/** A block as it stands on the page. */
export interface SetBlock {
  readonly key: string;
  readonly nodes: readonly Node[];
  readonly problems: readonly FormulaProblem[];
}

/**
 * Typesets Markdown with formulas into nodes. Blocks that are as they were in `before` keep their nodes, so that typing in a
 * long statement touches one paragraph.
 */
export function typeset(text: string, setting: Setting, before: readonly SetBlock[]): readonly SetBlock[] {
  const reusable = new Map<string, SetBlock[]>();
  for (const block of before) reusable.set(block.key, [...(reusable.get(block.key) ?? []), block]);
  const blocks = setting.inline ? [readLine(text)] : readBlocks(text);
  return blocks.map((block) => {
    const key = keyOf(block, setting);
    return reusable.get(key)?.shift() ?? setBlock(block, key, setting);
  });
}

/** All that a block's nodes depend on. */
function keyOf(block: Block, { givens, showGivens, figures, inline }: Setting): string {
  const named = [...block.source.matchAll(/\\val\{([A-Za-z][A-Za-z0-9_]*)\}/g)].map((match) => {
    const given = ownEntry(givens, match[1] ?? '');
    return given ? `${given.printed} ${given.unit ?? ''}` : '';
  });
  const pictures = block.source.includes('![') ? Object.entries(figures).flat() : [];
  return JSON.stringify([block.source, inline, showGivens && named.length > 0, named, pictures]);
}

function ownEntry<Value>(entries: Readonly<Record<string, Value>>, name: string): Value | undefined {
  return Object.hasOwn(entries, name) ? entries[name] : undefined;
}

function setBlock(block: Block, key: string, setting: Setting): SetBlock {
  const fragment = block.render(setting.figures);
  const problems: FormulaProblem[] = [];
  for (const place of fragment.querySelectorAll('[data-given]')) {
    const name = place.getAttribute('data-given') ?? '';
    const given = ownEntry(setting.givens, name);
    place.removeAttribute('data-given');
    place.textContent = givenInText(name, given);
    markGiven(place, given !== undefined, setting.showGivens);
  }
  for (const place of fragment.querySelectorAll('[data-formula]')) {
    const source = place.getAttribute('data-formula') ?? '';
    const known: boolean[] = [];
    const filled = source.replace(/\\val\{([A-Za-z][A-Za-z0-9_]*)\}/g, (_, name: string) => {
      const given = ownEntry(setting.givens, name);
      known.push(given !== undefined);
      return `{${givenInFormula(name, given)}}`;
    });
    const { element, problem } = setFormula(filled, place.hasAttribute('data-display'));
    if (problem !== undefined) problems.push({ formula: source, message: problem });
    if (known.length > 0) markGiven(element, !known.includes(false), setting.showGivens);
    place.replaceWith(element);
    if (!place.hasAttribute('data-display')) keepWithPunctuation(element);
  }
  return { key, nodes: [...fragment.childNodes], problems };
}

/** Lets no line begin with the comma or full stop that follows a formula. */
function keepWithPunctuation(formula: HTMLElement): void {
  const after = formula.nextSibling;
  const [sign] = /^[.,;:!?)\]’”]+/.exec(after?.textContent ?? '') ?? [];
  if (!sign || !(after instanceof Text)) return;
  const together = formula.ownerDocument.createElement('span');
  together.className = 'together';
  formula.replaceWith(together);
  together.append(formula, sign);
  after.data = after.data.slice(sign.length);
}

function markGiven(element: Element, known: boolean, shown: boolean): void {
  if (!known) element.classList.add('given-unknown');
  else if (shown) element.classList.add('given-shown');
}
