import { ChangeDetectionStrategy, Component, booleanAttribute, computed, input } from '@angular/core';
import { injectElementWidth } from '../element-width';
import { textWidth } from '../text-width';

/** A stage on the line. */
export interface StageMark {
  readonly name: string;
  /** When it began or is due, as printed: `19 Nov`. */
  readonly date?: string;
}

const left = 8;
const widestPitch = 104;
/** Where the line is the head of a page. */
const widestPitchOfPage = 148;
const narrowestPitch = 30;

/**
 * A set's life as one line: light as far as time has come, thin dashes for what is ahead, the dates under it, the present
 * stage in words.
 */
@Component({
  selector: 'app-stage-line',
  templateUrl: './stage-line.html',
  styleUrl: './stage-line.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class StageLine {
  /** All stages in their order. */
  readonly stages = input.required<readonly StageMark[]>();
  /** The place of the present stage, from 0. */
  readonly present = input.required<number>();
  /** How far time has come towards the next stage, 0 to 1. */
  readonly progress = input(0);
  /** What the line is of, for those who hear it: `Set 4`. */
  readonly label = input('');
  /** Whether the stages' names stand above the line. */
  readonly names = input(false, { transform: booleanAttribute });
  /** Whether it takes the whole width of a page. */
  readonly wide = input(false, { transform: booleanAttribute });

  private readonly width = injectElementWidth(left + widestPitch * 8 + 40);

  private readonly pitch = computed(() => {
    const gaps = Math.max(1, this.stages().length - 1);
    const last = this.stages().at(-1);
    const isNamed = this.names() || this.present() === gaps;
    const reserve =
      left + Math.max(16, textWidth(last?.date ?? '') + 2, isNamed ? textWidth(last?.name ?? '', 12, 600) + 2 : 0);
    return Math.min(
      this.wide() ? widestPitchOfPage : widestPitch,
      Math.max(narrowestPitch, (this.width() - reserve) / gaps),
    );
  });

  protected readonly top = computed(() => (this.names() ? 24 : 0));
  protected readonly height = computed(() => 44 + this.top());
  protected readonly y = computed(() => 14 + this.top());
  protected readonly start = left;
  protected readonly end = computed(() => left + this.pitch() * (this.stages().length - 1));
  protected readonly drawingWidth = computed(() =>
    Math.max(this.end() + left, Math.min(this.width(), this.end() + 64)),
  );

  protected readonly head = computed(() => {
    const inside = this.present() >= this.stages().length - 1 ? 0 : Math.min(1, Math.max(0, this.progress()));
    return left + this.pitch() * (this.present() + inside);
  });

  protected readonly marks = computed(() => {
    const present = this.present();
    const shown = this.shownLabels();
    const named = this.shownNames();
    return this.stages().map((stage, index) => ({
      name: named.has(index) ? stage.name : '',
      x: left + this.pitch() * index,
      lit: index <= present,
      present: index === present,
      half: index <= present ? 6 : 4,
      label: !shown.has(index) ? '' : index === present ? stage.name : (stage.date ?? ''),
    }));
  });

  protected readonly sentence = computed(() => {
    const stages = this.stages();
    const present = stages[this.present()];
    const next = stages[this.present() + 1];
    const dated = (stage: StageMark) => (stage.date ? `${stage.name}, ${stage.date}` : stage.name);
    const now = present ? `now ${present.name}${present.date ? ` since ${present.date}` : ''}` : '';
    const words = [now, next ? `next ${dated(next)}` : 'nothing further'].filter(Boolean).join('; ');
    return this.label() ? `${this.label()}: ${words}` : words;
  });

  /** On a narrow page only as many labels as keep apart: the present stage first, then the next, then the others. */
  private shownLabels(): ReadonlySet<number> {
    const present = this.present();
    return this.spaced(
      (stage, index) => (index === present ? textWidth(stage.name, 12, 600) : textWidth(stage.date ?? '')),
      [present, present + 1],
    );
  }

  private shownNames(): ReadonlySet<number> {
    return this.names() ? this.spaced((stage) => textWidth(stage.name), [this.present()]) : new Set();
  }

  private spaced(widthOf: (stage: StageMark, index: number) => number, first: readonly number[]): ReadonlySet<number> {
    const stages = this.stages();
    const order = [...first, ...stages.keys()].filter((index) => index < stages.length);
    const taken: { from: number; to: number }[] = [];
    const shown = new Set<number>();
    for (const index of order) {
      const stage = stages[index];
      if (!stage || shown.has(index)) continue;
      const from = this.pitch() * index;
      const to = from + widthOf(stage, index) + 8;
      if (taken.some((other) => from < other.to && other.from < to)) continue;
      taken.push({ from, to });
      shown.add(index);
    }
    return shown;
  }
}
