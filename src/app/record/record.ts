import { ChangeDetectionStrategy, Component, computed, inject, input } from '@angular/core';
import { rxResource } from '@angular/core/rxjs-interop';
import { MatFormFieldModule } from '@angular/material/form-field';
import { MatIconModule } from '@angular/material/icon';
import { MatInputModule } from '@angular/material/input';
import { MatPaginatorModule } from '@angular/material/paginator';
import { MatSelectModule } from '@angular/material/select';
import { MatTableModule } from '@angular/material/table';
import { Router } from '@angular/router';
import { momentOf } from '@shared/times';
import { address } from '../core/address';
import { RecordApi } from '../core/api/record-api';
import { sentenceOf } from '../core/api/request-failure';
import { Session } from '../core/session';
import { EmptyState } from '../ui/empty-state/empty-state';
import { ErrorState } from '../ui/error-state/error-state';

/** Who did what in the course, in words, newest first. Filters live in the address. */
@Component({
  selector: 'app-record',
  imports: [
    EmptyState,
    ErrorState,
    MatFormFieldModule,
    MatIconModule,
    MatInputModule,
    MatPaginatorModule,
    MatSelectModule,
    MatTableModule,
  ],
  template: `
    <div class="page">
      <header>
        <h1>Record</h1>
        <p class="quiet">Who did what, when. Nothing here can be changed or removed.</p>
      </header>
      <div class="filters" role="search" aria-label="Record">
        <mat-form-field>
          <mat-label>Search</mat-label>
          <input
            matInput
            type="search"
            [value]="search()"
            (change)="goTo({ search: query.value, page: null })"
            #query
          />
          <mat-icon matSuffix svgIcon="search" />
        </mat-form-field>
        <mat-form-field>
          <mat-label>About</mat-label>
          <mat-select [value]="thing()" (valueChange)="goTo({ thing: $event || null, page: null })">
            <mat-option value="">everything</mat-option>
            @for (each of things(); track each) {
              <mat-option [value]="each">{{ each }}</mat-option>
            }
          </mat-select>
        </mat-form-field>
      </div>
      @if (problem(); as sentence) {
        <app-error-state [text]="sentence" (retried)="record.reload()" />
      } @else if (record.hasValue()) {
        @if (record.value().items.length === 0) {
          <app-empty-state
            [text]="
              search() || thing()
                ? 'Nothing in the record fits. Take the filters away to see all of it.'
                : 'Nothing has happened in this course yet. Every change of people, sets and marks will stand here.'
            "
          />
        } @else {
          <div class="scroll" tabindex="0" role="region" aria-label="Entries of the record">
            <table mat-table [dataSource]="record.value().items">
              <ng-container matColumnDef="at">
                <th mat-header-cell *matHeaderCellDef>when</th>
                <td mat-cell *matCellDef="let entry" class="quiet">{{ moment(entry.at) }}</td>
              </ng-container>
              <ng-container matColumnDef="actor">
                <th mat-header-cell *matHeaderCellDef>who</th>
                <td mat-cell *matCellDef="let entry">{{ entry.actor ?? 'the server' }}</td>
              </ng-container>
              <ng-container matColumnDef="sentence">
                <th mat-header-cell *matHeaderCellDef>what</th>
                <td mat-cell *matCellDef="let entry" class="sentence">
                  {{ entry.sentence }}
                  @if (entry.reason) {
                    <span class="quiet">Reason: {{ entry.reason }}</span>
                  }
                </td>
              </ng-container>
              <ng-container matColumnDef="thing">
                <th mat-header-cell *matHeaderCellDef>about</th>
                <td mat-cell *matCellDef="let entry" class="quiet">{{ entry.thing }}</td>
              </ng-container>
              <tr mat-header-row *matHeaderRowDef="columns"></tr>
              <tr mat-row *matRowDef="let row; columns: columns"></tr>
            </table>
          </div>
          @if (record.value().total > 50) {
            <mat-paginator
              aria-label="Pages of the record"
              [length]="record.value().total"
              [pageIndex]="page() - 1"
              [pageSize]="50"
              hidePageSize
              (page)="goTo({ page: $event.pageIndex + 1 })"
            />
          }
        }
      } @else {
        <div class="waiting" aria-hidden="true"></div>
      }
    </div>
  `,
  styles: `
    .page {
      display: grid;
      gap: 16px;
      width: 100%;
      max-width: 1200px;
      padding: 32px 48px 64px;
    }
    .filters {
      display: flex;
      flex-wrap: wrap;
      gap: 12px;
    }
    .scroll {
      overflow-x: auto;
    }
    .mat-mdc-cell {
      white-space: nowrap;
    }
    .sentence {
      min-width: 280px;
      white-space: normal;
    }
    .waiting {
      min-height: 60vh;
    }
    @media (max-width: 760px) {
      .page {
        padding: 24px 16px 48px;
      }
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export default class Record {
  private readonly api = inject(RecordApi);
  private readonly router = inject(Router);
  private readonly session = inject(Session);

  readonly courseId = input.required<string>();
  readonly search = input('', { transform: address.text });
  readonly thing = input('', { transform: address.text });
  readonly page = input(1, { transform: address.page });

  protected readonly columns = ['at', 'actor', 'sentence', 'thing'];
  protected readonly record = rxResource({
    params: () => ({ courseId: this.courseId(), search: this.search(), thing: this.thing(), page: this.page() }),
    stream: ({ params: { courseId, ...query } }) => this.api.record(courseId, query),
  });
  protected readonly problem = computed(() => {
    const error = this.record.error();
    return error ? sentenceOf(error.cause ?? error) : '';
  });
  protected readonly things = computed(() => (this.record.hasValue() ? this.record.value().things : []));

  protected goTo(queryParams: { search?: string; thing?: string | null; page?: number | null }): void {
    void this.router.navigate([], { queryParams, queryParamsHandling: 'merge', replaceUrl: true });
  }

  protected moment(instant: number): string {
    return momentOf(instant, this.session.course()?.timeZone ?? 'UTC');
  }
}
