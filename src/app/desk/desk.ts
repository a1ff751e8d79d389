import { ChangeDetectionStrategy, Component, computed, inject, input } from '@angular/core';
import { rxResource } from '@angular/core/rxjs-interop';
import { MatButtonModule } from '@angular/material/button';
import { RouterLink } from '@angular/router';
import type { DeskSet, Need } from '@shared/desk';
import { type SetStage, setStageNames } from '@shared/primitives';
import { dayOf, momentOf, spanOf } from '@shared/times';
import { DeskApi } from '../core/api/desk-api';
import { sentenceOf } from '../core/api/request-failure';
import { Now } from '../core/now';
import { Session } from '../core/session';
import { EmptyState } from '../ui/empty-state/empty-state';
import { ErrorState } from '../ui/error-state/error-state';
import { StageLine, type StageMark } from '../ui/stage-line/stage-line';

interface ShownNeed extends Need {
  /** `now`, or how long there is left. */
  readonly when: string;
  /** The date, where there is one. */
  readonly date: string;
  readonly link: readonly string[];
}

interface ShownSet extends DeskSet {
  readonly marks: readonly StageMark[];
  readonly present: number;
  readonly progress: number;
  readonly link: readonly string[];
}

/** What needs somebody now, as one list, and the life lines of the sets that run. */
@Component({
  selector: 'app-desk',
  imports: [EmptyState, ErrorState, MatButtonModule, RouterLink, StageLine],
  templateUrl: './desk.html',
  styleUrl: './desk.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export default class Desk {
  private readonly api = inject(DeskApi);
  private readonly clock = inject(Now);
  protected readonly session = inject(Session);

  readonly courseId = input.required<string>();

  protected readonly desk = rxResource({
    params: () => this.courseId(),
    stream: ({ params }) => this.api.desk(params),
  });
  protected readonly problem = computed(() => {
    const error = this.desk.error();
    return error ? sentenceOf(error.cause ?? error) : '';
  });
  private readonly zone = computed(() => this.session.course()?.timeZone ?? 'UTC');

  protected readonly needs = computed<readonly ShownNeed[]>(() =>
    (this.desk.hasValue() ? this.desk.value().needs : []).map((need) => ({
      ...need,
      ...this.whenOf(need.due),
      link: this.linkOf(need.act),
    })),
  );
  protected readonly sets = computed<readonly ShownSet[]>(() =>
    (this.desk.hasValue() ? this.desk.value().sets : []).map((set) => ({
      ...set,
      marks: this.marksOf(set),
      present: setStageNames.indexOf(set.stage),
      progress: this.progressOf(set),
      link: this.linkOf(set.act),
    })),
  );
  protected readonly restful = computed(() =>
    this.session.role() === 'student'
      ? 'Nothing needs you now. The next sheet appears here when it opens.'
      : 'Nothing needs you now.',
  );

  private whenOf(due: number | null): { when: string; date: string } {
    if (due === null) return { when: 'now', date: '' };
    const left = due - this.clock.now();
    return { when: left > 0 ? spanOf(left) : 'now', date: momentOf(due, this.zone()) };
  }

  private linkOf({ page, id }: Need['act']): readonly string[] {
    const course = ['/courses', this.courseId()];
    const target = id ?? '';
    switch (page) {
      case 'sets':
      case 'problems':
      case 'people':
      case 'marking':
      case 'queries':
        return [...course, page];
      case 'new set':
        return [...course, 'sets', 'new'];
      case 'set':
        return [...course, 'sets', target];
      case 'release':
        return [...course, 'results', target, 'release'];
      case 'problem':
        return [...course, 'problems', target];
      case 'bench':
        return [...course, 'marking', target];
      case 'sheet':
        return [...course, 'sheets', target];
      case 'receipt':
        return [...course, 'sheets', target, 'receipt'];
      case 'feedback':
        return [...course, 'feedback', target];
    }
  }

  private marksOf(set: DeskSet): StageMark[] {
    const reached = new Map(set.reached.map(({ stage, at }) => [stage, at]));
    const planned = new Map<SetStage, number | null>([
      ['open', set.opensAt],
      ['closed', set.closesAt],
    ]);
    return setStageNames.map((name) => {
      const at = reached.get(name) ?? planned.get(name);
      return at ? { name, date: dayOf(at, this.zone()) } : { name };
    });
  }

  /** Time between the beginning of the stage and the next date that is known; half-way where none is. */
  private progressOf(set: DeskSet): number {
    const began = set.reached.at(-1)?.at;
    const next = set.stage === 'open' ? set.closesAt : set.stage === 'ready' ? set.opensAt : null;
    if (began === undefined || next === null || next <= began) return set.stage === 'released' ? 0.9 : 0.5;
    return Math.min(0.96, Math.max(0.04, (this.clock.now() - began) / (next - began)));
  }
}
