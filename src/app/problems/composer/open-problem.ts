import { DestroyRef, Injectable, computed, inject, signal } from '@angular/core';
import { firstValueFrom } from 'rxjs';
import type { FieldProblem, ProblemDetails } from '@shared/problem-details';
import type { ProblemDraft } from '@shared/problem-draft';
import type { ProblemDetail } from '@shared/problem-routes';
import { problemDetail } from '@shared/problem-routes';
import type { ProblemStatus } from '@shared/problems';
import { readDraft } from '@shared/read-draft';
import { ProblemsApi } from '../../core/api/problems-api';
import { RequestFailure, sentenceOf } from '../../core/api/request-failure';
import { DraftShelf } from './draft-shelf';

/** How long typing must rest before it is kept, and how long it may go on without being kept. */
const restBeforeKeeping = 700;
const longestUnkept = 3000;
/** Waits between tries while the server does not answer. */
const tries = [2000, 4000, 8000, 15_000];

/** Where continuous saving stands. */
export type Keeping =
  { readonly state: 'kept' | 'typing' | 'saving' } | { readonly state: 'not kept' | 'refused'; readonly why: string };

/**
 * The problem that the composer has open: its draft as it is typed, kept on the server as typing goes on. Until the
 * server has acknowledged it a draft is on this browser's shelf too.
 */
@Injectable()
export class OpenProblem {
  private readonly api = inject(ProblemsApi);
  private readonly shelf = inject(DraftShelf);
  private readonly detailSignal = signal<ProblemDetail | null>(null);
  private readonly draftSignal = signal<ProblemDraft | null>(null);
  private readonly keepingSignal = signal<Keeping>({ state: 'kept' });
  private readonly otherSignal = signal<ProblemDetail | null>(null);
  private readonly failureSignal = signal<ProblemDetails | null>(null);
  private readonly fromServer = signal<readonly FieldProblem[]>([]);
  private readonly showAllSignal = signal(false);
  private readonly readsOnly = signal(false);
  private timer: ReturnType<typeof setTimeout> | undefined;
  private unkeptSince = 0;
  private failures = 0;
  private running: Promise<void> | null = null;
  private closed = false;

  /** The problem as the server has it; null while it loads. */
  readonly detail = this.detailSignal.asReadonly();
  /** The draft as it is typed. */
  readonly draft = this.draftSignal.asReadonly();
  readonly keeping = this.keepingSignal.asReadonly();
  /** What somebody else, or another page, saved meanwhile; null where there is no conflict. */
  readonly other = this.otherSignal.asReadonly();
  /** Why the problem could not be loaded. */
  readonly failure = this.failureSignal.asReadonly();
  /** Whether empty fields show what they lack; they do once a revision was asked for. */
  readonly showsAll = this.showAllSignal.asReadonly();
  readonly canEdit = computed(() => !this.readsOnly() && this.detail()?.status !== 'retired' && this.other() === null);

  /** What is wrong with the draft as it stands, keys aside. */
  readonly faults = computed<readonly FieldProblem[]>(() => {
    const draft = this.draft();
    return draft ? [...readDraft(draft).faults, ...this.fromServer()] : [];
  });
  private readonly faultsByPath = computed(() => {
    const byPath = new Map<string, FieldProblem[]>();
    for (const fault of this.faults()) {
      const path = fault.path.join('.');
      byPath.set(path, [...(byPath.get(path) ?? []), fault]);
    }
    return byPath;
  });

  constructor() {
    inject(DestroyRef).onDestroy(() => {
      this.closed = true;
      clearTimeout(this.timer);
    });
  }

  /** The faults at a path of the draft. */
  faultsAt(...path: FieldProblem['path']): readonly FieldProblem[] {
    return this.faultsByPath().get(path.join('.')) ?? [];
  }

  /** The first message at a path, as a field shows it: what an empty field lacks shows only when asked for. */
  faultAt(typed: string, ...path: FieldProblem['path']): string {
    if (typed.trim() === '' && !this.showsAll()) return '';
    return this.faultsAt(...path)[0]?.message ?? '';
  }

  async load(problemId: string): Promise<void> {
    this.failureSignal.set(null);
    try {
      const detail = await firstValueFrom(this.api.problem(problemId));
      this.take(detail);
      this.unshelve(detail);
    } catch (error) {
      if (!(error instanceof RequestFailure)) throw error;
      this.failureSignal.set(error.details);
    }
  }

  /** Takes what an earlier visit typed and the server never acknowledged. */
  private unshelve(detail: ProblemDetail): void {
    const shelved = this.shelf.take(detail.id);
    if (!shelved) return;
    if (JSON.stringify(shelved.draft) === JSON.stringify(detail.draft)) {
      this.shelf.clear(detail.id);
      return;
    }
    this.draftSignal.set(shelved.draft);
    if (shelved.version === detail.version) this.schedule();
    else this.otherSignal.set(detail);
  }

  /** Takes the server's state whole, draft and all. */
  private take(detail: ProblemDetail): void {
    this.detailSignal.set(detail);
    this.draftSignal.set(detail.draft);
    this.otherSignal.set(null);
    this.keepingSignal.set({ state: 'kept' });
  }

