import { eq } from 'drizzle-orm';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { letters } from '@drizzle/schema';
import type { ReceiptVerdict } from '@shared/receipts';
import type { Receipt, Sheet } from '@shared/scripts';
import { newId } from '../http/new-id';
import { buildOpenSet } from '../scripts/testing/build-set';
import { createHarness, type Harness } from '../testing/harness';

let harness: Harness;
beforeEach(() => {
  harness = createHarness();
});
afterEach(() => harness.close());

/** A set with one submission, and its receipt. */
async function handedIn() {
  const built = await buildOpenSet(harness);
  const client = await harness.agent(built.student);
  const sheet = (await client.get(`/api/sets/${built.setId}/sheet`).expect(200)).body as Sheet;
  const answerId = sheet.problems[0]?.parts[0]?.answerId ?? '';
  await client
    .put(`/api/answers/${answerId}/text`)
    .set('If-Match', '"0"')
    .set('Idempotency-Key', newId())
    .send({ text: '2.5' })
    .expect(200);
  const submitted = await client
    .post(`/api/sets/${built.setId}/submissions`)
    .set('Idempotency-Key', newId())
    .expect(201);
  return { ...built, receipt: submitted.body as Receipt };
}

async function verdictOf(person: { id: string } | null, courseId: string, text: string): Promise<ReceiptVerdict> {
  const client = await harness.agent(person);
  return (await client.post(`/api/courses/${courseId}/receipts/verification`).send({ text }).expect(200))
    .body as ReceiptVerdict;
}

const failing = (verdict: ReceiptVerdict) =>
  verdict.findings.filter(({ holds }) => holds === false).map(({ test }) => test);

describe('a receipt', () => {
  it('is verified by anyone on the team, from its file and from its letter', async () => {
    const { course, receipt, lead } = await handedIn();
    const marker = harness.makeMember(course.id, 'marker');
    const file = JSON.stringify({ ...receipt.signed, content: receipt.content }, null, 2);
    const letter = harness.db.select().from(letters).where(eq(letters.kind, 'receipt')).get()?.text ?? '';
    expect(letter).toContain(receipt.signed.signature);
    for (const person of [lead, marker]) {
      const verdict = await verdictOf(person, course.id, file);
      expect(verdict).toMatchObject({ valid: true, submission: { number: 1, code: receipt.code, isLast: true } });
      expect(verdict.findings.map(({ holds }) => holds)).toEqual([true, true, true, true, true]);
      expect(await verdictOf(person, course.id, letter)).toMatchObject({ valid: true });
    }
  });

  it('is told from one that was changed, and says what does not match', async () => {
    const { course, receipt, lead } = await handedIn();
    const { signed, content } = receipt;
    const verify = async (file: unknown) => failing(await verdictOf(lead, course.id, JSON.stringify(file)));
    expect(await verify({ ...signed, time: '2026-11-24T10:00:00.000Z' })).toEqual(['signature', 'submission']);
    expect(await verify({ ...signed, submission: 2 })).toEqual(['signature', 'submission']);
    expect(await verify({ ...signed, publicKey: 'AAAA' })).toEqual(['key']);
    const changed = content.map((part) => ({ ...part, text: '9' }));
    expect(await verify({ ...signed, content: changed })).toEqual(['contents']);
    expect(await verify({ ...signed, digest: 'x' })).toEqual(['can be read']);
    expect(failing(await verdictOf(lead, course.id, 'Dear all'))).toEqual(['can be read']);
  });

  it('of another course is not found here', async () => {
    const { receipt } = await handedIn();
    const other = harness.makeCourse();
    const lead = harness.makeMember(other.id, 'lead');
    const verdict = await verdictOf(lead, other.id, JSON.stringify(receipt.signed));
    expect(verdict).toMatchObject({ valid: false, submission: null });
    expect(failing(verdict)).toEqual(['submission']);
  });

  it('is not verified for students, outsiders and nobody, nor from nothing', async () => {
    const { course, receipt, student, lead } = await handedIn();
    const path = `/api/courses/${course.id}/receipts/verification`;
    const text = JSON.stringify(receipt.signed);
    const refused = await (await harness.agent(student)).post(path).send({ text }).expect(403);
    expect(refused.body).toMatchObject({ type: '/errors/not-allowed' });
    await (await harness.agent(harness.makePerson())).post(path).send({ text }).expect(403);
    await (await harness.agent(null)).post(path).send({ text }).expect(401);
    const empty = await (await harness.agent(lead)).post(path).send({ text: ' ' }).expect(400);
    expect(empty.body).toMatchObject({ type: '/errors/invalid-input', fields: [{ path: ['text'] }] });
  });

  it('has a public key that everybody may have', async () => {
    const { receipt } = await handedIn();
    const key = await (await harness.agent(null)).get('/api/receipts/public-key').expect(200);
    expect(key.body).toMatchObject({ algorithm: 'Ed25519', publicKey: receipt.signed.publicKey });
  });
});
