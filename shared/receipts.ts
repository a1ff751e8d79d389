import * as z from 'zod';
import { answerDigest } from './checks';
import { identifier, instant } from './primitives';
import { defineRoute } from './route';

/** What a receipt calls itself, so that a file can be told from others. The number changes when what is signed changes. */
export const receiptKind = 'halfsilver receipt 1';

/** What the server signs of a submission. */
export const receiptFacts = z.object({
  kind: z.literal(receiptKind),
  set: identifier,
  /** The script's code. */
  script: z.string(),
  /** Which submission of the script, from 1. */
  submission: z.number().int().min(1),
  /** When it was handed in: ISO 8601, UTC, with milliseconds. */
  time: z.iso.datetime({ precision: 3 }),
  /** SHA-256 of what was handed in, in hexadecimal. */
  digest: z.string().regex(/^[0-9a-f]{64}$/, 'A digest has 64 hexadecimal figures.'),
});
export type ReceiptFacts = z.infer<typeof receiptFacts>;

/** A receipt that can be verified: the facts, with the server's signature over them. */
export const signedReceipt = receiptFacts.extend({
  /** Ed25519 over `signedForm`, in base64. */
  signature: z.string(),
  /** The server's public key: SubjectPublicKeyInfo (RFC 8410), DER, in base64. */
  publicKey: z.string(),
});
export type SignedReceipt = z.infer<typeof signedReceipt>;

/** A receipt as a file: signed, and where it is whole with what the digest is of. */
export const receiptFile = signedReceipt.extend({ content: z.array(answerDigest).optional() });

/**
 * The text that is signed: JSON without spaces, with the names `kind`, `set`, `script`, `submission`, `time` and `digest` in
 * this order. Encoded as UTF-8, it is what the Ed25519 signature is over. `docs/receipt.md` describes it.
 */
export function signedForm({ kind, set, script, submission, time, digest }: ReceiptFacts): string {
  return JSON.stringify({ kind, set, script, submission, time, digest });
}

/** What is looked at when a receipt is verified. */
export const receiptTests = ['can be read', 'key', 'signature', 'contents', 'submission'] as const;

/** What became of one of them. */
export const receiptFinding = z.object({
  test: z.enum(receiptTests),
  /** Null: could not be looked at. */
  holds: z.boolean().nullable(),
  sentence: z.string(),
});
export type ReceiptFinding = z.infer<typeof receiptFinding>;

/** Whether a receipt is one that this server gave. */
export const receiptVerdict = z.object({
  valid: z.boolean(),
  findings: z.array(receiptFinding),
  /** The submission that it names, where this course has it. */
  submission: z
    .object({
      setNumber: z.number().int(),
      setTitle: z.string(),
      code: z.string(),
      number: z.number().int(),
      at: instant,
      by: z.enum(['student', 'closing']),
      digest: z.string(),
      /** Whether it is the one that counts. */
      isLast: z.boolean(),
    })
    .nullable(),
});
export type ReceiptVerdict = z.infer<typeof receiptVerdict>;

/** Longest text that is looked through for a receipt, in characters. */
export const longestReceipt = 1_000_000;

export const receiptsRoutes = {
  publicKey: defineRoute({
    method: 'GET',
    path: '/receipts/public-key',
    summary: 'The public key with which the signature of a receipt can be verified',
    response: z.object({
      algorithm: z.literal('Ed25519'),
      /** As in a receipt: DER in base64. */
      publicKey: z.string(),
      pem: z.string(),
    }),
    open: true,
  }),
  verifyReceipt: defineRoute({
    method: 'POST',
    path: '/courses/:courseId/receipts/verification',
    summary: 'Say whether a receipt, pasted or from its file, is one that this server gave',
    params: z.object({ courseId: identifier }),
    body: z.object({
      text: z
        .string({ error: 'Paste the receipt, or choose its file.' })
        .trim()
        .min(1, 'Paste the receipt, or choose its file.')
        .max(longestReceipt, 'That is too long for a receipt.'),
    }),
    response: receiptVerdict,
    status: 200,
  }),
};
