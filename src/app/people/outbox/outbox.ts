import { ChangeDetectionStrategy, Component, computed, inject, input } from '@angular/core';
import { rxResource } from '@angular/core/rxjs-interop';
import { MatPaginatorModule } from '@angular/material/paginator';
import { Router } from '@angular/router';
import { fullMomentOf } from '@shared/times';
import { address } from '../../core/address';
import { AccountsApi } from '../../core/api/accounts-api';
import { sentenceOf } from '../../core/api/request-failure';
import { EmptyState } from '../../ui/empty-state/empty-state';
import { ErrorState } from '../../ui/error-state/error-state';

/** Every letter that was written, for administrators. Reading it stands in the record. */
@Component({
  selector: 'app-outbox',
  imports: [EmptyState, ErrorState, MatPaginatorModule],
  template: `
    <div class="page">
      <header>
        <h1>Outbox</h1>
        <p class="quiet">Letters without the secret part of their links. That you read them stands in the record.</p>
      </header>
      @if (problem(); as sentence) {
        <app-error-state [text]="sentence" (retried)="letters.reload()" />
      } @else if (letters.hasValue()) {
        @for (letter of letters.value().items; track letter.id) {
          <article class="letter">
            <div class="quiet caption">
              <div>{{ letter.kind }}</div>
              <div>{{ moment(letter.createdAt) }}</div>
              @if (letter.cancelledAt) {
                <div>taken back</div>
              } @else if (letter.sentAt) {
                <div>left {{ moment(letter.sentAt) }}</div>
              } @else {
                <div>waits until {{ moment(letter.dueAt) }}</div>
              }
              @if (letter.lastError) {
                <div class="tone-wrong">try {{ letter.attempts }}: {{ letter.lastError }}</div>
              }
            </div>
            <div>
              <h2>{{ letter.subject }}</h2>
              <p class="quiet">to {{ letter.to }}</p>
              <pre>{{ letter.text }}</pre>
            </div>
          </article>
        } @empty {
          <app-empty-state text="No letter has been written yet. Invitations, receipts and releases will stand here." />
        }
        @if (letters.value().total > 50) {
          <mat-paginator
            aria-label="Pages of letters"
            [length]="letters.value().total"
            [pageIndex]="page() - 1"
            [pageSize]="50"
            hidePageSize
            (page)="goTo($event.pageIndex + 1)"
          />
        }
      }
    </div>
  `,
  styleUrl: '../installation-page.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export default class Outbox {
  private readonly api = inject(AccountsApi);
  private readonly router = inject(Router);
  private readonly zone = Intl.DateTimeFormat().resolvedOptions().timeZone;

  readonly page = input(1, { transform: address.page });

  protected readonly letters = rxResource({
    params: () => this.page(),
    stream: ({ params }) => this.api.letters(params),
  });
  protected readonly problem = computed(() => {
    const error = this.letters.error();
    return error ? sentenceOf(error.cause ?? error) : '';
  });

  protected moment(instant: number): string {
    return fullMomentOf(instant, this.zone);
  }

  protected goTo(page: number): void {
    void this.router.navigate([], { queryParams: { page } });
  }
}
