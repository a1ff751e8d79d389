import { Injectable, inject } from '@angular/core';
import { accountRoutes } from '@shared/accounts';
import { ApiClient, type CallParts } from './api-client';

/** Sign-in, passwords and accounts. */
@Injectable({ providedIn: 'root' })
export class AccountsApi {
  private readonly api = inject(ApiClient);

  installation() {
    return this.api.call(accountRoutes.installation);
  }

  session() {
    return this.api.call(accountRoutes.session);
  }

  signIn(email: string, password: string) {
    return this.api.call(accountRoutes.signIn, { body: { email, password } });
  }

  signOut() {
    return this.api.call(accountRoutes.signOut);
  }

  signOutEverywhere() {
    return this.api.call(accountRoutes.signOutEverywhere);
  }

  forgotPassword(email: string) {
    return this.api.call(accountRoutes.forgotPassword, { body: { email } });
  }

  readToken(token: string) {
    return this.api.call(accountRoutes.readToken, { body: { token } });
  }

  useToken(body: NonNullable<CallParts<typeof accountRoutes.useToken>['body']>) {
    return this.api.call(accountRoutes.useToken, { body });
  }

  changePassword(current: string, password: string) {
    return this.api.call(accountRoutes.changePassword, { body: { current, password } });
  }

  accounts(query: { search: string; page: number }) {
    return this.api.call(accountRoutes.accounts, { query });
  }

  setAdministrator(accountId: string, isAdministrator: boolean) {
    return this.api.call(accountRoutes.setAdministrator, { params: { accountId }, body: { isAdministrator } });
  }

  makeLink(accountId: string) {
    return this.api.call(accountRoutes.makeLink, { params: { accountId } });
  }

  letters(page: number) {
    return this.api.call(accountRoutes.letters, { query: { page } });
  }
}
