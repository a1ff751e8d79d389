import { Injectable, inject } from '@angular/core';
import type { AnswerSpecification } from '@shared/answer-forms';
import { correctionRoutes } from '@shared/corrections';
import { ApiClient } from './api-client';

/** Corrections of what was answered. */
@Injectable({ providedIn: 'root' })
export class CorrectionsApi {
  private readonly api = inject(ApiClient);

  correctablePart(pileId: string, pattern?: string) {
    return this.api.call(correctionRoutes.correctablePart, { params: { pileId }, query: { pattern } });
  }

  propose(pileId: string, idempotencyKey: string, body: { answer: AnswerSpecification; reason: string; note: string }) {
    return this.api.call(correctionRoutes.proposeCorrection, { params: { pileId }, idempotencyKey, body });
  }

  correction(correctionId: string) {
    return this.api.call(correctionRoutes.correction, { params: { correctionId } });
  }

  changes(correctionId: string, page: number) {
    return this.api.call(correctionRoutes.correctionChanges, { params: { correctionId }, query: { page } });
  }

  confirm(correctionId: string, version: number) {
    return this.api.call(correctionRoutes.confirmCorrection, { params: { correctionId }, version });
  }

  withdraw(correctionId: string, version: number) {
    return this.api.call(correctionRoutes.withdrawCorrection, { params: { correctionId }, version });
  }

  markStands(correctionId: string, answerId: string) {
    return this.api.call(correctionRoutes.markStands, { params: { correctionId, answerId } });
  }
}
