import { CdkDrag, type CdkDragDrop, CdkDragHandle, CdkDropList, moveItemInArray } from '@angular/cdk/drag-drop';
import { LiveAnnouncer } from '@angular/cdk/a11y';
import { ChangeDetectionStrategy, Component, ElementRef, computed, inject, input, model, signal } from '@angular/core';
import { rxResource } from '@angular/core/rxjs-interop';
import { MatButtonModule } from '@angular/material/button';
import { MatFormFieldModule } from '@angular/material/form-field';
import { MatIconModule } from '@angular/material/icon';
import { MatInputModule } from '@angular/material/input';
import { RouterLink } from '@angular/router';
import type { SetProblem, UsableProblem } from '@shared/sets';
import { SetsApi } from '../../core/api/sets-api';
import { sentenceOf } from '../../core/api/request-failure';
import { ErrorState } from '../../ui/error-state/error-state';
import { LoadingBars } from '../../ui/loading-bars/loading-bars';

/** A problem in its place in the set. */
export type Chosen = Pick<
  SetProblem,
  | 'problemId'
  | 'revisionId'
  | 'revision'
  | 'latestRevisionId'
  | 'latestRevision'
  | 'title'
  | 'parts'
  | 'marks'
  | 'status'
>;

/** The problems of a set in their order, moved by keyboard or by hand, and the bank to choose from. */
@Component({
  selector: 'app-chosen-problems',
  imports: [
    CdkDrag,
    CdkDragHandle,
    CdkDropList,
    ErrorState,
    LoadingBars,
    MatButtonModule,
    MatFormFieldModule,
    MatIconModule,
    MatInputModule,
    RouterLink,
  ],
  templateUrl: './chosen-problems.html',
  styleUrl: './chosen-problems.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class ChosenProblems {
  private readonly api = inject(SetsApi);
  private readonly announcer = inject(LiveAnnouncer);
  private readonly host = inject<ElementRef<HTMLElement>>(ElementRef);

  readonly courseId = input.required<string>();
  readonly chosen = model.required<readonly Chosen[]>();
  /** Messages of the server, by place. */
  readonly messages = input<ReadonlyMap<number, string>>(new Map());

  protected readonly search = signal('');
  protected readonly bank = rxResource({
    params: () => ({ courseId: this.courseId(), search: this.search() }),
    stream: ({ params }) => this.api.usableProblems(params.courseId, params.search),
  });
  protected readonly problem = computed(() => {
    const error = this.bank.error();
    return error ? sentenceOf(error.cause ?? error) : '';
  });
  protected readonly others = computed(() => {
    const there = new Set(this.chosen().map((each) => each.problemId));
    return (this.bank.hasValue() ? this.bank.value().items : []).filter((each) => !there.has(each.problemId));
  });
  protected readonly total = computed(() => ({
    parts: this.chosen().reduce((sum, each) => sum + each.parts, 0),
    marks: this.chosen().reduce((sum, each) => sum + each.marks, 0),
  }));

  protected drop(event: CdkDragDrop<unknown>): void {
    this.moveTo(event.previousIndex, event.currentIndex);
  }

  protected step(index: number, steps: -1 | 1): void {
    const to = index + steps;
    if (to < 0 || to >= this.chosen().length) return;
    this.moveTo(index, to);
    // The focus goes along with the problem, so that it can be moved on.
    setTimeout(() => {
      const row = this.host.nativeElement.querySelectorAll('.chosen li')[to];
      const button = row?.querySelector<HTMLButtonElement>(steps < 0 ? '.up' : '.down');
      (button?.disabled ? row?.querySelector<HTMLButtonElement>(steps < 0 ? '.down' : '.up') : button)?.focus();
    });
  }

  protected add(problem: UsableProblem): void {
    this.chosen.update((all) => [
      ...all,
      { ...problem, latestRevisionId: problem.revisionId, latestRevision: problem.revision },
    ]);
    void this.announcer.announce(`“${problem.title}” is now problem ${String(this.chosen().length)}.`);
  }

  protected remove(index: number): void {
    const title = this.chosen()[index]?.title ?? '';
    this.chosen.update((all) => all.filter((_, place) => place !== index));
    void this.announcer.announce(`“${title}” is out of the set.`);
  }

  protected takeLatest(index: number): void {
    this.chosen.update((all) =>
      all.map((each, place) =>
        place === index ? { ...each, revisionId: each.latestRevisionId, revision: each.latestRevision } : each,
      ),
    );
  }

  private moveTo(from: number, to: number): void {
    if (from === to) return;
    const all = [...this.chosen()];
    moveItemInArray(all, from, to);
    this.chosen.set(all);
    void this.announcer.announce(
      `“${all[to]?.title ?? ''}” is now problem ${String(to + 1)} of ${String(all.length)}.`,
    );
  }
}
