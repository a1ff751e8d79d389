import {
  ChangeDetectionStrategy,
  Component,
  type ElementRef,
  computed,
  effect,
  inject,
  input,
  linkedSignal,
  signal,
  untracked,
  viewChild,
} from '@angular/core';
import { takeUntilDestroyed, toSignal } from '@angular/core/rxjs-interop';
import { MatButtonModule } from '@angular/material/button';
import { MatIconModule } from '@angular/material/icon';
import { MatMenuModule } from '@angular/material/menu';
import { Router, RouterLink } from '@angular/router';
import { catchError, firstValueFrom, fromEvent, of } from 'rxjs';
import type { KeyLanguage } from '@shared/key-language';
import type { DraftAnswer } from '@shared/problem-draft';
import { partLabel, type ProblemStatus } from '@shared/problems';
import { secondOf } from '@shared/times';
import { readTypedNumber, typeNumber } from '@shared/typed-number';
import { ProblemsApi } from '../../core/api/problems-api';
import { sentenceOf } from '../../core/api/request-failure';
import { PageTitle } from '../../core/page-title';
import { Session } from '../../core/session';
import { ErrorState } from '../../ui/error-state/error-state';
import { FormulaText } from '../../ui/formula-text/formula-text';
import { LoadingBars } from '../../ui/loading-bars/loading-bars';
import { AboutProblem } from './about-problem';
import { AuditFindings } from './audit/audit-findings';
import { ProblemAudit } from './audit/problem-audit';
import { addPart, movePart, removePart } from './draft-changes';
import type { ExpressionFault } from './expression-editor';
import { faultPlace } from './fault-place';
import { GivensTable } from './givens-table';
import type { KeyNames } from './key-language';
import { KeyPictures } from './key-pictures';
import { MarkScheme } from './mark-scheme';
import { OpenProblem } from './open-problem';
import { PartBench } from './part-bench';
import { PartHeading } from './part-heading';
import { ChangesSince } from './review/changes-since';
import { ColleaguesMargin } from './review/colleagues-margin';
import type { CommentPlace } from './review/comment-words';
import { OpenReview } from './review/open-review';
import { RevisionList } from './revision-list';
import { SampleVariants } from './sample-variants';
import { SaveRevision } from './save-revision';
import { StatementEditor, type NamedGiven } from './statement-editor';
import { StudentView } from './student-view';
import { TwoStates } from './two-states';
import { TypedField } from './typed-field';

/** What each change of state is called on a button. */
const statusDeeds: Readonly<Record<ProblemStatus, string>> = {
  draft: 'Take back to draft',
  'in review': 'Hand over for review',
  ready: 'Mark ready',
  retired: 'Retire',
};

const noLanguage: KeyLanguage = { functions: [], constants: [] };

