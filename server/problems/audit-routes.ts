import { auditRoutes } from '@shared/audit';
import { demand } from '../access/policy';
import type { Context } from '../context';
import type { Serve } from '../http/serve';
import { auditStateOf, beginAudit } from './audit-rules';
import { demandProblem } from './problem-rules';
import { demandReader } from './review-rules';

/** The key audit of a problem's draft. */
export function addAuditRoutes(serve: Serve, context: Context): void {
  const { db } = context;

  serve(auditRoutes.audit, ({ user, params }) => {
    const { draft } = demandReader(db, user, params.problemId);
    return auditStateOf(db, params.problemId, draft);
  });

  serve(auditRoutes.beginAudit, ({ user, params, body }) => {
    demand(user, 'write problems');
    const { draft } = demandProblem(db, params.problemId, user.id);
    return beginAudit(context, params.problemId, body.draft ?? draft, user.id);
  });
}
