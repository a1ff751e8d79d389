import { Injectable, inject } from '@angular/core';
import { type AllowanceFields, allowancesRoutes } from '@shared/allowances';
import { ApiClient } from './api-client';

/** Allowances of single students. */
@Injectable({ providedIn: 'root' })
export class AllowancesApi {
  private readonly api = inject(ApiClient);

  allowances(setId: string) {
    return this.api.call(allowancesRoutes.allowances, { params: { setId } });
  }

  give(setId: string, body: AllowanceFields) {
    return this.api.call(allowancesRoutes.giveAllowance, { params: { setId }, body });
  }

  withdraw(allowanceId: string) {
    return this.api.call(allowancesRoutes.withdrawAllowance, { params: { allowanceId } });
  }
}
