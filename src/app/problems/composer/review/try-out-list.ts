import { ChangeDetectionStrategy, Component, computed, effect, inject, input, signal, untracked } from '@angular/core';
import { rxResource } from '@angular/core/rxjs-interop';
import { MatButtonModule } from '@angular/material/button';
import { RouterLink } from '@angular/router';
import { momentOf } from '@shared/times';
import { TryOutsApi } from '../../../core/api/try-outs-api';
import { sentenceOf } from '../../../core/api/request-failure';
import { Session } from '../../../core/session';
import { TryOutAnswers } from '../../try-out/try-out-answers';
import { OpenProblem } from '../open-problem';
import { OpenReview } from './open-review';

/** Who tried the problem out, how long it took them, how much was right; each opens its differences to the key. */
@Component({
  selector: 'app-try-out-list',
  imports: [MatButtonModule, RouterLink, TryOutAnswers],
  template: `
    <div class="heading">
      <h2>Try-outs</h2>
      <span class="grow"></span>
      @if (open.detail()?.latestRevision) {
        <a matButton class="compact" [routerLink]="['/courses', courseId(), 'problems', problemId(), 'try-out']"
          >Try it out</a
        >
      }
    </div>
    @if (tryOuts.error(); as error) {
      <p class="tone-wrong" role="alert">{{ sentence(error) }}</p>
    } @else {
      <ul>
        @for (each of items(); track each.id) {
          <li>
            <button
              type="button"
              [attr.aria-expanded]="shown() === each.id"
              [attr.aria-label]="
                each.by.name + ', ' + each.activeMinutes + ' min, ' + each.right + ' of ' + each.checked + ' right'
              "
              (click)="shown.set(shown() === each.id ? null : each.id)"
            >
              <span class="who">{{ each.by.name }}</span>
              <span>{{ each.activeMinutes }} min</span>
              <span [class]="each.right === each.checked ? 'tone-right' : 'tone-slip'"
                >{{ each.right }} of {{ each.checked }}</span
              >
            </button>
            @if (shown() === each.id) {
              <p class="caption quiet">revision {{ each.revision }}, {{ moment(each.handedInAt) }}</p>
              <app-try-out-answers [tryOut]="each" />
            }
          </li>
        } @empty {
          @if (!tryOuts.isLoading()) {
            <li class="quiet">Nobody has tried it out yet.</li>
          }
        }
      </ul>
    }
  `,
  styleUrl: './try-out-list.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class TryOutList {
  private readonly api = inject(TryOutsApi);
  private readonly session = inject(Session);
  private readonly review = inject(OpenReview);
  protected readonly open = inject(OpenProblem);

  readonly problemId = input.required<string>();
  readonly courseId = input.required<string>();

  protected readonly tryOuts = rxResource({
    params: () => this.problemId(),
    stream: ({ params }) => this.api.tryOuts(params),
  });
  protected readonly items = computed(() => (this.tryOuts.hasValue() ? this.tryOuts.value().items : []));
  protected readonly shown = signal<string | null>(null);
  protected readonly sentence = sentenceOf;

  constructor() {
    // A try-out that is handed in elsewhere is told like everything else that colleagues do.
    effect(() => {
      if (this.review.review()) untracked(() => this.tryOuts.reload());
    });
  }

  protected moment(at: number): string {
    return momentOf(at, this.session.course()?.timeZone ?? 'UTC');
  }
}
