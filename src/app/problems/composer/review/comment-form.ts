import {
  ChangeDetectionStrategy,
  Component,
  computed,
  inject,
  input,
  linkedSignal,
  output,
  signal,
} from '@angular/core';
import { MatButtonModule } from '@angular/material/button';
import { linesOfPart } from '@shared/comment-place';
import { partLabel } from '@shared/problems';
import type { CommentAnchor } from '@shared/review';
import { sentenceOf } from '../../../core/api/request-failure';
import { OpenProblem } from '../open-problem';
import { TypedField } from '../typed-field';
import { OpenReview } from './open-review';

/** Something that can be commented on. */
interface Subject {
  readonly words: string;
  readonly anchor: CommentAnchor;
  /** What suggested wording would take the place of; null where none can be suggested. */
  readonly wording: string | null;
}

/** Writes a comment on a line, a part, a key or a criterion, with suggested wording where that is wanted. */
@Component({
  selector: 'app-comment-form',
  imports: [MatButtonModule, TypedField],
  template: `
    <form (submit)="send($event)">
      <label [for]="'comment-about'">About</label>
      <select #about id="comment-about" (change)="chosen.set(about.selectedIndex)">
        @for (each of subjects(); track $index) {
          <option [selected]="$index === chosen()">{{ each.words }}</option>
        }
      </select>
      <app-typed-field label="Comment" [rows]="3" [value]="text()" [fault]="fault()" (valueChange)="text.set($event)" />
      @if (subject().wording !== null) {
        @if (wording() === null) {
          <button matButton type="button" class="compact" (click)="wording.set(subject().wording)">
            Suggest wording
          </button>
        } @else {
          <app-typed-field
            label="Suggested wording"
            [rows]="4"
            [value]="wording() ?? ''"
            (valueChange)="wording.set($event)"
          />
        }
      }
      <div class="deeds">
        <button matButton="outlined" [disabled]="isBusy()">Send the comment</button>
        <button matButton type="button" (click)="closed.emit()">Not now</button>
      </div>
      @if (failure(); as words) {
        <p class="tone-wrong" role="alert">{{ words }}</p>
      }
    </form>
  `,
  styleUrl: './review-form.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class CommentForm {
  private readonly review = inject(OpenReview);
  private readonly open = inject(OpenProblem);

  /** The line where the cursor stands, from 1. */
  readonly line = input.required<number>();
  readonly closed = output();

  protected readonly text = signal('');
  protected readonly fault = signal('');
  protected readonly failure = signal('');
  protected readonly isBusy = signal(false);

  protected readonly subjects = computed<readonly Subject[]>(() => {
    const draft = this.open.draft();
    if (!draft) return [];
    const lines = draft.statement.split('\n').map((text, index): Subject => ({
      words: `line ${String(index + 1)}: ${text.trim().slice(0, 40) || '(empty)'}`,
      anchor: { kind: 'line', line: index + 1, text },
      wording: text,
    }));
    const parts = draft.parts.flatMap((part, index): Subject[] => {
      const label = partLabel(index);
      const partId = part.id;
      return [
        {
          words: `(${label}), the part`,
          anchor: { kind: 'part', partId },
          wording: linesOfPart(draft.statement, label)?.text ?? null,
        },
        { words: `(${label}) key`, anchor: { kind: 'key', partId }, wording: null },
        ...part.criteria.map(({ id: criterionId, name }): Subject => ({
          words: `(${label}) criterion ${name}`,
          anchor: { kind: 'criterion', partId, criterionId },
          wording: null,
        })),
      ];
    });
    return [...lines, ...parts, { words: 'the problem as a whole', anchor: { kind: 'problem' }, wording: null }];
  });
  /** Follows the cursor. */
  protected readonly chosen = linkedSignal<number, number>({
    source: this.line,
    computation: (line) => Math.max(0, line - 1),
  });
  protected readonly subject = computed<Subject>(
    () =>
      this.subjects()[this.chosen()] ?? { words: 'the problem as a whole', anchor: { kind: 'problem' }, wording: null },
  );
  /** Suggested wording for what is chosen; null while none is wanted. */
  protected readonly wording = linkedSignal<string | null, string | null>({
    source: () => this.subject().wording,
    computation: () => null,
  });

  protected async send(event: Event): Promise<void> {
    event.preventDefault();
    const { anchor, wording: present } = this.subject();
    const wording = this.wording();
    const suggests = wording !== null && wording !== present;
    this.fault.set(this.text().trim() === '' && !suggests ? 'Write a comment, or suggest other wording.' : '');
    if (this.fault() || this.isBusy()) return;
    this.isBusy.set(true);
    this.failure.set('');
    try {
      await this.review.comment(anchor, this.text().trim(), suggests ? wording : undefined);
      this.closed.emit();
    } catch (error) {
      this.failure.set(sentenceOf(error));
    } finally {
      this.isBusy.set(false);
    }
  }
}
