import { LiveAnnouncer } from '@angular/cdk/a11y';
import {
  ChangeDetectionStrategy,
  Component,
  type ElementRef,
  computed,
  inject,
  input,
  linkedSignal,
  output,
  signal,
  viewChild,
} from '@angular/core';
import { injectElementWidth } from '../element-width';
import { hueClass } from '../marker-token/marker-token';
import { textWidth } from '../text-width';
import { type FringeBar, type FringeGroup, barInWords } from './fringe-bar';
import { type PlacedBar, type PlacedGroup, barHeight, layOutStrip, sortIntoGroups, strip } from './strip-layout';

let strips = 0;

/**
 * A pile as a band of bars, one an answer, in the order of its patterns. One tab stop; arrows walk the bars, `[` and `]` the
 * patterns, Home and End go to the ends, Enter takes the bar that is visited.
 */
@Component({
  selector: 'app-fringe-strip',
  templateUrl: './fringe-strip.html',
  styleUrl: './fringe-strip.scss',
  host: { '[class.not-live]': 'notLive() !== ""' },
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class FringeStrip {
  private readonly announcer = inject(LiveAnnouncer);
  private readonly width = injectElementWidth(1120);
  private readonly drawing = viewChild<ElementRef<SVGElement>>('drawing');

  /** The answers; null while they are on their way. */
  readonly bars = input.required<readonly FringeBar[] | null>();
  /** The patterns in their order. */
  readonly groups = input<readonly FringeGroup[]>([]);
  /** The part's marks: the height of a whole bar. */
  readonly fullMarks = input(1);
  /** How many hollow bars stand for answers that are on their way. */
  readonly expected = input(0);
  /** The key of the chosen pattern. */
  readonly chosenGroup = input<string | null>(null);
  /** The answer in hand, from which the walk begins. */
  readonly current = input<string | null>(null);
  /** What the strip is of, for those who hear it. */
  readonly label = input('Answers by pattern');
  /** The pattern that becomes one block where bars would be too thin. */
  readonly tallyFirst = input('right');
  /** What to say where the connection is lost; empty while it is there. */
  readonly notLive = input('');
  /** What to say where there is no answer. */
  readonly emptyText = input('Nothing to mark yet.');

  /** A bar was chosen, by click or Enter. */
  readonly barChosen = output<string>();
  /** A bar is visited by the keyboard. */
  readonly barVisited = output<string>();
  /** A pattern was chosen, by its bracket or by `[` and `]`. */
  readonly groupChosen = output<string>();

  protected readonly shape = strip;
  protected readonly id = `fringe-strip-${++strips}`;
  protected readonly hovered = signal<string | null>(null);
  protected readonly visited = linkedSignal<{ current: string | null; first: string | null }, string | null>({
    source: () => ({ current: this.current(), first: this.order()[0]?.bar.id ?? null }),
    computation: ({ current, first }, before) => {
      if (current !== null && current !== before?.source.current) return current;
      const still = before?.value;
      return still && this.order().some((placed) => placed.bar.id === still) ? still : (current ?? first);
    },
  });

  private readonly sorted = computed(() => sortIntoGroups(this.bars() ?? [], this.groups()));
  private readonly layout = computed(() =>
    layOutStrip(this.sorted(), this.width(), this.tallyFirst(), this.chosenGroup()),
  );
  private readonly order = computed<readonly PlacedBar[]>(() => this.layout().groups.flatMap((group) => group.bars));
  protected readonly drawingWidth = this.width;
  protected readonly isEmpty = computed(() => this.bars()?.length === 0);

  /** Hollow bars from the count alone, where they will stand roughly. */
  protected readonly hollow = computed(() => {
    if (this.bars() !== null) return [];
    const pitch = Math.min(12, (this.width() - 8) / Math.max(1, this.expected()));
    return Array.from({ length: this.expected() }, (_, index) => ({
      x: Math.round(4 + index * pitch),
      width: Math.max(1, Math.round((pitch * 2) / 3)),
    }));
  });

  protected readonly levels = computed(() => {
    const full = this.fullMarks();
    const step = full <= 6 ? 1 : full / 4;
    const count = Math.floor(full / step);
    return Array.from({ length: count }, (_, index) => strip.base + 0.5 - ((index + 1) * step * strip.field) / full);
  });

  protected readonly drawn = computed(() =>
    this.layout().groups.map((group) => ({
      ...group,
      chosen: group.key === this.chosenGroup(),
      blockFill: ((group.to - group.from) * group.marked) / Math.max(1, group.bars.length),
      words: `${group.name}, ${group.marked} of ${group.bars.length} marked`,
      drawn: group.bars.map((placed, index) => this.drawBar(placed, index, group)),
    })),
  );

  protected readonly flags = computed(() =>
    this.order()
      .filter((placed) => placed.bar.held)
      .map(({ bar, x, width }) => {
        const words = bar.held?.mine ? 'you' : (bar.held?.initials ?? '');
        const wide = Math.max(26, Math.ceil(textWidth(words, 12, 600)) + 12);
        const at = x - 2;
        const left = Math.min(at, this.width() - wide);
        return { id: bar.id, words, wide, left, at, edge: Math.min(4, Math.max(2, width / 2)), hue: hueOf(bar) };
      }),
  );

  protected readonly brackets = computed(() => {
    const groups = this.layout().groups;
    const last = groups.at(-1);
    // The last name may lean to the left, where the strip ends before it does, as far as the name before it lets it.
    const lastName = last ? Math.min(textWidth(last.name, 14) + 6, 120) : 0;
    const lean = last !== undefined && this.width() - last.from < lastName;
    const before = groups.at(-2)?.from ?? -Infinity;
    const lastLeft = lean ? Math.min(last.from, Math.max(this.width() - lastName, before + 28)) : (last?.from ?? 0);
    return groups.map((group, index) => {
      const next = index + 2 === groups.length ? lastLeft : (groups[index + 1]?.from ?? this.width() + 8);
      const left = group === last ? lastLeft : group.from;
      return {
        key: group.key,
        name: group.name,
        tally: `${group.marked} of ${group.bars.length}`,
        left,
        room: Math.max(20, (group === last ? this.width() : next - 8) - left),
        lean: group === last && lean,
        line: `M${group.from} 2v6H${Math.max(group.to, group.from + 6)}v-6`,
        chosen: group.key === this.chosenGroup(),
      };
    });
  });

  /** Visits the bar so many steps on; the ends hold. */
  walk(steps: number): void {
    const order = this.order();
    const at = order.findIndex((placed) => placed.bar.id === this.visited());
    this.visit(order[Math.min(order.length - 1, Math.max(0, at + steps))]);
  }

  /** Visits the first bar of the pattern so many patterns on, and chooses that pattern. */
  walkGroups(steps: number): void {
    const groups = this.layout().groups;
    const at = groups.findIndex((group) => group.bars.some((placed) => placed.bar.id === this.visited()));
    const group = groups[Math.min(groups.length - 1, Math.max(0, at + steps))];
    if (!group) return;
    this.visit(group.bars.find((placed) => placed.bar.state === 'unmarked') ?? group.bars[0]);
    this.groupChosen.emit(group.key);
  }

  /** Chooses the bar that is visited. */
  chooseVisited(): void {
    const id = this.visited();
    if (id !== null) this.barChosen.emit(id);
  }

  protected steer(event: KeyboardEvent): void {
    if (event.altKey || event.ctrlKey || event.metaKey) return;
    const deeds: Readonly<Record<string, () => void>> = {
      ArrowRight: () => this.walk(1),
      ArrowDown: () => this.walk(1),
      ArrowLeft: () => this.walk(-1),
      ArrowUp: () => this.walk(-1),
      Home: () => this.walk(-Infinity),
      End: () => this.walk(Infinity),
      '[': () => this.walkGroups(-1),
      ']': () => this.walkGroups(1),
      Enter: () => this.chooseVisited(),
      ' ': () => this.chooseVisited(),
    };
    const deed = deeds[event.key];
    if (!deed) return;
    deed();
    event.preventDefault();
    event.stopPropagation();
  }

  protected hover(event: PointerEvent): void {
    this.hovered.set(this.barAt(event)?.bar.id ?? null);
  }

  protected chooseAt(event: MouseEvent): void {
    const placed = this.barAt(event);
    if (!placed) return;
    this.visited.set(placed.bar.id);
    this.barChosen.emit(placed.bar.id);
  }

  /** A stroke of one pixel lies within the bar. */
  protected outlineWidth(width: number): number {
    return Math.max(1, width - 1);
  }

  private visit(placed: PlacedBar | undefined): void {
    if (!placed) return;
    this.visited.set(placed.bar.id);
    this.barVisited.emit(placed.bar.id);
    const drawing = this.drawing()?.nativeElement;
    // With the focus on the strip the screen reader follows by itself; otherwise the page steers, and it must be told.
    if (drawing && drawing.ownerDocument.activeElement !== drawing) {
      void this.announcer.announce(this.wordsOf(placed.bar.id), 'polite');
    }
  }

  private wordsOf(id: string): string {
    for (const group of this.drawn()) {
      const found = group.drawn.find((bar) => bar.id === id);
      if (found) return found.words;
    }
    return '';
  }

  private barAt(event: MouseEvent): PlacedBar | undefined {
    const drawing = this.drawing()?.nativeElement;
    if (!drawing) return undefined;
    const x = event.clientX - drawing.getBoundingClientRect().left;
    const reach = Math.max(3, this.layout().pitch / 2 + 1);
    let nearest: PlacedBar | undefined;
    let distance = Infinity;
    for (const placed of this.order()) {
      const away = Math.abs(placed.x + placed.width / 2 - x);
      if (away < distance) [nearest, distance] = [placed, away];
    }
    return distance <= reach ? nearest : undefined;
  }

  private drawBar({ bar, x, width }: PlacedBar, index: number, group: PlacedGroup) {
    const height = bar.state === 'marked' ? barHeight(bar.height, this.fullMarks()) : strip.field;
    const notch = Math.min(9, width * 1.1);
    const [l, r] = [x + 0.5, x + width - 0.5];
    return {
      id: bar.id,
      domId: `${this.id}-${bar.id}`,
      state: bar.state,
      x,
      width,
      y: strip.base - height,
      height,
      hidden: bar.state === 'marked' && bar.height === null,
      notched: `M${l} ${strip.top + 0.5}L${(l + r) / 2} ${strip.top + 0.5 + notch}L${r} ${strip.top + 0.5}V${strip.base - 0.5}H${l}z`,
      mine: bar.held?.mine ?? false,
      held: Boolean(bar.held),
      hue: bar.held ? hueOf(bar) : '',
      second: bar.second ?? false,
      justMarked: bar.justMarked ?? false,
      words: barInWords(bar, index + 1, { name: group.name, count: group.bars.length }, this.fullMarks()),
    };
  }
}

function hueOf(bar: FringeBar): string {
  return bar.held ? hueClass(bar.held.hue, bar.held.mine) : '';
}
