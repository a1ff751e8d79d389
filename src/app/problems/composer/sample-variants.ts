import { Injectable, computed, inject, signal } from '@angular/core';
import { takeUntilDestroyed, toObservable } from '@angular/core/rxjs-interop';
import { catchError, debounceTime, distinctUntilChanged, map, of, switchMap } from 'rxjs';
import type { FieldProblem } from '@shared/problem-details';
import type { ProblemDraft } from '@shared/problem-draft';
import type { ProblemSample, SampledKey, SampledVariant } from '@shared/problem-routes';
import { ProblemsApi } from '../../core/api/problems-api';
import { sentenceOf } from '../../core/api/request-failure';
import { OpenProblem } from './open-problem';

/** Why an expression has no value, and at which character. */
export type KeyFault = Extract<SampledKey, { readonly fault: unknown }>['fault'];

/** Sample variants of the draft with their keys, asked for anew whenever something changes that they depend on. */
@Injectable()
export class SampleVariants {
  private readonly api = inject(ProblemsApi);
  private readonly open = inject(OpenProblem);
  private readonly sampleSignal = signal<ProblemSample | null>(null);
  private readonly whySignal = signal('');
  private readonly waitingSignal = signal(false);
  private readonly wanted = signal<number | undefined>(undefined);
  private readonly seed = signal(0);

  /** The latest sample; it stays while the next one is computed. */
  readonly sample = this.sampleSignal.asReadonly();
  /** Whether what is shown is older than what is typed. */
  readonly isWaiting = this.waitingSignal.asReadonly();
  /** Why there is no sample; empty where there is one. */
  readonly why = this.whySignal.asReadonly();
  readonly variants = computed<readonly SampledVariant[]>(() => this.sample()?.variants ?? []);

  /** The variant that the preview and the ruler show. */
  readonly shown = computed<SampledVariant | null>(() => {
    const variants = this.variants();
    return (
      variants.find((variant) => variant.number === this.wanted()) ?? variants[Math.min(1, variants.length - 1)] ?? null
    );
  });
  /** Faults that only evaluation finds: givens that cannot be derived. */
  readonly faults = computed<readonly FieldProblem[]>(() => {
    const typed = new Set(this.open.faults().map((fault) => fault.path.join('.')));
    return (this.sample()?.faults ?? []).filter(
      (fault) => fault.path[0] === 'givens' && fault.path[2] === 'expression' && !typed.has(fault.path.join('.')),
    );
  });

  /** For each part, why its key has no value, on the first sample on which it fails; null where it has one on all. */
  readonly keyFaults = computed<readonly (KeyFault | null)[]>(() => {
    const parts = this.open.draft()?.parts ?? [];
    return parts.map((_, index) => {
      const keys = this.variants().map((variant) => variant.parts[index]?.key);
      const failing = keys.find((key) => key && 'fault' in key);
      return failing && 'fault' in failing ? failing.fault : null;
    });
  });

  constructor() {
    const request = computed(() => {
      const draft = this.open.draft();
      return draft && { draft, shown: this.wanted(), seed: String(this.seed()) };
    });
    toObservable(request)
      .pipe(
        map((each) => each && { ...each, matters: JSON.stringify([whatMatters(each.draft), each.shown, each.seed]) }),
        distinctUntilChanged((one, other) => one?.matters === other?.matters),
        map((each) => {
          this.waitingSignal.set(each !== null);
          return each;
        }),
        debounceTime(250),
        switchMap((each) => {
          if (!each) return of(null);
          const { draft, shown, seed } = each;
          return this.api.sampleProblem({ draft, seed, ...(shown === undefined ? {} : { shown }) }).pipe(
            catchError((error: unknown) => {
              this.whySignal.set(sentenceOf(error));
              return of(null);
            }),
          );
        }),
        takeUntilDestroyed(),
      )
      .subscribe((sample) => {
        this.waitingSignal.set(false);
        if (!sample) return;
        this.whySignal.set('');
        this.sampleSignal.set(sample);
      });
  }

  /** Shows the variant with a number; the first follows the last. */
  show(number: number): void {
    const count = this.sample()?.count;
    if (count) this.wanted.set(((((number - 1) % count) + count) % count) + 1);
  }

  /** Draws other samples; the one that is shown stays. */
  drawOthers(): void {
    this.wanted.set(this.shown()?.number ?? undefined);
    this.seed.update((seed) => seed + 1);
  }
}

/** What of a draft the samples depend on: text, marks and feedback do not count. */
function whatMatters(draft: ProblemDraft): unknown {
  return [
    draft.givens.map(({ spellings: _, ...given }) => given),
    draft.parts.map(({ answer }) => [
      answer.form,
      answer.key,
      answer.slips.map((slip) => slip.expression),
      answer.form === 'formula' ? answer.variables : [],
    ]),
    draft.convention,
  ];
}
