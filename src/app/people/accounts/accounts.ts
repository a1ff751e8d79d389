import { ChangeDetectionStrategy, Component, computed, inject, input, signal } from '@angular/core';
import { rxResource } from '@angular/core/rxjs-interop';
import { MatButtonModule } from '@angular/material/button';
import { MatFormFieldModule } from '@angular/material/form-field';
import { MatIconModule } from '@angular/material/icon';
import { MatInputModule } from '@angular/material/input';
import { MatMenuModule } from '@angular/material/menu';
import { MatPaginatorModule } from '@angular/material/paginator';
import { MatTableModule } from '@angular/material/table';
import { Router } from '@angular/router';
import { firstValueFrom } from 'rxjs';
import type { Account } from '@shared/accounts';
import { address } from '../../core/address';
import { AccountsApi } from '../../core/api/accounts-api';
import { sentenceOf } from '../../core/api/request-failure';
import { Session } from '../../core/session';
import { EmptyState } from '../../ui/empty-state/empty-state';
import { ErrorState } from '../../ui/error-state/error-state';

/** All accounts of the installation, for its administrators. */
@Component({
  selector: 'app-accounts',
  imports: [
    EmptyState,
    ErrorState,
    MatButtonModule,
    MatFormFieldModule,
    MatIconModule,
    MatInputModule,
    MatMenuModule,
    MatPaginatorModule,
    MatTableModule,
  ],
  template: `
    <div class="page">
      <h1>Accounts</h1>
      <mat-form-field>
        <mat-label>Search by name or address</mat-label>
        <input matInput type="search" [value]="search()" (change)="goTo({ search: query.value, page: null })" #query />
        <mat-icon matSuffix svgIcon="search" />
      </mat-form-field>
      <p class="failure" role="alert">{{ failure() }}</p>
      <div role="status">
        {{ done() }}
        @if (link(); as made) {
          <p>Hand this link to {{ made.name }} yourself. It works once; that you made it stands in the record.</p>
          <p class="mono address">{{ made.address }}</p>
        }
      </div>
      @if (problem(); as sentence) {
        <app-error-state [text]="sentence" (retried)="accounts.reload()" />
      } @else if (accounts.hasValue()) {
        @if (accounts.value().items.length === 0) {
          <app-empty-state text="No account fits this search. Take the search away to see all of them." />
        } @else {
          <div class="scroll" tabindex="0" role="region" aria-label="Accounts">
            <table mat-table [dataSource]="accounts.value().items">
              <ng-container matColumnDef="name">
                <th mat-header-cell *matHeaderCellDef>name</th>
                <td mat-cell *matCellDef="let account">{{ account.name }}</td>
              </ng-container>
              <ng-container matColumnDef="email">
                <th mat-header-cell *matHeaderCellDef>e-mail</th>
                <td mat-cell *matCellDef="let account" class="quiet">{{ account.email }}</td>
              </ng-container>
              <ng-container matColumnDef="state">
                <th mat-header-cell *matHeaderCellDef>account</th>
                <td mat-cell *matCellDef="let account" class="quiet">
                  {{ account.isAdministrator ? 'administrator' : account.hasPassword ? 'in use' : 'no password yet' }}
                </td>
              </ng-container>
              <ng-container matColumnDef="acts">
                <th mat-header-cell *matHeaderCellDef><span class="cdk-visually-hidden">acts</span></th>
                <td mat-cell *matCellDef="let account">
                  <button matIconButton [matMenuTriggerFor]="menu" [attr.aria-label]="'More for ' + account.name">
                    <mat-icon svgIcon="more_vert" />
                  </button>
                  <mat-menu #menu="matMenu">
                    <button mat-menu-item (click)="makeLink(account)">Make a link to set a password</button>
                    @if (account.id !== session.person()?.id) {
                      <button mat-menu-item (click)="setAdministrator(account)">
                        {{ account.isAdministrator ? 'Administrator no longer' : 'Make administrator' }}
                      </button>
                    }
                  </mat-menu>
                </td>
              </ng-container>
              <tr mat-header-row *matHeaderRowDef="columns"></tr>
              <tr mat-row *matRowDef="let row; columns: columns"></tr>
            </table>
          </div>
          @if (accounts.value().total > 50) {
            <mat-paginator
              aria-label="Pages of accounts"
              [length]="accounts.value().total"
              [pageIndex]="page() - 1"
              [pageSize]="50"
              hidePageSize
              (page)="goTo({ page: $event.pageIndex + 1 })"
            />
          }
        }
      }
    </div>
  `,
  styleUrl: '../installation-page.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export default class Accounts {
  private readonly api = inject(AccountsApi);
  private readonly router = inject(Router);
  protected readonly session = inject(Session);

  readonly search = input('', { transform: address.text });
  readonly page = input(1, { transform: address.page });

  protected readonly columns = ['name', 'email', 'state', 'acts'];
  protected readonly accounts = rxResource({
    params: () => ({ search: this.search(), page: this.page() }),
    stream: ({ params }) => this.api.accounts(params),
  });
  protected readonly problem = computed(() => {
    const error = this.accounts.error();
    return error ? sentenceOf(error.cause ?? error) : '';
  });
  protected readonly failure = signal('');
  protected readonly done = signal('');
  protected readonly link = signal<{ name: string; address: string } | null>(null);

  protected goTo(queryParams: { search?: string; page?: number | null }): void {
    void this.router.navigate([], { queryParams, queryParamsHandling: 'merge', replaceUrl: true });
  }

  protected async makeLink(account: Account): Promise<void> {
    await this.attempt(async () => {
      const { link } = await firstValueFrom(this.api.makeLink(account.id));
      this.link.set({ name: account.name, address: link });
    });
  }

  protected async setAdministrator(account: Account): Promise<void> {
    await this.attempt(async () => {
      const changed = await firstValueFrom(this.api.setAdministrator(account.id, !account.isAdministrator));
      this.done.set(`${changed.name} is ${changed.isAdministrator ? 'now' : 'no longer'} an administrator.`);
      this.accounts.reload();
    });
  }

  private async attempt(act: () => Promise<void>): Promise<void> {
    this.failure.set('');
    this.done.set('');
    this.link.set(null);
    try {
      await act();
    } catch (error) {
      this.failure.set(sentenceOf(error));
    }
  }
}
