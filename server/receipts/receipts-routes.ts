import { receiptsRoutes } from '@shared/receipts';
import { demand } from '../access/policy';
import type { Context } from '../context';
import type { Serve } from '../http/serve';
import { publicKeyOfReceipts } from './receipt-key';
import { verifyReceipt } from './verify-receipt';

/** Adds the routes by which receipts are verified. */
export function addReceiptsRoutes(serve: Serve, { db }: Context): void {
  serve.open(receiptsRoutes.publicKey, () => ({ algorithm: 'Ed25519' as const, ...publicKeyOfReceipts() }));

  serve(receiptsRoutes.verifyReceipt, ({ user, params, body }) => {
    demand(user, 'verify receipts', params.courseId);
    return verifyReceipt(db, params.courseId, body.text);
  });
}
