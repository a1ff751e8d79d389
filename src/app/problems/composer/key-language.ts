import {
  autocompletion,
  completionKeymap,
  type Completion,
  type CompletionContext,
  type CompletionResult,
} from '@codemirror/autocomplete';
import { bracketMatching } from '@codemirror/language';
import { Facet, type EditorState, type Extension, StateField } from '@codemirror/state';
import {
  Decoration,
  EditorView,
  MatchDecorator,
  showTooltip,
  ViewPlugin,
  keymap,
  type Tooltip,
  type ViewUpdate,
} from '@codemirror/view';
import type { KeyFunction } from '@shared/key-language';

/** What an expression may name. */
export interface KeyNames {
  /** Givens and the values of earlier parts, each with a word about it. */
  readonly values: readonly { readonly name: string; readonly detail: string }[];
  /** Physical constants. */
  readonly constants?: readonly { readonly name: string; readonly detail: string }[];
  readonly functions: readonly KeyFunction[];
}

/** Sets a formula into nodes; empty while the program for it is on its way. */
export type SetFormula = (source: string) => readonly Node[];

/** How formulas are set in what the editor shows. */
export const formulaSetter = Facet.define<SetFormula, SetFormula>({ combine: (values) => values[0] ?? (() => []) });

/** The names in force in an editor. */
export const keyNames = Facet.define<KeyNames, KeyNames>({
  combine: (values) => values[0] ?? { values: [], functions: [] },
});

/** What the editor of a key expression knows of the language: colours, completion, help with a function's arguments. */
export function keyLanguage(): Extension {
  return [
    colours,
    bracketMatching(),
    autocompletion({ override: [complete], icons: false, activateOnTyping: true }),
    keymap.of(completionKeymap),
    signatureHelp,
  ];
}

const given = Decoration.mark({ class: 'cm-given' });
const number = Decoration.mark({ class: 'cm-number' });

const colourer = new MatchDecorator({
  regexp: /[A-Za-z_][A-Za-z0-9_]*|\d+(?:\.\d*)?(?:[eE][+-]?\d+)?/g,
  decoration: ([word], view) => {
    if (/^\d/.test(word)) return number;
    return view.state.facet(keyNames).values.some((value) => value.name === word) ? given : null;
  },
});

const colours = ViewPlugin.define(
  (view) => ({
    marks: colourer.createDeco(view),
    update(update: ViewUpdate) {
      this.marks =
        update.startState.facet(keyNames) === update.state.facet(keyNames)
          ? colourer.updateDeco(update, this.marks)
          : colourer.createDeco(update.view);
    },
  }),
  { decorations: (plugin) => plugin.marks },
);

function complete(context: CompletionContext): CompletionResult | null {
  const word = context.matchBefore(/[A-Za-z_][A-Za-z0-9_]*/);
  if (!word && !context.explicit) return null;
  const names = context.state.facet(keyNames);
  const options: Completion[] = [
    ...names.values.map(({ name, detail }) => ({ label: name, detail, boost: 2, type: 'variable' })),
    ...(names.constants ?? []).map(({ name, detail }) => ({ label: name, detail, boost: -1, type: 'constant' })),
    ...names.functions.map((each) => {
      const { name, signature } = each;
      return {
        label: name,
        detail: signature.slice(name.length),
        info: () => describeFunction(each, context.state.facet(formulaSetter)),
        type: 'function',
        // The brackets are written too, with the cursor between them where there is something to write.
        apply: (view: EditorView, _: Completion, from: number, to: number) => {
          const isCalled = view.state.sliceDoc(to, to + 1) === '(';
          const isConstant = !signature.includes('(');
          const insert = isCalled || isConstant ? name : `${name}()`;
          const inside = !isCalled && !isConstant && !signature.includes('()') ? 1 : 0;
          view.dispatch({ changes: { from, to, insert }, selection: { anchor: from + insert.length - inside } });
        },
      };
    }),
  ];
  return { from: word?.from ?? context.pos, options, validFor: /^[A-Za-z0-9_]*$/ };
}

/** A call of a function in an expression. */
interface Call {
  readonly name: string;
  /** Which argument the place is in, from 0. */
  readonly argument: number;
  /** Where its name begins. */
  readonly from: number;
}

/** The innermost call around a place in an expression. */
export function callAround(text: string, place: number): Call | null {
  let depth = 0;
  let argument = 0;
  for (let index = place - 1; index >= 0; index--) {
    const character = text[index];
    if (character === ')' || character === ']') depth++;
    else if (character === '[') {
      if (depth === 0) argument = 0;
      else depth--;
    } else if (character === '(') {
      if (depth > 0) {
        depth--;
        continue;
      }
      const name = /[A-Za-z_][A-Za-z0-9_]*$/.exec(text.slice(0, index))?.[0];
      if (name) return { name, argument, from: index - name.length };
      argument = 0;
    } else if (character === ',' && depth === 0) argument++;
  }
  return null;
}

function signatureTooltip(state: EditorState): Tooltip | null {
  const { head, empty } = state.selection.main;
  if (!empty) return null;
  const text = state.doc.toString();
  const { functions } = state.facet(keyNames);
  // Inside `sqrt(…)`, of which there is nothing to say, the call around it is what one wants to know of.
  let call = callAround(text, head);
  while (call && !functions.some((each) => each.name === call?.name && each.summary))
    call = callAround(text, call.from);
  const found = functions.find((each) => each.name === call?.name);
  if (!call || !found) return null;
  const { argument } = call;
  return {
    pos: head,
    above: true,
    create: ({ state: now }) => ({ dom: signatureDom(found, argument, now.facet(formulaSetter)) }),
  };
}

function signatureDom(found: KeyFunction, argument: number, setFormula: SetFormula): HTMLElement {
  const dom = document.createElement('div');
  dom.className = 'cm-signature';
  const [, name = found.name, list = ''] = /^([^(]*)\(([^)]*)\)/.exec(found.signature) ?? [];
  dom.append(`${name}(`);
  for (const [index, each] of list.split(',').entries()) {
    if (index > 0) dom.append(', ');
    const part = document.createElement(index === argument ? 'b' : 'span');
    part.textContent = each.trim();
    dom.append(part);
  }
  dom.append(')');
  const [own] = found.arguments.slice(argument, argument + 1);
  if (own?.domain) {
    const domain = document.createElement('p');
    domain.textContent = `${own.name}: ${own.domain}${own.otherwise === undefined ? '' : `; ${own.otherwise} where left out`}`;
    dom.append(domain);
  }
  dom.append(describeFunction(found, setFormula));
  return dom;
}

/** A function's one line, and its formula. */
function describeFunction({ summary, formula }: KeyFunction, setFormula: SetFormula): HTMLElement {
  const dom = document.createElement('div');
  dom.className = 'cm-described';
  const words = document.createElement('p');
  words.textContent = summary;
  dom.append(words);
  const nodes = formula === '' ? [] : setFormula(formula);
  if (nodes.length > 0) {
    const set = document.createElement('p');
    set.append(...nodes);
    dom.append(set);
  }
  return dom;
}

const signatureHelp: Extension = [
  StateField.define<Tooltip | null>({
    create: () => null,
    update: (tooltip, transaction) =>
      transaction.docChanged || transaction.selection ? signatureTooltip(transaction.state) : tooltip,
    provide: (field) => showTooltip.from(field),
  }),
  // Who leaves the field has no need of help with it.
  EditorView.theme({ '&:not(.cm-focused) .cm-signature': { display: 'none' } }),
];
