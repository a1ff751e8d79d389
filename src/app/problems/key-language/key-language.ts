import {
  ChangeDetectionStrategy,
  Component,
  type ElementRef,
  afterRenderEffect,
  computed,
  inject,
  input,
  signal,
  viewChild,
} from '@angular/core';
import { rxResource, takeUntilDestroyed, toObservable } from '@angular/core/rxjs-interop';
import { MatButtonModule } from '@angular/material/button';
import { MatIconModule } from '@angular/material/icon';
import { Router, RouterLink } from '@angular/router';
import { debounceTime, skip } from 'rxjs';
import type { KeyFunction } from '@shared/key-language';
import { printNumber } from '@shared/reading/print';
import { ProblemsApi } from '../../core/api/problems-api';
import { RequestFailure, sentenceOf } from '../../core/api/request-failure';
import { ErrorState } from '../../ui/error-state/error-state';
import { FormulaText } from '../../ui/formula-text/formula-text';
import { LoadingBars } from '../../ui/loading-bars/loading-bars';
import { KeyValue } from '../composer/key-value';
import { findFunctions } from './find-functions';

/** Most functions that a search shows at once. */
const mostShown = 50;

/** The key language for those who write keys: each function with formula, arguments and an example that was run. */
@Component({
  selector: 'app-key-language',
  imports: [ErrorState, FormulaText, KeyValue, LoadingBars, MatButtonModule, MatIconModule, RouterLink],
  templateUrl: './key-language.html',
  styleUrl: './key-language.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export default class KeyLanguagePage {
  private readonly api = inject(ProblemsApi);
  private readonly router = inject(Router);

  private readonly headings = viewChild<ElementRef<HTMLElement>>('headings');

  readonly courseId = input.required<string>();
  /** Words to find, in the address. */
  readonly search = input<string>();
  /** The heading whose functions are shown, in the address. */
  readonly about = input<string>();

  protected readonly typed = signal<string | null>(null);
  protected readonly language = rxResource({ stream: () => this.api.keyLanguage('run') });
  protected readonly error = computed(() => {
    const error = this.language.error();
    const cause = error?.cause instanceof RequestFailure ? error.cause : error;
    return cause
      ? { text: sentenceOf(cause), id: cause instanceof RequestFailure ? cause.details.requestId : undefined }
      : null;
  });

  private readonly functions = computed<readonly KeyFunction[]>(() =>
    this.language.hasValue() ? this.language.value().functions : [],
  );
  protected readonly groups = computed(() => {
    const counts = new Map<string, number>();
    for (const { group } of this.functions()) counts.set(group, (counts.get(group) ?? 0) + 1);
    return [...counts].map(([name, count]) => ({ name, count }));
  });
  protected readonly words = computed(() => this.search()?.trim() ?? '');
  /** The heading that is shown; what is searched for is looked for under all of them. */
  protected readonly group = computed(() => {
    if (this.words() !== '') return '';
    const names = this.groups().map(({ name }) => name);
    return names.find((name) => name === this.about()) ?? names[0] ?? '';
  });
  protected readonly found = computed(() =>
    this.words() === ''
      ? this.functions().filter(({ group }) => group === this.group())
      : findFunctions(this.functions(), this.words()),
  );
  protected readonly shown = computed(() => this.found().slice(0, mostShown));
  protected readonly constants = computed(() =>
    (this.language.hasValue() ? this.language.value().constants : []).map((each) => ({
      ...each,
      printed: printNumber(each.value, 12),
    })),
  );
  protected readonly count = computed(() => {
    const found = this.found().length;
    if (this.words() === '') return '';
    return `${String(found)} ${found === 1 ? 'function' : 'functions'} found${found > mostShown ? `, the first ${String(mostShown)} are shown` : ''}`;
  });

  constructor() {
    // On narrow screens the headings are one line, in which the one that is shown must be in sight.
    afterRenderEffect(() => {
      this.group();
      const line = this.headings()?.nativeElement;
      const shown = line?.querySelector<HTMLElement>('.on');
      if (line && shown) line.scrollLeft = shown.offsetLeft - line.offsetLeft - 16;
    });
    toObservable(this.typed)
      .pipe(skip(1), debounceTime(200), takeUntilDestroyed())
      .subscribe((typed) => {
        const search = typed?.trim() ?? '';
        this.show({ search: search === '' ? null : search });
      });
  }

  protected clear(): void {
    this.typed.set('');
  }

  private show(query: { search: string | null }): void {
    void this.router.navigate([], { queryParams: query, queryParamsHandling: 'merge', replaceUrl: true });
  }
}