  /** Changes the draft, and keeps it when typing rests. */
  change(next: (draft: ProblemDraft) => ProblemDraft): void {
    const draft = this.draft();
    if (!draft || !this.canEdit()) return;
    const changed = next(draft);
    if (changed === draft) return;
    this.draftSignal.set(changed);
    this.fromServer.set([]);
    this.schedule();
  }

  private schedule(): void {
    const [detail, draft] = [this.detail(), this.draft()];
    if (detail && draft) this.shelf.put(detail.id, detail.version, draft);
    if (this.keeping().state === 'kept') this.unkeptSince = Date.now();
    if (this.keeping().state !== 'saving') this.keepingSignal.set({ state: 'typing' });
    const wait = Math.max(0, Math.min(restBeforeKeeping, this.unkeptSince + longestUnkept - Date.now()));
    this.later(wait);
  }

  private later(wait: number): void {
    clearTimeout(this.timer);
    this.timer = setTimeout(() => void this.save(), wait);
  }

  /** Keeps the draft now. @returns whether the server has all that is typed */
  async keep(): Promise<boolean> {
    clearTimeout(this.timer);
    await this.running;
    if (this.keeping().state !== 'kept' && this.other() === null) await this.save();
    return this.keeping().state === 'kept';
  }

  private save(): Promise<void> {
    this.running ??= this.saveOnce().finally(() => {
      this.running = null;
    });
    return this.running;
  }

  private async saveOnce(): Promise<void> {
    const [detail, draft] = [this.detail(), this.draft()];
    if (!detail || !draft || this.other()) return;
    this.keepingSignal.set({ state: 'saving' });
    try {
      const kept = await firstValueFrom(this.api.saveDraft(detail.id, detail.version, draft));
      this.failures = 0;
      this.detailSignal.set(kept);
      if (this.draft() === draft) {
        this.keepingSignal.set({ state: 'kept' });
        this.shelf.clear(kept.id);
      } else {
        this.unkeptSince = Date.now();
        this.keepingSignal.set({ state: 'typing' });
        this.schedule();
      }
    } catch (error) {
      this.explain(error);
    }
  }

  private explain(error: unknown): void {
    const details = error instanceof RequestFailure ? error.details : null;
    const current = details?.status === 412 ? problemDetail.safeParse(details.current) : null;
    if (current?.success) {
      this.otherSignal.set(current.data);
      this.keepingSignal.set({ state: 'refused', why: sentenceOf(error) });
      return;
    }
    const mayPass = details === null || details.status === 0 || details.status >= 500 || details.status === 401;
    this.keepingSignal.set({ state: mayPass ? 'not kept' : 'refused', why: sentenceOf(error) });
    if (!mayPass || this.closed) return;
    this.later(tries[Math.min(this.failures++, tries.length - 1)] ?? 0);
  }

  /** Says that the person reads and reviews, but writes nothing here. */
  readOnly(): void {
    this.readsOnly.set(true);
  }

  /** Lets a deed change the problem on the server, after what is typed was kept, and takes what it gives. */
  async takeFrom(deed: (problemId: string, version: number) => Promise<ProblemDetail>): Promise<void> {
    if (!(await this.keep())) return;
    const detail = this.detail();
    if (detail) this.take(await deed(detail.id, detail.version));
  }

  /** Takes the problem as the server has it now, unless something typed is not kept yet. */
  refresh(): Promise<void> {
    return this.takeFrom((problemId) => firstValueFrom(this.api.problem(problemId)));
  }

  /** Goes on with what is typed here, over what was saved elsewhere. */
  async goOnWithMine(): Promise<void> {
    const [other, draft] = [this.other(), this.draft()];
    if (!other || !draft) return;
    this.detailSignal.set(other);
    this.otherSignal.set(null);
    await this.save();
  }

  /** Goes on with what was saved elsewhere. What is typed here is gone from the page. */
  goOnWithTheirs(): void {
    const other = this.other();
    if (!other) return;
    this.shelf.clear(other.id);
    this.take(other);
  }

  /** Saves what is typed as a revision. @returns whether it was made; otherwise `faults` say what is wrong */
  async makeRevision(reason: string): Promise<boolean> {
    this.showAllSignal.set(true);
    if (!(await this.keep())) return false;
    const detail = this.detail();
    if (!detail || this.faults().length > 0) return false;
    try {
      this.take(await firstValueFrom(this.api.makeRevision(detail.id, detail.version, reason)));
      this.showAllSignal.set(false);
      return true;
    } catch (error) {
      if (!(error instanceof RequestFailure) || error.details.status !== 400) throw error;
      this.fromServer.set(error.details.fields ?? []);
      return false;
    }
  }

  /** Puts the problem in another state. @throws RequestFailure where that cannot be */
  async setStatus(status: ProblemStatus): Promise<void> {
    await this.takeFrom((problemId, version) => firstValueFrom(this.api.setStatus(problemId, version, status)));
  }
}
