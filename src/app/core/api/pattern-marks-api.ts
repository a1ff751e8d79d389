import { Injectable, inject } from '@angular/core';
import type * as z from 'zod';
import { patternMarkRoutes } from '@shared/pattern-marks';
import { ApiClient } from './api-client';

/** A mark that is applied to a pattern: criteria, remark, and the answers that the preview named. */
export type PatternMark = z.input<typeof patternMarkRoutes.apply.body>;

/** Marks that are applied to the answers of a pattern at once. */
@Injectable({ providedIn: 'root' })
export class PatternMarksApi {
  private readonly api = inject(ApiClient);

  preview(answerId: string) {
    return this.api.call(patternMarkRoutes.preview, { params: { answerId } });
  }

  apply(answerId: string, idempotencyKey: string, body: PatternMark) {
    return this.api.call(patternMarkRoutes.apply, { params: { answerId }, idempotencyKey, body });
  }

  undo(applicationId: string, benchId: string) {
    return this.api.call(patternMarkRoutes.undo, { params: { applicationId }, body: { benchId } });
  }
}
