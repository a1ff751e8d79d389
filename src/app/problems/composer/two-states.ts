import { ChangeDetectionStrategy, Component, computed, inject, input, signal } from '@angular/core';
import { MatButtonModule } from '@angular/material/button';
import { Router } from '@angular/router';
import { firstValueFrom } from 'rxjs';
import type { ProblemDraft } from '@shared/problem-draft';
import type { ProblemDetail } from '@shared/problem-routes';
import { timeOf } from '@shared/times';
import { ProblemsApi } from '../../core/api/problems-api';
import { sentenceOf } from '../../core/api/request-failure';
import { Session } from '../../core/session';
import { draftDifferences } from './draft-differences';
import { OpenProblem } from './open-problem';

/** Two states of one problem, typed here and saved elsewhere: shows where they differ, and asks which goes on. */
@Component({
  selector: 'app-two-states',
  imports: [MatButtonModule],
  template: `
    <h2>This problem was changed in another place{{ when() }}</h2>
    <p>Both states are kept until you choose.</p>
    <div class="scroll" tabindex="0" role="region" aria-label="Where the two states differ">
      <table>
        <thead>
          <tr>
            <th scope="col">where</th>
            <th scope="col">typed here</th>
            <th scope="col">saved elsewhere</th>
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
    <div class="row">
      <button matButton="filled" (click)="open.goOnWithMine()">Go on with what is typed here</button>
      <button matButton="outlined" (click)="open.goOnWithTheirs()">Go on with what was saved elsewhere</button>
      <button matButton="outlined" [disabled]="isBusy()" (click)="keepBoth()">
        Keep both: mine becomes a new problem
      </button>
    </div>
    @if (failure(); as words) {
      <p class="tone-wrong" role="alert">{{ words }}</p>
    }
  `,
  styleUrl: './two-states.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
  host: { role: 'alert' },
})
export class TwoStates {
  private readonly api = inject(ProblemsApi);
  private readonly router = inject(Router);
  private readonly session = inject(Session);
  protected readonly open = inject(OpenProblem);

  readonly other = input.required<ProblemDetail>();
  readonly mine = input.required<ProblemDraft>();
  readonly courseId = input.required<string>();

  protected readonly isBusy = signal(false);
  protected readonly failure = signal('');
  protected readonly differences = computed(() => draftDifferences(this.mine(), this.other().draft));
  protected readonly when = computed(() => {
    const course = this.session.course();
    return course ? ` at ${timeOf(this.other().savedAt, course.timeZone)}` : '';
  });

  protected async keepBoth(): Promise<void> {
    this.isBusy.set(true);
    this.failure.set('');
    const mine = this.mine();
    try {
      const title = `${mine.title.trim().slice(0, 100) || 'Problem'} (mine)`;
      const begun = await firstValueFrom(this.api.beginProblem(this.courseId(), title));
      await firstValueFrom(this.api.saveDraft(begun.id, begun.version, { ...mine, title }));
      this.open.goOnWithTheirs();
      await this.router.navigate(['/courses', this.courseId(), 'problems', begun.id]);
    } catch (error) {
      this.failure.set(sentenceOf(error));
    } finally {
      this.isBusy.set(false);
    }
  }
}
