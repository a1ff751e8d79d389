import { ChangeDetectionStrategy, Component, computed, inject, input } from '@angular/core';
import { rxResource } from '@angular/core/rxjs-interop';
import { MatButtonModule } from '@angular/material/button';
import { RouterLink } from '@angular/router';
import type { SheetSummary } from '@shared/scripts';
import { momentOf, spanOf } from '@shared/times';
import { ScriptsApi } from '../../core/api/scripts-api';
import { sentenceOf } from '../../core/api/request-failure';
import { Now } from '../../core/now';
import { Session } from '../../core/session';
import { EmptyState } from '../../ui/empty-state/empty-state';
import { ErrorState } from '../../ui/error-state/error-state';
import { LoadingBars } from '../../ui/loading-bars/loading-bars';

/** A student's sheets: what is open first, with what is missing and how long there is left. */
@Component({
  selector: 'app-sheet-list',
  imports: [EmptyState, ErrorState, LoadingBars, MatButtonModule, RouterLink],
  templateUrl: './sheet-list.html',
  styleUrl: './sheet-list.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export default class SheetList {
  private readonly api = inject(ScriptsApi);
  private readonly session = inject(Session);
  private readonly clock = inject(Now);

  readonly courseId = input.required<string>();

  protected readonly sheets = rxResource({
    params: () => this.courseId(),
    stream: ({ params }) => this.api.sheets(params),
  });
  protected readonly problem = computed(() => {
    const error = this.sheets.error();
    return error ? sentenceOf(error.cause ?? error) : '';
  });
  private readonly zone = computed(() => this.session.course()?.timeZone ?? 'UTC');
  /** Those that are open, the one that closes first first; then the others, the newest first. */
  protected readonly items = computed(() => {
    const all = this.sheets.hasValue() ? this.sheets.value().items : [];
    const open = all.filter((each) => each.state === 'open');
    open.sort((one, other) => (one.closesAt ?? Infinity) - (other.closesAt ?? Infinity));
    return [...open, ...all.filter((each) => each.state !== 'open')].map((each) => ({
      ...each,
      when: this.whenOf(each),
      standing: this.standingOf(each),
    }));
  });

  private whenOf({ state, opensAt, closesAt, lateUntil }: SheetSummary): { words: string; date: string } {
    const now = this.clock.now();
    if (state === 'coming')
      return {
        words: opensAt === null ? 'opens later' : `opens in ${spanOf(opensAt - now)}`,
        date: opensAt === null ? '' : momentOf(opensAt, this.zone()),
      };
    const date = closesAt === null ? '' : momentOf(closesAt, this.zone());
    if (state !== 'open') return { words: 'closed', date };
    if (closesAt !== null && closesAt <= now && lateUntil !== null)
      return { words: `late work for ${spanOf(lateUntil - now)}`, date: momentOf(lateUntil, this.zone()) };
    return { words: closesAt === null ? 'open' : `closes in ${spanOf(closesAt - now)}`, date };
  }

  private standingOf({ state, answered, parts, submission, changedSince }: SheetSummary): string {
    if (state === 'coming') return 'Not open yet.';
    const count = `${String(answered)} of ${String(parts)} parts answered`;
    if (state !== 'open') {
      if (!submission) return 'You had no sheet of this set.';
      return submission.by === 'closing' ? `${count}, handed in when it closed.` : `${count}, submitted.`;
    }
    if (!submission) return `${count}, not submitted.`;
    if (submission.by === 'closing')
      return changedSince
        ? `${count}, changed since it was handed in at the closing time.`
        : `${count}, handed in at the closing time.`;
    return changedSince ? `${count}, changed since you submitted.` : `${count}, submitted.`;
  }
}
