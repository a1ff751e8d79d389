import DOMPurify from 'dompurify';
import { Marked, type Token, type TokenizerAndRendererExtension, type Tokens } from 'marked';
import { splitStatement } from '@shared/statement';

/** Where a figure named in the text is to be fetched, by its name. */
export type Figures = Readonly<Record<string, string>>;

/** A piece of Markdown that renders on its own, with its source for comparison. */
export interface Block {
  readonly source: string;
  readonly render: (figures: Figures) => DocumentFragment;
}

interface Formula extends Tokens.Generic {
  readonly source: string;
  readonly display: boolean;
}

// A dollar that opens is followed by no space, one that closes follows none and precedes no digit: "$5 and $6" are prices.
// No backtick inside either, so that code keeps its dollars.
const inlineFormula = /^\$(?![\s$])((?:\\[\s\S]|[^\\$`])+?)(?<!\s)\$(?!\d)/;
const displayFormula = /^\$\$((?:\\[\s\S]|[^\\$])+?)\$\$/;
const displayBlock = /^ {0,3}\$\$((?:\\[\s\S]|[^\\$])+?)\$\$[ \t]*(?:\n+|$)/;
const givenInText = /^\\val\{([A-Za-z][A-Za-z0-9_]*)\}/;
const anyFormula = /\$\$(?:\\[\s\S]|[^\\$])+?\$\$|\$(?![\s$])(?:\\[\s\S]|[^\\$`])+?(?<!\s)\$(?!\d)/g;

const escapes: Readonly<Record<string, string>> = {
  '&': '&amp;',
  '<': '&lt;',
  '>': '&gt;',
  '"': '&quot;',
  "'": '&#39;',
};

function escapeHtml(text: string): string {
  return text.replace(/[&<>"']/g, (c) => escapes[c] ?? c);
}

function formulaMark({ source, display }: Formula): string {
  return `<span data-formula="${escapeHtml(source)}"${display ? ' data-display="yes"' : ''}></span>`;
}

const extensions: TokenizerAndRendererExtension[] = [
  {
    name: 'formulaBlock',
    level: 'block',
    start: (text) => {
      const at = text.search(/(?:^|\n) {0,3}\$\$/);
      return at < 0 ? undefined : at;
    },
    tokenizer: (text) => {
      const match = displayBlock.exec(text);
      return match ? { type: 'formulaBlock', raw: match[0], source: match[1], display: true } : undefined;
    },
    renderer: (token) => `<div>${formulaMark(token as Formula)}</div>`,
  },
  {
    name: 'formula',
    level: 'inline',
    start: (text) => {
      const at = text.indexOf('$');
      return at < 0 ? undefined : at;
    },
    tokenizer: (text) => {
      const display = displayFormula.exec(text);
      const match = display ?? inlineFormula.exec(text);
      return match ? { type: 'formula', raw: match[0], source: match[1], display: display !== null } : undefined;
    },
    renderer: (token) => formulaMark(token as Formula),
  },
  {
    name: 'given',
    level: 'inline',
    start: (text) => {
      const at = text.indexOf('\\val{');
      return at < 0 ? undefined : at;
    },
    tokenizer: (text) => {
      const match = givenInText.exec(text);
      return match ? { type: 'given', raw: match[0], name: match[1] } : undefined;
    },
    renderer: (token) => `<span data-given="${escapeHtml(String(token['name']))}"></span>`,
  },
];

/** The figures of the block being rendered; rendering is synchronous, so one place is enough. */
let figuresAtHand: Figures = {};

const marked = new Marked(
  { gfm: true, breaks: false },
  {
    extensions,
    hooks: {
      // Signs inside formulas neither open nor close emphasis.
      emStrongMask: (text) => text.replace(anyFormula, (formula) => `[${'a'.repeat(formula.length - 2)}]`),
    },
    tokenizer: {
      // HTML is no part of the language: it is shown as the characters it is.
      html: () => undefined,
      tag: () => undefined,
    },
    renderer: {
      // A heading in a statement is emphasis; the page's outline is the page's own.
      heading(token) {
        return `<p><strong>${this.parser.parseInline(token.tokens)}</strong></p>`;
      },
      link(token) {
        const words = this.parser.parseInline(token.tokens);
        if (!/^(?:https?:\/\/|mailto:)/i.test(token.href)) return words;
        return `<a href="${escapeHtml(token.href)}" target="_blank" rel="noopener noreferrer">${words}</a>`;
      },
      image(token) {
        const address = Object.hasOwn(figuresAtHand, token.href) ? figuresAtHand[token.href] : undefined;
        if (!address) return `<em>${escapeHtml(token.text || token.href)}</em>`;
        return `<img src="${escapeHtml(address)}" alt="${escapeHtml(token.text)}">`;
      },
      checkbox: ({ checked }) => (checked ? '☑ ' : '☐ '),
    },
  },
);

const allowed = {
  ALLOWED_TAGS:
    'a blockquote br code del div em hr img li ol p pre span strong sub sup table tbody td th thead tr ul #text'.split(
      ' ',
    ),
  ALLOWED_ATTR: ['align', 'alt', 'href', 'rel', 'src', 'start', 'target', 'data-formula', 'data-display', 'data-given'],
  ALLOW_DATA_ATTR: false,
  ALLOW_ARIA_ATTR: false,
  RETURN_DOM_FRAGMENT: true,
} as const;

function clean(html: string): DocumentFragment {
  return DOMPurify.sanitize(html, {
    ...allowed,
    ALLOWED_TAGS: [...allowed.ALLOWED_TAGS],
    ALLOWED_ATTR: [...allowed.ALLOWED_ATTR],
  });
}

function render(tokens: Token[], figures: Figures): DocumentFragment {
  figuresAtHand = figures;
  try {
    return clean(marked.parser(tokens));
  } finally {
    figuresAtHand = {};
  }
}

/** Takes Markdown apart into blocks; a line that opens a part begins a paragraph. */
export function readBlocks(text: string): readonly Block[] {
  const { stem, parts } = splitStatement(text);
  const spaced = [stem, ...parts.map((part) => `(${part.label}) ${part.text}`)].join('\n\n');
  return marked
    .lexer(spaced)
    .filter((token) => token.type !== 'space' && token.type !== 'def')
    .map((token) => ({ source: token.raw, render: (figures) => render([token], figures) }));
}

/** Markdown of a few words, without paragraphs. */
export function readLine(text: string): Block {
  const source = text.replace(/\s*\n\s*/g, ' ');
  return {
    source,
    render: (figures) => {
      figuresAtHand = figures;
      try {
        return clean(marked.parseInline(source, { async: false }));
      } finally {
        figuresAtHand = {};
      }
    },
  };
}
