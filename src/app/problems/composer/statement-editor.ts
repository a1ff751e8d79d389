import {
  ChangeDetectionStrategy,
  Component,
  CSP_NONCE,
  DestroyRef,
  type ElementRef,
  afterNextRender,
  effect,
  inject,
  input,
  output,
  viewChild,
} from '@angular/core';
import {
  autocompletion,
  completionKeymap,
  type CompletionContext,
  type CompletionResult,
} from '@codemirror/autocomplete';
import { defaultKeymap, history, historyKeymap } from '@codemirror/commands';
import { markdown } from '@codemirror/lang-markdown';
import { HighlightStyle, syntaxHighlighting } from '@codemirror/language';
import { setDiagnostics, type Diagnostic } from '@codemirror/lint';
import { Compartment, EditorState, Facet, RangeSetBuilder } from '@codemirror/state';
import {
  Decoration,
  EditorView,
  MatchDecorator,
  ViewPlugin,
  highlightActiveLineGutter,
  keymap,
  lineNumbers,
  placeholder,
  type ViewUpdate,
} from '@codemirror/view';
import { tags } from '@lezer/highlight';
import { editorLook } from './editor-look';
import type { ExpressionFault } from './expression-editor';
import type { NotedLine } from './review/comment-words';

/** A given as the statement's editor offers it. */
export interface NamedGiven {
  readonly name: string;
  /** For example `2.0 to 8.0`. */
  readonly detail: string;
}

const givensInForce = Facet.define<readonly NamedGiven[], readonly NamedGiven[]>({
  combine: (values) => values[0] ?? [],
});

const marks = {
  given: Decoration.mark({ class: 'cm-given' }),
  unknown: Decoration.mark({ class: 'cm-given cm-unknown' }),
  opening: Decoration.mark({ class: 'cm-opening' }),
};

const finder = new MatchDecorator({
  regexp: /\\val\{([^{}]*)\}|^\s*\([a-z]\)(?=\s|$)/gm,
  decoration: ([, name], view) => {
    if (name === undefined) return marks.opening;
    return view.state.facet(givensInForce).some((given) => given.name === name.trim()) ? marks.given : marks.unknown;
  },
});

const colours = ViewPlugin.define(
  (view) => ({
    found: finder.createDeco(view),
    update(update: ViewUpdate) {
      this.found =
        update.startState.facet(givensInForce) === update.state.facet(givensInForce)
          ? finder.updateDeco(update, this.found)
          : finder.createDeco(update.view);
    },
  }),
  { decorations: (plugin) => plugin.found },
);

const markdownLook = HighlightStyle.define([
  { tag: tags.heading, fontWeight: '600' },
  { tag: tags.strong, fontWeight: '600' },
  { tag: tags.emphasis, fontStyle: 'italic' },
  { tag: [tags.processingInstruction, tags.contentSeparator, tags.url], color: 'var(--silver-4)' },
  { tag: tags.link, color: 'var(--line)' },
]);

