import { ChangeDetectionStrategy, Component, inject, input, output, signal } from '@angular/core';
import { rxResource } from '@angular/core/rxjs-interop';
import { MatButtonModule } from '@angular/material/button';
import { firstValueFrom } from 'rxjs';
import type { ProblemDraft } from '@shared/problem-draft';
import { draftOf } from '@shared/read-draft';
import { momentOf } from '@shared/times';
import { ProblemsApi } from '../../core/api/problems-api';
import { sentenceOf } from '../../core/api/request-failure';
import { Session } from '../../core/session';
import { OpenProblem } from './open-problem';

/** The revisions of the open problem; any of them can be taken up again as the draft. */
@Component({
  selector: 'app-revision-list',
  imports: [MatButtonModule],
  template: `
    <div class="heading">
      <h2>Revisions</h2>
      <button matButton class="compact" (click)="closed.emit()">Close</button>
    </div>
    @if (revisions.error(); as error) {
      <p class="tone-wrong" role="alert">
        {{ sentence(error) }} <button matButton class="compact" (click)="revisions.reload()">Try again</button>
      </p>
    } @else {
      <table>
        <tbody>
          @for (revision of revisions.value()?.items; track revision.id) {
            <tr>
              <th scope="row">revision {{ revision.number }}</th>
              <td>{{ revision.reason }}</td>
              <td class="quiet">{{ revision.author }}, {{ moment(revision.createdAt) }}</td>
              <td>
                @if (open.canEdit()) {
                  <button matButton class="compact" (click)="takeUp(revision.number)">
                    Take up<span class="cdk-visually-hidden"> revision {{ revision.number }} as the draft</span>
                  </button>
                }
              </td>
            </tr>
          } @empty {
            <tr>
              <td class="quiet">
                {{
                  revisions.isLoading()
                    ? 'Loading …'
                    : 'None yet. Save the draft as a revision once its keys are right.'
                }}
              </td>
            </tr>
          }
        </tbody>
      </table>
    }
    @if (before()) {
      <p role="status">
        The draft is now what the revision was.
        <button matButton class="compact" (click)="putBack()">Put back what was typed before</button>
      </p>
    }
    @if (failure(); as words) {
      <p class="tone-wrong" role="alert">{{ words }}</p>
    }
  `,
  styleUrl: './revision-list.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class RevisionList {
  private readonly api = inject(ProblemsApi);
  private readonly session = inject(Session);
  protected readonly open = inject(OpenProblem);

  readonly problemId = input.required<string>();
  readonly closed = output();

  protected readonly revisions = rxResource({
    params: () => this.problemId(),
    stream: ({ params }) => this.api.revisions(params),
  });
  protected readonly before = signal<ProblemDraft | null>(null);
  protected readonly failure = signal('');
  protected readonly sentence = sentenceOf;

  protected moment(at: number): string {
    return momentOf(at, this.session.course()?.timeZone ?? 'UTC');
  }

  protected async takeUp(number: number): Promise<void> {
    this.failure.set('');
    try {
      const { content } = await firstValueFrom(this.api.revision(this.problemId(), number));
      const before = this.open.draft();
      this.open.change(() => draftOf(content));
      this.before.set(before);
    } catch (error) {
      this.failure.set(sentenceOf(error));
    }
  }

  protected putBack(): void {
    const before = this.before();
    if (before) this.open.change(() => before);
    this.before.set(null);
  }
}
