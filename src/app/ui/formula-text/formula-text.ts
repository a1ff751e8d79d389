import {
  ChangeDetectionStrategy,
  Component,
  ElementRef,
  ViewEncapsulation,
  booleanAttribute,
  computed,
  effect,
  inject,
  input,
  output,
} from '@angular/core';
import type { PrintedGivens } from './printed-given';
import type { FormulaProblem, SetBlock } from './typeset';
import { Typesetter } from './typesetter';

/**
 * Markdown with formulas, as statements, criteria, remarks and feedback are written. HTML in it is shown as characters, links
 * lead to the web or to mail only, pictures are those in `figures` only.
 */
@Component({
  selector: 'app-formula-text',
  template: '',
  styleUrl: './formula-text.scss',
  // The text is made of nodes that no template knows, which scoped styles would miss.
  encapsulation: ViewEncapsulation.None,
  changeDetection: ChangeDetectionStrategy.OnPush,
  host: {
    '[class.inline]': 'inline()',
    '[class.pending]': 'pending()',
    '[class.unstyled]': '!typesetter.stylesReady()',
  },
})
export class FormulaText {
  private readonly host = inject<ElementRef<HTMLElement>>(ElementRef);
  protected readonly typesetter = inject(Typesetter);

  /** Markdown. */
  readonly text = input.required<string>();
  /** What `\val{name}` prints. */
  readonly givens = input<PrintedGivens>({});
  /** Whether what is drawn is underlined, for those who write problems. */
  readonly showGivens = input(false, { transform: booleanAttribute });
  /** Addresses of the pictures, by the name that the text uses. */
  readonly figures = input<Readonly<Record<string, string>>>({});
  /** Whether the text stands within a line. */
  readonly inline = input(false, { transform: booleanAttribute });
  /** Formulas that cannot be read, whenever the text has been set. */
  readonly formulaProblems = output<readonly FormulaProblem[]>();

  /** Words alone need neither program nor styles. */
  private readonly plain = computed(() => /^[^\\$*_`#<>&[\]|~!\n]*$/.test(this.text()) && this.inline());
  protected readonly pending = computed(
    () => !this.plain() && !this.typesetter.typesetting() && !this.typesetter.failed(),
  );
  private blocks: readonly SetBlock[] = [];

  constructor() {
    effect(() => this.setText());
  }

  private setText(): void {
    const element = this.host.nativeElement;
    const typesetting = this.typesetter.typesetting();
    if (this.plain() || !typesetting) {
      if (!this.plain()) this.typesetter.load();
      this.blocks = [];
      element.textContent = this.text();
      return;
    }
    const setting = {
      givens: this.givens(),
      showGivens: this.showGivens(),
      figures: this.figures(),
      inline: this.inline(),
    };
    this.blocks = typesetting.typeset(this.text(), setting, this.blocks);
    replaceChanged(
      element,
      this.blocks.flatMap((block) => block.nodes),
    );
    this.formulaProblems.emit(this.blocks.flatMap((block) => block.problems));
  }
}

/** Makes `nodes` the children of an element and leaves those alone that are in place, so that only what changed is laid out. */
function replaceChanged(element: Element, nodes: readonly Node[]): void {
  const old = [...element.childNodes];
  let head = 0;
  while (head < old.length && head < nodes.length && old[head] === nodes[head]) head++;
  let tail = 0;
  while (
    tail < old.length - head &&
    tail < nodes.length - head &&
    old[old.length - 1 - tail] === nodes[nodes.length - 1 - tail]
  ) {
    tail++;
  }
  const after = old[old.length - tail] ?? null;
  for (const node of old.slice(head, old.length - tail)) node.remove();
  for (const node of nodes.slice(head, nodes.length - tail)) element.insertBefore(node, after);
}
