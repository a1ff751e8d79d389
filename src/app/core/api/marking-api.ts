import { Injectable, inject } from '@angular/core';
import { markingRoutes, type NewMark } from '@shared/marking';
import { ApiClient } from './api-client';

/** Which answer a bench wishes to have in hand. */
export interface TakeWish {
  readonly answerId?: string;
  readonly after?: string;
  readonly pattern?: string;
}

/** Piles and benches. */
@Injectable({ providedIn: 'root' })
export class MarkingApi {
  private readonly api = inject(ApiClient);

  piles(courseId: string) {
    return this.api.call(markingRoutes.piles, { params: { courseId } });
  }

  pile(pileId: string) {
    return this.api.call(markingRoutes.pile, { params: { pileId } });
  }

  benchAnswer(answerId: string) {
    return this.api.call(markingRoutes.benchAnswer, { params: { answerId } });
  }

  take(pileId: string, benchId: string, wish: TakeWish = {}) {
    return this.api.call(markingRoutes.take, { params: { pileId }, body: { benchId, ...wish } });
  }

  renewHolds(pileId: string, benchId: string) {
    return this.api.call(markingRoutes.renewHolds, { params: { pileId }, body: { benchId } });
  }

  letGo(pileId: string, benchId: string) {
    return this.api.call(markingRoutes.letGo, { params: { pileId }, body: { benchId } });
  }

  mark(answerId: string, version: number, idempotencyKey: string, body: NewMark) {
    return this.api.call(markingRoutes.mark, { params: { answerId }, version, idempotencyKey, body });
  }

  undoMark(answerId: string, version: number, benchId: string, markId: string) {
    return this.api.call(markingRoutes.undoMark, { params: { answerId }, version, body: { benchId, markId } });
  }

  setAside(answerId: string, version: number, benchId: string, reason: string) {
    return this.api.call(markingRoutes.setAside, { params: { answerId }, version, body: { benchId, reason } });
  }

  returnAnswer(answerId: string, version: number, benchId: string) {
    return this.api.call(markingRoutes.returnAnswer, { params: { answerId }, version, body: { benchId } });
  }
}
