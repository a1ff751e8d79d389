import { ChangeDetectionStrategy, Component, computed, inject, input, signal } from '@angular/core';
import { MatButtonModule } from '@angular/material/button';
import { MatFormFieldModule } from '@angular/material/form-field';
import { MatInputModule } from '@angular/material/input';
import { MatTableModule } from '@angular/material/table';
import { RouterLink } from '@angular/router';
import { firstValueFrom } from 'rxjs';
import type { RosterRow } from '@shared/courses';
import { CoursesApi } from '../../core/api/courses-api';
import { sentenceOf } from '../../core/api/request-failure';

interface Preview {
  readonly rows: readonly RosterRow[];
  readonly good: number;
  readonly wrong: number;
}

/** Adds people from a CSV file: first what every row would do, then, when nothing is wrong, the import. */
@Component({
  selector: 'app-roster-import',
  imports: [MatButtonModule, MatFormFieldModule, MatInputModule, MatTableModule, RouterLink],
  templateUrl: './roster-import.html',
  styleUrl: './roster-import.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export default class RosterImport {
  private readonly api = inject(CoursesApi);

  readonly courseId = input.required<string>();

  protected readonly csv = signal('');
  protected readonly preview = signal<Preview | null>(null);
  protected readonly onlyWrong = signal(false);
  protected readonly failure = signal('');
  protected readonly done = signal('');
  protected readonly busy = signal(false);
  protected readonly columns = ['line', 'name', 'email', 'role', 'outcome'];
  protected readonly shown = computed(() => {
    const rows = this.preview()?.rows ?? [];
    const chosen = this.onlyWrong() ? rows.filter((row) => row.outcome === 'wrong') : rows;
    return chosen.slice(0, 500);
  });
  protected readonly hidden = computed(() => {
    const rows = this.preview()?.rows ?? [];
    return (this.onlyWrong() ? (this.preview()?.wrong ?? 0) : rows.length) - this.shown().length;
  });

  protected async readFile(files: FileList | null): Promise<void> {
    const file = files?.[0];
    if (!file) return;
    if (file.size > 1_000_000) {
      this.failure.set('The file is larger than a megabyte. A list of people is smaller; is it the right one?');
      return;
    }
    this.write(await file.text());
    await this.look();
  }

  protected write(text: string): void {
    this.csv.set(text);
    this.preview.set(null);
    this.done.set('');
  }

  protected look(): Promise<void> {
    return this.attempt(async () => {
      const preview = await firstValueFrom(this.api.previewRoster(this.courseId(), this.csv()));
      this.preview.set(preview);
      this.onlyWrong.set(preview.wrong > 0);
    });
  }

  protected importAll(): Promise<void> {
    return this.attempt(async () => {
      const { added, invited, unchanged } = await firstValueFrom(this.api.importRoster(this.courseId(), this.csv()));
      this.write('');
      this.done.set(
        `${String(added)} people were added, ${String(invited)} of them invited by mail; ${String(unchanged)} were here already.`,
      );
    });
  }

  private async attempt(act: () => Promise<void>): Promise<void> {
    this.failure.set('');
    this.busy.set(true);
    try {
      await act();
    } catch (error) {
      this.failure.set(sentenceOf(error));
    } finally {
      this.busy.set(false);
    }
  }
}