function completeGiven(context: CompletionContext): CompletionResult | null {
  const begun = context.matchBefore(/\\(?:v(?:a(?:l(?:\{[A-Za-z0-9_]*)?)?)?)?/);
  if (!begun) return null;
  return {
    from: begun.from,
    options: context.state.facet(givensInForce).map(({ name, detail }) => ({
      label: `\\val{${name}}`,
      detail,
      apply: (view, _, from, to) => {
        // A bracket that stands there already is not written twice.
        const end = view.state.sliceDoc(to, to + 1) === '}' ? to + 1 : to;
        const insert = `\\val{${name}}`;
        view.dispatch({ changes: { from, to: end, insert }, selection: { anchor: from + insert.length } });
      },
    })),
    validFor: /^\\[a-z]*\{?[A-Za-z0-9_]*$/,
  };
}

/** Lines that colleagues commented on, with their initials at the right. */
function noteLines(state: EditorState, lines: readonly NotedLine[]) {
  const builder = new RangeSetBuilder<Decoration>();
  for (const { line, initials, isShown } of lines) {
    if (line > state.doc.lines) continue;
    const attributes = { 'data-by': initials };
    const { from } = state.doc.line(line);
    builder.add(from, from, Decoration.line({ class: isShown ? 'cm-noted cm-noted-shown' : 'cm-noted', attributes }));
  }
  return EditorView.decorations.of(builder.finish());
}

/** The editor of a statement: Markdown with numbered lines; `\val{name}` in colour and completed. */
@Component({
  selector: 'app-statement-editor',
  template: '<div #box></div>',
  styleUrl: './statement-editor.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class StatementEditor {
  private readonly nonce = inject(CSP_NONCE, { optional: true });
  private readonly box = viewChild.required<ElementRef<HTMLElement>>('box');
  private readonly namesInForce = new Compartment();
  private readonly editable = new Compartment();
  private readonly notes = new Compartment();
  private view: EditorView | null = null;

  readonly value = input.required<string>();
  readonly givens = input.required<readonly NamedGiven[]>();
  readonly faults = input<readonly ExpressionFault[]>([]);
  readonly disabled = input(false);
  /** Lines with comments, in their order. */
  readonly noted = input<readonly NotedLine[]>([]);
  /** The element that says what is wrong with the statement. */
  readonly describedBy = input('');
  readonly valueChange = output<string>();
  /** The line that the cursor came to, from 1. */
  readonly lineChange = output<number>();

  constructor() {
    afterNextRender(() => {
      const view = this.createView();
      this.view = view;
      view.dispatch({ effects: this.notes.reconfigure(noteLines(view.state, this.noted())) });
      this.showFaults();
    });
    effect(() => {
      const value = this.value();
      const present = this.view?.state.doc.toString();
      if (present !== undefined && present !== value)
        this.view?.dispatch({ changes: { from: 0, to: present.length, insert: value } });
    });
    effect(() => {
      const givens = this.givens();
      this.view?.dispatch({ effects: this.namesInForce.reconfigure(givensInForce.of(givens)) });
    });
    effect(() => {
      const editable = !this.disabled();
      this.view?.dispatch({ effects: this.editable.reconfigure(EditorView.editable.of(editable)) });
    });
    effect(() => {
      const noted = this.noted();
      const view = this.view;
      view?.dispatch({ effects: this.notes.reconfigure(noteLines(view.state, noted)) });
    });
    effect(() => {
      this.faults();
      this.showFaults();
    });
    inject(DestroyRef).onDestroy(() => this.view?.destroy());
  }

  /** Puts the cursor into the text. */
  focus(): void {
    this.view?.focus();
  }

  /** Puts the cursor at a line (from 1) and brings it into sight. */
  showLine(line: number): void {
    const view = this.view;
    if (!view) return;
    const { from } = view.state.doc.line(Math.max(1, Math.min(line, view.state.doc.lines)));
    view.dispatch({ selection: { anchor: from }, effects: EditorView.scrollIntoView(from, { y: 'center' }) });
    view.focus();
  }

  private createView(): EditorView {
    return new EditorView({
      parent: this.box().nativeElement,
      state: EditorState.create({
        doc: this.value(),
        extensions: [
          editorLook(this.nonce),
          lineNumbers(),
          highlightActiveLineGutter(),
          markdown(),
          syntaxHighlighting(markdownLook),
          this.namesInForce.of(givensInForce.of(this.givens())),
          this.editable.of(EditorView.editable.of(!this.disabled())),
          colours,
          this.notes.of([]),
          autocompletion({ override: [completeGiven], icons: false }),
          history(),
          EditorView.lineWrapping,
          placeholder('What students read. Each line that begins with (a), (b) … opens that part.'),
          EditorView.contentAttributes.of({
            'aria-label': 'Statement',
            spellcheck: 'true',
            ...(this.describedBy() ? { 'aria-describedby': this.describedBy() } : {}),
          }),
          keymap.of([...completionKeymap, ...defaultKeymap, ...historyKeymap]),
          EditorView.updateListener.of((update) => {
            if (update.docChanged) this.valueChange.emit(update.state.doc.toString());
            if (update.selectionSet)
              this.lineChange.emit(update.state.doc.lineAt(update.state.selection.main.head).number);
          }),
        ],
      }),
    });
  }

  private showFaults(): void {
    const view = this.view;
    if (!view) return;
    const length = view.state.doc.length;
    const diagnostics: Diagnostic[] = this.faults().flatMap(({ message, position, length: span }) => {
      if (position === undefined || position > length) return [];
      return [{ from: position, to: Math.min(length, position + (span ?? 1)), severity: 'error' as const, message }];
    });
    view.dispatch(setDiagnostics(view.state, diagnostics));
  }
}
