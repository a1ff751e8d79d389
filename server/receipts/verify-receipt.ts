import { createHash } from 'node:crypto';
import { and, desc, eq } from 'drizzle-orm';
import type { z } from 'zod';
import type { Queryable } from '@drizzle/client';
import { scripts, sets, submissions } from '@drizzle/schema';
import { receiptFile, type ReceiptFinding, type ReceiptVerdict } from '@shared/receipts';
import { canonicalForm } from '@shared/scripts';
import { isSignedHere, publicKeyOfReceipts } from './receipt-key';

type ReceiptFile = z.output<typeof receiptFile>;

/**
 * Says whether a receipt is one that this server gave, and what does not match. It finds the receipt in a file or in a
 * letter that was pasted whole. Nothing of the student's work or name is said.
 */
export function verifyReceipt(tx: Queryable, courseId: string, text: string): ReceiptVerdict {
  const read = readReceipt(text);
  if (typeof read === 'string')
    return {
      valid: false,
      findings: [{ test: 'can be read', holds: false, sentence: read }],
      submission: null,
    };
  const submission = submissionNamed(tx, courseId, read);
  const findings = [
    { test: 'can be read' as const, holds: true, sentence: 'It is a receipt of Halfsilver.' },
    keyFinding(read),
    signatureFinding(read),
    contentsFinding(read),
    submissionFinding(read, submission),
  ];
  return { valid: findings.every(({ holds }) => holds !== false), findings, submission };
}

/** The receipt in a text, from its first brace to its last; or why there is none. */
function readReceipt(text: string): ReceiptFile | string {
  const json = text.slice(text.indexOf('{'), text.lastIndexOf('}') + 1);
  let value: unknown;
  try {
    value = JSON.parse(json);
  } catch {
    // Not JSON: whatever it is, it is not a receipt.
    return 'There is no receipt in it: paste all that stands between the braces { and }, with the braces.';
  }
  const parsed = receiptFile.safeParse(value);
  if (parsed.success) return parsed.data;
  const [issue] = parsed.error.issues;
  const where = issue?.path.join('.') ?? '';
  return `It is not a whole receipt: ${where === '' ? 'its form' : `“${where}”`} is missing or cannot be read.`;
}

function keyFinding(read: ReceiptFile): ReceiptFinding {
  const holds = read.publicKey === publicKeyOfReceipts().publicKey;
  return {
    test: 'key',
    holds,
    sentence: holds ? 'The public key in it is this server’s.' : 'The public key in it is not this server’s.',
  };
}

function signatureFinding(read: ReceiptFile): ReceiptFinding {
  const holds = isSignedHere(read);
  return {
    test: 'signature',
    holds,
    sentence: holds
      ? 'This server signed its set, script, submission, time and digest.'
      : 'The signature does not fit: set, script, submission, time or digest is not what this server signed.',
  };
}

function contentsFinding(read: ReceiptFile): ReceiptFinding {
  if (!read.content)
    return {
      test: 'contents',
      holds: null,
      sentence: 'It carries no contents, so none were compared with its digest.',
    };
  const holds = createHash('sha256').update(canonicalForm(read.content), 'utf8').digest('hex') === read.digest;
  return {
    test: 'contents',
    holds,
    sentence: holds
      ? 'The digest is that of the contents it carries.'
      : 'The contents it carries have another digest: they are not what was handed in.',
  };
}

function submissionFinding(read: ReceiptFile, found: ReceiptVerdict['submission']): ReceiptFinding {
  if (!found)
    return { test: 'submission', holds: false, sentence: 'No set of this course has the submission that it names.' };
  const wrong = [
    ...(found.digest === read.digest ? [] : ['digest']),
    ...(new Date(found.at).toISOString() === read.time ? [] : ['time']),
  ];
  const holds = wrong.length === 0;
  return {
    test: 'submission',
    holds,
    sentence: holds
      ? 'The submission that it names is kept here with the same time and digest.'
      : `The submission that it names is kept here with another ${wrong.join(' and another ')}.`,
  };
}

function submissionNamed(tx: Queryable, courseId: string, read: ReceiptFile): ReceiptVerdict['submission'] {
  const rows = tx
    .select({ set: sets, code: scripts.code, submission: submissions })
    .from(submissions)
    .innerJoin(scripts, eq(scripts.id, submissions.scriptId))
    .innerJoin(sets, eq(sets.id, scripts.setId))
    .where(and(eq(sets.courseId, courseId), eq(sets.id, read.set), eq(scripts.code, read.script)))
    .orderBy(desc(submissions.number))
    .all();
  const row = rows.find(({ submission }) => submission.number === read.submission);
  if (!row) return null;
  const { number, at, by, digest } = row.submission;
  return {
    setNumber: row.set.number,
    setTitle: row.set.title,
    code: row.code,
    number,
    at,
    by,
    digest,
    isLast: row === rows[0],
  };
}
