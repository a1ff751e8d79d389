import { Injectable, inject } from '@angular/core';
import { rulingRoutes } from '@shared/rulings';
import { ApiClient } from './api-client';

/** Rulings on the part of a pile. */
@Injectable({ providedIn: 'root' })
export class RulingsApi {
  private readonly api = inject(ApiClient);

  ask(pileId: string, idempotencyKey: string, question: string, answerId: string) {
    return this.api.call(rulingRoutes.ask, { params: { pileId }, idempotencyKey, body: { question, answerId } });
  }

  wait(rulingId: string, answerId: string) {
    return this.api.call(rulingRoutes.wait, { params: { rulingId }, body: { answerId } });
  }

  decide(rulingId: string, decision: string) {
    return this.api.call(rulingRoutes.decide, { params: { rulingId }, body: { decision } });
  }
}