/** A problem as it is written: statement beside what a student sees; below, givens and parts, one at a time. */
@Component({
  selector: 'app-composer',
  imports: [
    AboutProblem,
    AuditFindings,
    ChangesSince,
    ColleaguesMargin,
    ErrorState,
    FormulaText,
    GivensTable,
    KeyPictures,
    LoadingBars,
    MarkScheme,
    MatButtonModule,
    MatIconModule,
    MatMenuModule,
    PartBench,
    PartHeading,
    RevisionList,
    RouterLink,
    SaveRevision,
    StatementEditor,
    StudentView,
    TwoStates,
    TypedField,
  ],
  providers: [OpenProblem, OpenReview, ProblemAudit, SampleVariants],
  templateUrl: './composer.html',
  styleUrl: './composer.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export default class Composer {
  private readonly api = inject(ProblemsApi);
  private readonly router = inject(Router);
  private readonly session = inject(Session);
  private readonly pageTitle = inject(PageTitle);
  protected readonly open = inject(OpenProblem);
  protected readonly samples = inject(SampleVariants);
  protected readonly audit = inject(ProblemAudit);
  protected readonly review = inject(OpenReview);
  private readonly statementEditor = viewChild(StatementEditor);
  private readonly tabList = viewChild<ElementRef<HTMLElement>>('tabList');

  readonly courseId = input.required<string>();
  readonly problemId = input.required<string>();
  /** The tab, in the address: `givens`, `about` or the letter of a part. */
  readonly at = input<string>();

  /** Without the server's list the editor works, it only completes less. */
  private readonly language = toSignal(this.api.keyLanguage('left out').pipe(catchError(() => of(noLanguage))), {
    initialValue: noLanguage,
  });
  protected readonly isSaving = signal(false);
  protected readonly showsRevisions = signal(false);
  /** The revision that is shown beside the draft; null for none. */
  protected readonly comparesWith = signal<number | null>(null);
  /** The line of the statement where the cursor stands. */
  protected readonly line = signal(1);
  /** Markers who were asked to review read and comment; they write nothing here. */
  protected readonly isLead = computed(() => this.session.role() === 'lead');
  /** What went wrong with something asked for on this page. */
  protected readonly notice = signal('');
  protected readonly removed = signal<{ readonly label: string; readonly undo: () => void } | null>(null);
  protected readonly deeds = statusDeeds;

  protected readonly tab = linkedSignal<string | undefined, string>({
    source: this.at,
    computation: (at) => at ?? 'givens',
  });
  protected readonly partIndex = computed(() => {
    const tab = this.tab();
    const index = tab.length === 1 ? tab.charCodeAt(0) - 97 : -1;
    return index >= 0 && index < (this.open.draft()?.parts.length ?? 0) ? index : -1;
  });
  protected readonly part = computed(() => this.open.draft()?.parts[this.partIndex()]);
  private readonly partCount = computed(() => this.open.draft()?.parts.length ?? 0);

  protected readonly tabs = computed(() =>
    (this.open.draft()?.parts ?? []).map((part, index) => {
      const marks = part.criteria.reduce((sum, each) => sum + (readTypedNumber(each.marks) ?? 0), 0);
      const toMend = this.faultsOf(index);
      return {
        label: partLabel(index),
        heading: part.heading.trim(),
        marks: `${typeNumber(marks)} ${marks === 1 ? 'mark' : 'marks'}`,
        toMend,
        hasKeys:
          toMend === 0 &&
          this.samples.variants().length > 0 &&
          this.samples.variants().every((variant) => {
            const key = variant.parts[index]?.key;
            return key && 'method' in key;
          }),
      };
    }),
  );

  protected readonly names = computed<KeyNames>(() => {
    const draft = this.open.draft();
    const shown = this.samples.shown();
    const givens = (draft?.givens ?? [])
      .filter((given) => given.name.trim() !== '')
      .map((given) => {
        const printed = shown?.givens[given.name.trim()];
        return {
          name: given.name.trim(),
          detail: printed ? `${printed.printed} ${printed.unit ?? ''}`.trim() : 'given',
        };
      });
    const earlier = (draft?.parts ?? [])
      .slice(0, Math.max(0, this.partIndex()))
      .map((part, index) => ({ name: `part_${partLabel(index)}`, detail: part.heading.trim() || 'earlier part' }));
    const constants = this.language().constants.map(({ name, value, unit }) => ({
      name,
      detail: `${String(value)} ${unit}`,
    }));
    return { values: [...givens, ...earlier], constants, functions: this.language().functions };
  });

  protected readonly namedGivens = computed<readonly NamedGiven[]>(() =>
    this.names().values.filter((value) => !value.name.startsWith('part_')),
  );

  protected readonly statementFaults = computed<readonly ExpressionFault[]>(() => {
    const isEmpty = this.open.draft()?.statement.trim() === '';
    return isEmpty && !this.open.showsAll() ? [] : this.open.faultsAt('statement');
  });

  protected readonly standing = computed(() => {
    const detail = this.open.detail();
    if (!detail) return '';
    const revision = detail.latestRevision;
    const words = [
      revision
        ? `revision ${String(revision.number)}${this.hasChanged() ? ' and what is new' : ''}`
        : 'no revision yet',
      detail.status,
      ...(detail.mine ? [] : [`by ${detail.author}`]),
    ];
    return words.join(', ');
  });
  protected readonly hasChanged = computed(
    () => this.open.detail()?.changed === true || this.open.keeping().state !== 'kept',
  );
  protected readonly nextRevision = computed(() => (this.open.detail()?.latestRevision?.number ?? 0) + 1);

  protected readonly kept = computed(() => {
    const keeping = this.open.keeping();
    const detail = this.open.detail();
    const zone = this.session.course()?.timeZone ?? 'UTC';
    switch (keeping.state) {
      case 'kept':
        return detail ? `draft kept ${secondOf(detail.savedAt, zone)}` : '';
      case 'typing':
      case 'saving':
        return 'keeping …';
      case 'not kept':
        return 'kept in this browser only';
      case 'refused':
        return 'not kept';
    }
  });
  protected readonly whyNotKept = computed(() => {
    const keeping = this.open.keeping();
    return 'why' in keeping && this.open.other() === null ? keeping.why : '';
  });

  /** What stands in the way of a revision, once one was asked for. */
  protected readonly toMend = computed(() => {
    const draft = this.open.draft();
    if (!draft || !this.open.showsAll()) return [];
    const evaluated = this.samples.keyFaults().flatMap((fault, index) => {
      const path = ['parts', index, 'answer', 'key'];
      return fault && this.open.faultsAt(...path).length === 0 ? [{ ...fault, path }] : [];
    });
    return [...this.open.faults(), ...this.samples.faults(), ...evaluated].map((fault) => ({
      ...faultPlace(fault, draft),
      message: fault.message,
    }));
  });

  constructor() {
    effect(() => {
      const problemId = this.problemId();
      untracked(() => {
        if (!this.isLead()) this.open.readOnly();
        void this.open.load(problemId);
        void this.review.load(problemId);
      });
    });
    // The tab that is shown is in sight on narrow screens too.
    effect(() => {
      this.tab();
      this.partCount();
      const list = this.tabList()?.nativeElement;
      setTimeout(() => {
        const shown = list?.querySelector<HTMLElement>('.on');
        if (list && shown) list.scrollLeft = shown.offsetLeft - list.offsetLeft - list.clientWidth / 3;
      });
    });
    effect(() => {
      const title = this.open.draft()?.title.trim() ?? '';
      this.pageTitle.set(title === '' ? 'Problem' : title);
    });
    // The browser asks before a tab closes while something is not yet kept.
    fromEvent<BeforeUnloadEvent>(window, 'beforeunload')
      .pipe(takeUntilDestroyed())
      .subscribe((event) => {
        if (this.open.keeping().state !== 'kept') event.preventDefault();
      });
  }

  /** Keeps the draft before the page goes. */
  async keep(): Promise<boolean> {
    if (this.open.detail() === null || this.open.keeping().state === 'kept') return true;
    const isKept = await this.open.keep();
    // What cannot be kept on the server is on this browser's shelf, and taken up at the next visit.
    return isKept || this.open.keeping().state === 'not kept' || this.open.other() !== null;
  }

  private faultsOf(index: number): number {
    const draft = this.open.draft();
    const answer = draft?.parts[index]?.answer;
    const isBegun = answer !== undefined && (isWritten(answer) || this.open.showsAll());
    if (!isBegun) return 0;
    const typed = this.open.faults().filter((fault) => fault.path[0] === 'parts' && fault.path[1] === index);
    const failing = this.samples.keyFaults()[index] !== null && this.samples.keyFaults()[index] !== undefined;
    const keyIsNamed = typed.some((fault) => fault.path.join('.').endsWith('answer.key'));
    return typed.length + (failing && !keyIsNamed ? 1 : 0);
  }

  protected changeTitle(title: string): void {
    this.open.change((draft) => ({ ...draft, title }));
  }

  protected changeStatement(statement: string): void {
    this.open.change((draft) => ({ ...draft, statement }));
  }

  protected comeToLine(line: number): void {
    this.line.set(line);
    this.review.showLine(line);
  }

  protected showPlace({ line, tab }: CommentPlace): void {
    if (line !== null) this.statementEditor()?.showLine(line);
    else this.goTo(tab);
  }

  protected goTo(tab: string | null): void {
    if (tab !== null) void this.router.navigate([], { queryParams: { at: tab }, queryParamsHandling: 'merge' });
  }

  protected addPart(): void {
    const index = this.open.draft()?.parts.length ?? 0;
    this.open.change((draft) => addPart(draft, () => crypto.randomUUID()));
    this.goTo(partLabel(index));
  }

  protected movePart(from: number, to: number): void {
    this.open.change((draft) => movePart(draft, from, to));
    this.goTo(partLabel(to));
  }

  protected removePart(index: number): void {
    const before = this.open.draft()?.parts;
    if (!before) return;
    this.open.change((draft) => removePart(draft, index));
    this.goTo(before.length > 1 ? partLabel(Math.max(0, index - 1)) : 'givens');
    this.removed.set({
      label: `Part (${partLabel(index)}) is removed. Its line in the statement stays until you change it.`,
      undo: () => {
        this.open.change((draft) => ({ ...draft, parts: before }));
        this.removed.set(null);
        this.goTo(partLabel(index));
      },
    });
  }

  /** A new revision may void a sign-off. */
  protected closeSaving(): void {
    this.isSaving.set(false);
    void this.review.reload();
  }

  protected async setStatus(status: ProblemStatus): Promise<void> {
    // Making ready audits the revision first where that was not done yet.
    if (status === 'ready') this.audit.lookAgainSoon();
    await this.attempt(() => this.open.setStatus(status));
    this.audit.lookAgainSoon();
  }

  protected async copy(): Promise<void> {
    await this.attempt(async () => {
      await this.open.keep();
      const copy = await firstValueFrom(this.api.copyProblem(this.problemId()));
      await this.router.navigate(['/courses', this.courseId(), 'problems', copy.id]);
    });
  }

  protected async download(): Promise<void> {
    await this.attempt(async () => {
      await this.open.keep();
      const { name, text } = await firstValueFrom(this.api.problemFile(this.problemId()));
      const address = URL.createObjectURL(new Blob([text], { type: 'text/markdown' }));
      const link = document.createElement('a');
      link.href = address;
      link.download = name;
      link.click();
      URL.revokeObjectURL(address);
    });
  }

  private async attempt(deed: () => Promise<void>): Promise<void> {
    this.notice.set('');
    try {
      await deed();
    } catch (error) {
      this.notice.set(sentenceOf(error));
    }
  }
}

/** Whether an author has begun to say what the right answer is. */
function isWritten({ form, key, options }: DraftAnswer): boolean {
  if (form === 'worked') return true;
  return form === 'choice' ? options.some(({ text }) => text.trim() !== '') : key.trim() !== '';
}
