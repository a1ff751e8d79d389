import { Injectable, inject } from '@angular/core';
import { receiptsRoutes } from '@shared/receipts';
import { ApiClient } from './api-client';

/** Verifying receipts. */
@Injectable({ providedIn: 'root' })
export class ReceiptsApi {
  private readonly api = inject(ApiClient);

  verify(courseId: string, text: string) {
    return this.api.call(receiptsRoutes.verifyReceipt, { params: { courseId }, body: { text } });
  }
}
