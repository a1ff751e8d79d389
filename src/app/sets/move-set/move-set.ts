import {
  ChangeDetectionStrategy,
  Component,
  type ElementRef,
  afterNextRender,
  computed,
  inject,
  input,
  output,
  signal,
  viewChild,
} from '@angular/core';
import { rxResource } from '@angular/core/rxjs-interop';
import { MatButtonModule } from '@angular/material/button';
import { MatIconModule } from '@angular/material/icon';
import { firstValueFrom } from 'rxjs';
import type { SetStage } from '@shared/primitives';
import type { SetDetail } from '@shared/sets';
import { SetsApi } from '../../core/api/sets-api';
import { sentenceOf } from '../../core/api/request-failure';
import { ErrorState } from '../../ui/error-state/error-state';
import { LoadingBars } from '../../ui/loading-bars/loading-bars';

/** What moving a set to a stage will do, and to whom, before it is done. */
@Component({
  selector: 'app-move-set',
  imports: [ErrorState, LoadingBars, MatButtonModule, MatIconModule],
  templateUrl: './move-set.html',
  styleUrl: './move-set.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class MoveSet {
  private readonly api = inject(SetsApi);
  private readonly heading = viewChild<ElementRef<HTMLElement>>('heading');

  readonly set = input.required<SetDetail>();
  readonly stage = input.required<SetStage>();
  /** It was moved; the set as it is now. */
  readonly moved = output<SetDetail>();
  /** The lead looked, and left it. */
  readonly left = output();

  protected readonly preview = rxResource({
    params: () => ({ setId: this.set().id, stage: this.stage(), version: this.set().version }),
    stream: ({ params }) => this.api.previewStage(params.setId, params.stage),
  });
  protected readonly problem = computed(() => {
    const error = this.preview.error();
    return error ? sentenceOf(error.cause ?? error) : '';
  });
  protected readonly busy = signal(false);
  protected readonly failure = signal('');
  protected readonly title = computed(
    () => `${titles[this.stage()]} Set ${String(this.set().number)}${ends[this.stage()] ?? ''}`,
  );
  protected readonly deed = computed(() => {
    const { students } = this.set().counts;
    const name = `${titles[this.stage()]} Set ${String(this.set().number)}${ends[this.stage()] ?? ''}`;
    return this.stage() === 'open' ? `${name} to ${String(students)} ${students === 1 ? 'student' : 'students'}` : name;
  });

  constructor() {
    afterNextRender(() => this.heading()?.nativeElement.focus());
  }

  protected async moveIt(): Promise<void> {
    const preview = this.preview.hasValue() ? this.preview.value() : null;
    if (!preview || this.busy()) return;
    this.busy.set(true);
    this.failure.set('');
    try {
      this.moved.emit(await firstValueFrom(this.api.moveStage(preview.setId, preview.version, preview.to)));
    } catch (error) {
      this.failure.set(sentenceOf(error));
      this.preview.reload();
    } finally {
      this.busy.set(false);
    }
  }
}

const titles: Readonly<Record<SetStage, string>> = {
  draft: 'Take',
  review: 'Move',
  ready: 'Make',
  open: 'Open',
  closed: 'Close',
  marking: 'Begin to mark',
  moderation: 'Move',
  released: 'Release',
  archived: 'Archive',
};

const ends: Partial<Record<SetStage, string>> = {
  draft: ' back to draft',
  review: ' to review',
  ready: ' ready',
  moderation: ' to moderation',
};
