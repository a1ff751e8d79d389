import { computed, signal } from '@angular/core';
import type { Sheet, SheetPage, SheetPart, SheetProblem } from '@shared/scripts';
import type { Reading } from '@shared/reading';
import { AnswerKeeper, type KeeperPlace } from './answer-keeper';

/** How a part stands: it has an answer, it has one that leaves a question, or none. */
export type Standing = 'done' | 'asks' | 'empty';

/** A part of an open sheet: what is asked, what is typed, how it is read. */
export class PartInHand {
  private readonly read = signal<Reading['kind']>('empty');
  private readonly own = signal<readonly SheetPage[]>([]);

  readonly pages = this.own.asReadonly();
  readonly anchor: string;
  readonly name: string;
  readonly standing = computed<Standing>(() => {
    if (this.keeper.text().trim() === '') return this.own().length > 0 ? 'done' : 'empty';
    return this.read() === 'question' || this.read() === 'unreadable' ? 'asks' : 'done';
  });

  constructor(
    readonly part: SheetPart,
    problem: Pick<SheetProblem, 'position'>,
    readonly keeper: AnswerKeeper,
  ) {
    this.own.set(part.pages);
    this.anchor = `part-${String(problem.position)}${part.label}`;
    this.name = `${String(problem.position)} (${part.label})`;
  }

  takeReading(reading: Reading): void {
    this.read.set(reading.kind);
  }

  addPage(page: SheetPage): void {
    this.own.update((pages) => [...pages.filter((each) => each.id !== page.id), page]);
  }

  removePage(page: SheetPage): void {
    this.own.update((pages) => pages.filter((each) => each.id !== page.id));
  }
}

/** A problem with its parts in hand. */
export interface ProblemInHand {
  readonly problem: SheetProblem;
  readonly parts: readonly PartInHand[];
}

/** All answers of an open sheet, and whether they are kept. */
export class SheetKeeper {
  readonly problems: readonly ProblemInHand[];
  private readonly parts: readonly PartInHand[];

  readonly total: number;
  readonly done = computed(() => this.count('done'));
  readonly asking = computed(() => this.count('asks'));
  readonly missing = computed(() => this.count('empty'));
  /** Parts with an answer, read or not. */
  readonly answered = computed(() => this.total - this.missing());
  readonly isAllKept = computed(() => this.parts.every((part) => part.keeper.isKept()));
  readonly isOffline = computed(() => this.parts.some((part) => part.keeper.keeping() === 'offline'));
  readonly clashes = computed(() => this.parts.filter((part) => part.keeper.keeping() === 'clash'));
  readonly refused = computed(() => this.parts.filter((part) => part.keeper.keeping() === 'refused'));
  /** When the last save was acknowledged; null where nothing was saved yet. */
  readonly lastSavedAt = computed(() =>
    this.parts.reduce<number | null>((last, { keeper, pages }) => {
      const times = [keeper.savedAt() ?? 0, ...pages().map((page) => page.addedAt), last ?? 0];
      return Math.max(...times) || null;
    }, null),
  );

  constructor(sheet: Sheet, place: KeeperPlace) {
    this.problems = sheet.problems.map((problem) => ({
      problem,
      parts: problem.parts.map((part) => new PartInHand(part, problem, new AnswerKeeper(part.answerId, part, place))),
    }));
    this.parts = this.problems.flatMap((problem) => problem.parts);
    this.total = this.parts.length;
    for (const part of this.parts) part.keeper.recover(sheet.state === 'open');
  }

  /** Parts that leave something to be looked at before the sheet is handed in. */
  open(): readonly PartInHand[] {
    return this.parts.filter((part) => part.standing() !== 'done');
  }

  async flush(): Promise<void> {
    await Promise.all(this.parts.map((part) => part.keeper.flush()));
  }

  tryNow(): void {
    for (const part of this.parts) part.keeper.tryNow();
  }

  leave(): void {
    for (const part of this.parts) part.keeper.leave();
  }

  stop(): void {
    for (const part of this.parts) part.keeper.stop();
  }

  private count(standing: Standing): number {
    return this.parts.filter((part) => part.standing() === standing).length;
  }
}
