import {
  ChangeDetectionStrategy,
  Component,
  CSP_NONCE,
  DestroyRef,
  type ElementRef,
  afterNextRender,
  booleanAttribute,
  effect,
  inject,
  input,
  output,
  viewChild,
} from '@angular/core';
import { defaultKeymap, history, historyKeymap } from '@codemirror/commands';
import { setDiagnostics, type Diagnostic } from '@codemirror/lint';
import { Compartment, EditorState } from '@codemirror/state';
import { EditorView, keymap, placeholder } from '@codemirror/view';
import { editorLook } from './editor-look';
import { Typesetter } from '../../ui/formula-text/typesetter';
import { formulaSetter, keyLanguage, keyNames, type KeyNames } from './key-language';

/** What is wrong with an expression, and at which character. */
export interface ExpressionFault {
  readonly message: string;
  readonly position?: number | undefined;
  readonly length?: number | undefined;
}

let instances = 0;

/** An editor for a key expression: names in colour, completion, help with arguments, errors underlined where they are. */
@Component({
  selector: 'app-expression-editor',
  template: `
    <div class="box" [class.wrong]="faults().length > 0" [class.small]="small()" #box></div>
    @for (fault of faults(); track $index) {
      <p class="fault" [id]="id + '-fault-' + $index">{{ fault.message }}</p>
    }
  `,
  styleUrl: './expression-editor.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class ExpressionEditor {
  private readonly typesetter = inject(Typesetter);
  private readonly nonce = inject(CSP_NONCE, { optional: true });
  private readonly box = viewChild.required<ElementRef<HTMLElement>>('box');
  private readonly namesInForce = new Compartment();
  private readonly editable = new Compartment();
  private readonly attributes = new Compartment();
  private view: EditorView | null = null;

  readonly label = input.required<string>();
  readonly value = input.required<string>();
  readonly names = input.required<KeyNames>();
  readonly faults = input<readonly ExpressionFault[]>([]);
  readonly hint = input('');
  /** Whether it stands in a table. */
  readonly small = input(false, { transform: booleanAttribute });
  readonly disabled = input(false, { transform: booleanAttribute });
  readonly valueChange = output<string>();

  protected readonly id = `expression-${String(++instances)}`;

  constructor() {
    afterNextRender(() => {
      this.view = this.createView();
      this.showFaults();
    });
    effect(() => this.takeValue(this.value()));
    effect(() => {
      const names = this.names();
      this.view?.dispatch({ effects: this.namesInForce.reconfigure(keyNames.of(names)) });
    });
    effect(() => {
      const editable = !this.disabled();
      this.view?.dispatch({ effects: this.editable.reconfigure(EditorView.editable.of(editable)) });
    });
    effect(() => {
      this.faults();
      this.value();
      this.showFaults();
    });
    inject(DestroyRef).onDestroy(() => this.view?.destroy());
  }

  private createView(): EditorView {
    return new EditorView({
      parent: this.box().nativeElement,
      state: EditorState.create({
        doc: this.value(),
        extensions: [
          editorLook(this.nonce),
          this.namesInForce.of(keyNames.of(this.names())),
          this.editable.of(EditorView.editable.of(!this.disabled())),
          this.attributes.of(EditorView.contentAttributes.of(this.contentAttributes())),
          keyLanguage(),
          formulaSetter.of((source) => this.setFormula(source)),
          // Help with a function shows its formula, so the program that sets it comes with the cursor.
          EditorView.focusChangeEffect.of((_, focusing) => {
            if (focusing) this.typesetter.load();
            return null;
          }),
          history(),
          EditorView.lineWrapping,
          placeholder(this.hint()),
          keymap.of([...defaultKeymap.filter((binding) => binding.key !== 'Mod-Enter'), ...historyKeymap]),
          EditorView.updateListener.of((update) => {
            if (update.docChanged) this.valueChange.emit(update.state.doc.toString());
          }),
        ],
      }),
    });
  }

  private setFormula(source: string): readonly Node[] {
    const setting = { givens: {}, showGivens: false, figures: {}, inline: true };
    const blocks = this.typesetter.typesetting()?.typeset(`$${source}$`, setting, []) ?? [];
    return blocks.flatMap(({ nodes }) => nodes);
  }

  private contentAttributes(): Record<string, string> {
    const described = this.faults().map((_, index) => `${this.id}-fault-${String(index)}`);
    return {
      'aria-label': this.label(),
      ...(described.length > 0 ? { 'aria-invalid': 'true', 'aria-describedby': described.join(' ') } : {}),
    };
  }

  /** Takes a value that was not typed here; what was typed here is in the editor already. */
  private takeValue(value: string): void {
    const present = this.view?.state.doc.toString();
    if (present === undefined || present === value) return;
    this.view?.dispatch({ changes: { from: 0, to: present.length, insert: value } });
  }

  private showFaults(): void {
    const view = this.view;
    if (!view) return;
    const length = view.state.doc.length;
    const diagnostics: Diagnostic[] = this.faults().flatMap(({ message, position, length: span }) => {
      if (position === undefined) return [];
      const from = Math.min(position, length);
      return [{ from, to: Math.min(length, from + Math.max(1, span ?? 1)), severity: 'error' as const, message }];
    });
    view.dispatch(setDiagnostics(view.state, diagnostics), {
      effects: this.attributes.reconfigure(EditorView.contentAttributes.of(this.contentAttributes())),
    });
  }
}
