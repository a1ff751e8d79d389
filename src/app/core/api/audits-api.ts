import { Injectable, inject } from '@angular/core';
import { auditRoutes } from '@shared/audit';
import { ApiClient } from './api-client';

/** Key audits of problems. */
@Injectable({ providedIn: 'root' })
export class AuditsApi {
  private readonly api = inject(ApiClient);

  audit(problemId: string) {
    return this.api.call(auditRoutes.audit, { params: { problemId } });
  }

  beginAudit(problemId: string) {
    return this.api.call(auditRoutes.beginAudit, { params: { problemId }, body: {} });
  }
}
