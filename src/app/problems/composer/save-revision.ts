import { ChangeDetectionStrategy, Component, inject, input, output, signal } from '@angular/core';
import { MatButtonModule } from '@angular/material/button';
import { sentenceOf } from '../../core/api/request-failure';
import type { FaultPlace } from './fault-place';
import { OpenProblem } from './open-problem';
import { TypedField } from './typed-field';

/** Asks what is new, and makes a revision; says what stands in its way. */
@Component({
  selector: 'app-save-revision',
  imports: [MatButtonModule, TypedField],
  template: `
    <form (submit)="save($event)">
      <app-typed-field
        [label]="'What is new in revision ' + number()"
        placeholder="for example: transmittances without 0.50"
        [value]="reason()"
        [fault]="reasonFault()"
        (valueChange)="reason.set($event)"
      />
      <button matButton="filled" [disabled]="isBusy()">
        {{ isBusy() ? 'Evaluating keys …' : 'Save revision ' + number() }}
      </button>
      <button matButton type="button" (click)="closed.emit()">Not now</button>
    </form>
    @if (failure(); as words) {
      <p class="tone-wrong" role="alert">{{ words }}</p>
    }
    @if (toMend().length > 0) {
      <div role="alert">
        <p>
          The draft is kept. Before it becomes a revision,
          {{ toMend().length === 1 ? 'one thing is' : toMend().length + ' things are' }} to mend:
        </p>
        <ul>
          @for (fault of toMend(); track $index) {
            <li>
              @if (fault.tab !== null) {
                <button type="button" class="place" (click)="goTo.emit(fault.tab)">{{ fault.words }}</button>
              } @else {
                <b>{{ fault.words }}</b>
              }
              {{ fault.message }}
            </li>
          }
        </ul>
      </div>
    }
  `,
  styleUrl: './save-revision.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class SaveRevision {
  private readonly open = inject(OpenProblem);

  readonly number = input.required<number>();
  /** What stands in the way, once a revision was asked for. */
  readonly toMend = input.required<readonly (FaultPlace & { readonly message: string })[]>();
  readonly goTo = output<string>();
  readonly closed = output();

  protected readonly reason = signal('');
  protected readonly reasonFault = signal('');
  protected readonly isBusy = signal(false);
  protected readonly failure = signal('');

  protected async save(event: Event): Promise<void> {
    event.preventDefault();
    this.reasonFault.set(this.reason().trim() === '' ? 'Say what is new in a few words.' : '');
    this.failure.set('');
    if (this.reasonFault() || this.isBusy()) return;
    this.isBusy.set(true);
    try {
      if (await this.open.makeRevision(this.reason().trim())) this.closed.emit();
    } catch (error) {
      this.failure.set(sentenceOf(error));
    } finally {
      this.isBusy.set(false);
    }
  }
}
