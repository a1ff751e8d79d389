import { ChangeDetectionStrategy, Component, computed, effect, inject, input, untracked } from '@angular/core';
import { rxResource } from '@angular/core/rxjs-interop';
import { RouterLink } from '@angular/router';
import { EMPTY } from 'rxjs';
import { momentOf } from '@shared/times';
import { sentenceOf } from '../../core/api/request-failure';
import { SetsApi } from '../../core/api/sets-api';
import { PageTitle } from '../../core/page-title';
import { CountsTable } from '../../ui/counts-table/counts-table';
import { ErrorState } from '../../ui/error-state/error-state';
import { FormulaText } from '../../ui/formula-text/formula-text';
import { Typesetter } from '../../ui/formula-text/typesetter';
import { LoadingBars } from '../../ui/loading-bars/loading-bars';
import { KeptCopies } from '../kept-copies';
import { SheetKeeper } from '../sheet-keeper';
import { SheetPart } from '../sheet-part/sheet-part';

/** A sheet as one student gets it, for a lead to read: their numbers and their time, no answer of theirs. */
@Component({
  selector: 'app-sheet-preview',
  imports: [CountsTable, ErrorState, FormulaText, LoadingBars, RouterLink, SheetPart],
  template: `
    @if (failure(); as sentence) {
      <div class="column"><app-error-state [text]="sentence" (retried)="fetched.reload()" /></div>
    } @else if (sheet() && typesetter.ready()) {
      @let its = sheet();
      <div class="column">
        <header>
          <p class="caption">
            <a [routerLink]="['/courses', courseId(), 'sets', setId()]">Set {{ its?.number }}</a>
          </p>
          <h1>{{ its?.title }}</h1>
          <p class="notice">
            As {{ its?.student }} gets it{{ closing() ? ', closing ' + closing() : '' }}. Nothing can be typed here, and
            their answers are not shown.
          </p>
          @if (its?.coverText) {
            <app-formula-text class="read" [text]="its?.coverText ?? ''" />
          }
        </header>
        @for (each of problems(); track each.problem.setProblemId) {
          <section [attr.aria-label]="'Problem ' + each.problem.position">
            <p class="caption quiet">Problem {{ each.problem.position }}, {{ each.problem.marks }} marks</p>
            <h2>{{ each.problem.title }}</h2>
            @if (each.problem.stem) {
              <app-formula-text class="read" [text]="each.problem.stem" [givens]="each.problem.givens" />
            }
            @for (data of each.problem.data; track data.name) {
              <app-counts-table [name]="data.name" [symbol]="data.symbol" [counts]="data.counts" />
            }
            @for (part of each.parts; track part.anchor) {
              <app-sheet-part [inHand]="part" [givens]="each.problem.givens" [timeZone]="zone()" [readonly]="true" />
            }
          </section>
        } @empty {
          <p class="quiet">No problem is in this set yet.</p>
        }
      </div>
    } @else {
      <div class="column"><app-loading-bars [count]="8" [rowHeight]="72" label="The sheet is on its way" /></div>
    }
  `,
  styles: `
    :host {
      display: block;
      flex: 1;
      background: var(--paper);
    }

    .column {
      max-width: 784px;
      margin: 0 auto;
      padding: 32px 48px 64px;
    }

    .notice {
      margin: 12px 0;
      padding: 8px 12px;
      border-left: 3px solid var(--line);
      background: var(--line-wash);
    }

    section {
      padding-top: 24px;
    }

    h1 {
      font: 600 26px/34px var(--read);
    }

    h2 {
      margin: 2px 0 10px;
      font: 600 22px/28px var(--read);
    }

    .read {
      display: block;
    }

    @media (max-width: 600px) {
      .column {
        padding: 20px 16px 48px;
      }
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export default class SheetPreview {
  private readonly api = inject(SetsApi);
  private readonly pageTitle = inject(PageTitle);
  protected readonly typesetter = inject(Typesetter);

  readonly courseId = input.required<string>();
  readonly setId = input.required<string>();
  readonly membershipId = input.required<string>();

  protected readonly fetched = rxResource({
    params: () => ({ setId: this.setId(), membershipId: this.membershipId() }),
    stream: ({ params }) => this.api.previewSheet(params.setId, params.membershipId),
  });
  protected readonly failure = computed(() => {
    const error = this.fetched.error();
    return error ? sentenceOf(error.cause ?? error) : '';
  });
  protected readonly sheet = computed(() => (this.fetched.hasValue() ? this.fetched.value() : null));
  protected readonly zone = computed(() => this.sheet()?.timeZone ?? 'UTC');
  protected readonly closing = computed(() => {
    const at = this.sheet()?.closesAt;
    return at == null ? '' : momentOf(at, this.zone());
  });
  /** Its parts as a sheet shows them; nothing is ever saved from here. */
  protected readonly problems = computed(() => {
    const sheet = this.sheet();
    if (!sheet) return [];
    const place = {
      copies: new KeptCopies('preview', sheet.setId),
      save: () => EMPTY,
      saveInPassing: () => undefined,
      closed: () => undefined,
    };
    // A keeper sets signals of its own while it is made.
    return untracked(() => new SheetKeeper({ ...sheet, state: 'closed' }, place).problems);
  });

  constructor() {
    this.typesetter.load();
    effect(() => {
      const sheet = this.sheet();
      if (sheet) this.pageTitle.set(`Set ${String(sheet.number)} as ${sheet.student} gets it`);
    });
  }
}
