import { ChangeDetectionStrategy, Component, computed, inject, input, output } from '@angular/core';
import { rxResource } from '@angular/core/rxjs-interop';
import { MatButtonModule } from '@angular/material/button';
import type { ProblemDraft } from '@shared/problem-draft';
import { draftOf } from '@shared/read-draft';
import { ProblemsApi } from '../../../core/api/problems-api';
import { sentenceOf } from '../../../core/api/request-failure';
import { draftDifferences } from '../draft-differences';

/** A revision beside the draft as it is now: every place where they differ, side by side. */
@Component({
  selector: 'app-changes-since',
  imports: [MatButtonModule],
  template: `
    <div class="heading">
      <h2>What changed since revision {{ number() }}</h2>
      <button matButton class="compact" (click)="closed.emit()">Close</button>
    </div>
    @if (revision.error(); as error) {
      <p class="tone-wrong" role="alert">
        {{ sentence(error) }} <button matButton class="compact" (click)="revision.reload()">Try again</button>
      </p>
    } @else if (revision.isLoading()) {
      <p class="quiet">Loading …</p>
    } @else {
      <div class="scroll" tabindex="0" role="region" [attr.aria-label]="'What changed since revision ' + number()">
        <table>
          <thead>
            <tr>
              <th scope="col">where</th>
              <th scope="col">revision {{ number() }}</th>
              <th scope="col">now</th>
            </tr>
          </thead>
          <tbody>
            @for (each of differences(); track each.place) {
              <tr>
                <th scope="row">{{ each.place }}</th>
                <td>{{ each.mine || '–' }}</td>
                <td>{{ each.theirs || '–' }}</td>
              </tr>
            } @empty {
              <tr>
                <td colspan="3">They do not differ in what is written.</td>
              </tr>
            }
          </tbody>
        </table>
      </div>
    }
  `,
  styleUrls: ['../two-states.scss', './changes-since.scss'],
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class ChangesSince {
  private readonly api = inject(ProblemsApi);

  readonly problemId = input.required<string>();
  readonly number = input.required<number>();
  readonly draft = input.required<ProblemDraft>();
  readonly closed = output();

  protected readonly revision = rxResource({
    params: () => ({ problemId: this.problemId(), number: this.number() }),
    stream: ({ params }) => this.api.revision(params.problemId, params.number),
  });
  protected readonly differences = computed(() => {
    const content = this.revision.hasValue() ? this.revision.value().content : null;
    return content ? draftDifferences(draftOf(content), this.draft()) : [];
  });
  protected readonly sentence = sentenceOf;
}
