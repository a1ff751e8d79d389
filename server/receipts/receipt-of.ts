import type { submissions } from '@drizzle/schema';
import { receiptKind, type SignedReceipt } from '@shared/receipts';
import { signReceipt } from './receipt-key';

/** The signed receipt of a submission. */
export function receiptOf(
  script: { readonly setId: string; readonly code: string },
  submission: Pick<typeof submissions.$inferSelect, 'number' | 'at' | 'digest'>,
): SignedReceipt {
  return signReceipt({
    kind: receiptKind,
    set: script.setId,
    script: script.code,
    submission: submission.number,
    time: new Date(submission.at).toISOString(),
    digest: submission.digest,
  });
}
