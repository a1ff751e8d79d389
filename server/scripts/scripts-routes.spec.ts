import { eq } from 'drizzle-orm';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { answers, answerVersions, checks, letters, marks, memberships, scripts, submissions } from '@drizzle/schema';
import type { Receipt, Sheet } from '@shared/scripts';
import { newId } from '../http/new-id';
import { checkClosedSet } from '../sets/close-set';
import { moveStage } from '../sets/move-stage';
import { presentSet } from '../sets/set-queries';
import { createHarness, type Harness } from '../testing/harness';
import { digestOf } from './hand-in';
import { buildContent, buildOpenSet, buildPart, hour } from './testing/build-set';

let harness: Harness;
beforeEach(() => {
  harness = createHarness();
});
afterEach(() => harness.close());

type Client = Awaited<ReturnType<Harness['agent']>>;

async function sheetOf(client: Client, setId: string): Promise<Sheet> {
  return (await client.get(`/api/sets/${setId}/sheet`).expect(200)).body as Sheet;
}

function partOf(sheet: Sheet, label: string) {
  const part = sheet.problems.flatMap((problem) => problem.parts).find((each) => each.label === label);
  if (!part) throw new Error(`The sheet has no part ${label}.`);
  return part;
}

const save = (client: Client, answerId: string, text: string, version: number, key = newId()) =>
  client
    .put(`/api/answers/${answerId}/text`)
    .set('If-Match', String(version))
    .set('Idempotency-Key', key)
    .send({ text });

const submit = (client: Client, setId: string, key = newId()) =>
  client.post(`/api/sets/${setId}/submissions`).set('Idempotency-Key', key).send({});

describe('a sheet', () => {
  it('prints the student’s own numbers and asks each part', async () => {
    const { setId, student, other } = await buildOpenSet(harness);
    const sheet = await sheetOf(await harness.agent(student), setId);
    expect(sheet).toMatchObject({ number: 1, title: 'Counting', state: 'open', marks: 8, submission: null });
    const [problem] = sheet.problems;
    expect(problem?.stem).toBe('A pulse holds $\\val{nbar}$ photons.');
    expect(Object.keys(problem?.givens ?? {})).toEqual(['nbar']);
    expect(problem?.parts.map((part) => [part.label, part.field.form, part.workedPage])).toEqual([
      ['a', 'number', false],
      ['b', 'number', false],
      ['c', 'worked', true],
      ['d', 'choice', false],
    ]);
    const theirs = await sheetOf(await harness.agent(other), setId);
    expect(theirs.problems[0]?.givens).not.toEqual(problem?.givens);
    const codes = harness.db
      .select()
      .from(scripts)
      .all()
      .map((row) => row.code);
    expect(codes).toHaveLength(2);
    for (const code of codes) expect(code).toMatch(/^[234679CDFHJKMNPQRTVWXY]{4}$/);
  });

  it('holds nothing of keys, tolerances, slips, guidance or values that only keys use', async () => {
    const { setId, student } = await buildOpenSet(harness, {
      content: buildContent({
        parts: [
          buildPart({
            answer: {
              form: 'number',
              key: '123456789.25 + nbar',
              tolerance: { relative: 0.0770077 },
              slips: [
                { name: 'slip-name-secret', expression: '987654321', feedback: 'feedback-secret', fraction: 0.1 },
              ],
            },
          }),
        ],
        statement: 'A pulse of $\\val{nbar}$.\n\n(a) How many?',
      }),
    });
    const client = await harness.agent(student);
    const sheet = await sheetOf(client, setId);
    await save(client, partOf(sheet, 'a').answerId, '987654321', 0).expect(200);
    const receipt = await submit(client, setId).expect(201);
    const list = await client.get(`/api/courses/${sheet.courseId}/sheets`).expect(200);
    const seen = JSON.stringify([sheet, list.body, { ...(receipt.body as Receipt), parts: [], content: [] }]);
    for (const secret of ['123456', '0770077', 'secret', '987654321', 'hidden', 'guidance', 'awardedBy', 'standsAlone'])
      expect(seen).not.toContain(secret);
  });

  it('is the student’s own, from the opening on', async () => {
    const { setId, student, other, lead, course } = await buildOpenSet(harness);
    const { answerId } = partOf(await sheetOf(await harness.agent(student), setId), 'a');
    await save(await harness.agent(other), answerId, '1', 0).expect(404);
    await save(await harness.agent(lead), answerId, '1', 0).expect(404);
    await save(await harness.agent(null), answerId, '1', 0).expect(401);
    await (await harness.agent(lead)).get(`/api/sets/${setId}/sheet`).expect(403);
    await (await harness.agent(student)).get(`/api/sets/${newId()}/sheet`).expect(404);
    expect(harness.db.select().from(answerVersions).all()).toHaveLength(0);

    const draft = await (await harness.agent(lead)).post(`/api/courses/${course.id}/sets`).send({ title: 'Next' });
    const hidden = (draft.body as { id: string }).id;
    await (await harness.agent(student)).get(`/api/sets/${hidden}/sheet`).expect(404);
    const list = await (await harness.agent(student)).get(`/api/courses/${course.id}/sheets`).expect(200);
    expect(list.body).toMatchObject({ total: 1, items: [{ number: 1, state: 'open', parts: 4, answered: 0 }] });
  });

  it('is there for a student who joined after the set had opened', async () => {
    const { setId, course } = await buildOpenSet(harness);
    const late = harness.makeMember(course.id, 'student');
    const sheet = await sheetOf(await harness.agent(late), setId);
    expect(sheet.problems[0]?.givens['nbar']).toBeDefined();
  });
});

describe('saving', () => {
  it('keeps one version for each real change, and none for the same text or the same key', async () => {
    const { setId, student } = await buildOpenSet(harness);
    const client = await harness.agent(student);
    const { answerId } = partOf(await sheetOf(client, setId), 'a');
    const key = newId();
    const first = await save(client, answerId, '4.7', 0, key).expect(200);
    expect(first.body).toEqual({ answerId, answer: '4.7', version: 1, savedAt: harness.clock.now() });
    expect((await save(client, answerId, '4.7', 0, key).expect(200)).body).toEqual(first.body);
    expect((await save(client, answerId, '4.7', 1).expect(200)).body).toMatchObject({ version: 1 });
    await save(client, answerId, '4.742', 1).expect(200);
    expect(
      harness.db
        .select()
        .from(answerVersions)
        .all()
        .map((row) => [row.number, row.text]),
    ).toEqual([
      [1, '4.7'],
      [2, '4.742'],
    ]);
    expect(partOf(await sheetOf(client, setId), 'a')).toMatchObject({ answer: '4.742', version: 2 });
  });

  it('does not let one window write over another unseen', async () => {
    const { setId, student } = await buildOpenSet(harness);
    const client = await harness.agent(student);
    const { answerId } = partOf(await sheetOf(client, setId), 'a');
    await save(client, answerId, 'here', 0).expect(200);
    const late = await save(client, answerId, 'there', 0).expect(412);
    expect(late.body).toMatchObject({ type: '/errors/stale', current: { answer: 'here', version: 1 } });
    await save(client, answerId, 'there', 1).expect(200);
  });

  it('asks for what it needs', async () => {
    const { setId, student } = await buildOpenSet(harness);
    const client = await harness.agent(student);
    const { answerId } = partOf(await sheetOf(client, setId), 'a');
    const put = () => client.put(`/api/answers/${answerId}/text`);
    await put().send({ text: '1' }).expect(428);
    await put().set('If-Match', '0').send({ text: '1' }).expect(400);
    const long = await save(client, answerId, 'x'.repeat(20_001), 0).expect(400);
    expect(long.body).toMatchObject({ fields: [{ path: ['text'] }] });
  });

  it('refuses after the closing time, even before the clock has closed the set, and says what was kept', async () => {
    const { setId, student } = await buildOpenSet(harness);
    const client = await harness.agent(student);
    const { answerId } = partOf(await sheetOf(client, setId), 'a');
    const key = newId();
    await save(client, answerId, '4.742', 0, key).expect(200);
    harness.clock.advance(48 * hour);
    const late = await save(client, answerId, '5', 1).expect(409);
    expect((late.body as { detail: string }).detail).toBe(
      'This sheet closed Thu 26 Nov 2026, 15:36 CET, so nothing more is taken. Kept and handed in for this part: “4.742”, saved 15:36:00.',
    );
    // What was acknowledged before is acknowledged again.
    await save(client, answerId, '4.742', 0, key).expect(200);
    await submit(client, setId).expect(409);
    expect(harness.db.select().from(answerVersions).all()).toHaveLength(1);
  });
});

describe('handing in', () => {
  it('gives a receipt whose digest anybody can compute', async () => {
    const { setId, student } = await buildOpenSet(harness);
    const client = await harness.agent(student);
    const sheet = await sheetOf(client, setId);
    const empty = await submit(client, setId).expect(409);
    expect(empty.body).toMatchObject({ detail: 'There is nothing to hand in yet: no part has an answer or a page.' });
    await save(client, partOf(sheet, 'a').answerId, '4.742', 0).expect(200);
    const key = newId();
    const receipt = (await submit(client, setId, key).expect(201)).body as Receipt;
    expect(receipt.submission).toMatchObject({ number: 1, by: 'student', at: harness.clock.now() });
    expect(receipt.submission.digest).toBe(digestOf(receipt.content));
    expect(receipt.parts.map((part) => [part.label, part.text])).toEqual([
      ['a', '4.742'],
      ['b', ''],
      ['c', ''],
      ['d', ''],
    ]);
    // The same act, and handing in the same again, is the same submission.
    expect(((await submit(client, setId, key).expect(201)).body as Receipt).submission).toEqual(receipt.submission);
    expect(((await submit(client, setId).expect(201)).body as Receipt).submission).toEqual(receipt.submission);
    expect((await client.get(`/api/sets/${setId}/receipt`).expect(200)).body).toEqual(receipt);
    expect(harness.db.select().from(submissions).all()).toHaveLength(1);
    const [letter] = harness.db.select().from(letters).where(eq(letters.kind, 'receipt')).all();
    expect(letter?.text).toContain(receipt.submission.digest);
  });

  it('can be done again until closing: the last submission counts', async () => {
    const { setId, student } = await buildOpenSet(harness);
    const client = await harness.agent(student);
    const { answerId } = partOf(await sheetOf(client, setId), 'a');
    await save(client, answerId, '4', 0).expect(200);
    await submit(client, setId).expect(201);
    await save(client, answerId, '5', 1).expect(200);
    expect(await sheetOf(client, setId)).toMatchObject({ changedSince: true, submission: { number: 1 } });
    const again = (await submit(client, setId).expect(201)).body as Receipt;
    expect(again).toMatchObject({ changedSince: false, submission: { number: 2 }, earlier: [{ number: 1 }] });
  });

  it('puts nothing on the piles before closing', async () => {
    const { setId, student } = await buildOpenSet(harness);
    const client = await harness.agent(student);
    const { answerId } = partOf(await sheetOf(client, setId), 'a');
    await save(client, answerId, '4', 0).expect(200);
    await submit(client, setId).expect(201);
    await expect.poll(() => harness.db.select().from(checks).all().length).toBeGreaterThan(0);
    expect(
      harness.db
        .select()
        .from(answers)
        .all()
        .every((row) => row.state === null),
    ).toBe(true);
    expect(harness.db.select().from(marks).all()).toHaveLength(0);
  });
});

describe('checks', () => {
  async function closeAfter(texts: Readonly<Record<string, (nbar: number) => string>>) {
    const around = await buildOpenSet(harness);
    const { setId, student, mover } = around;
    const client = await harness.agent(student);
    const sheet = await sheetOf(client, setId);
    const nbar = Number(sheet.problems[0]?.givens['nbar']?.printed);
    for (const [label, text] of Object.entries(texts))
      await save(client, partOf(sheet, label).answerId, text(nbar), 0).expect(200);
    await moveStage(harness.context, setId, 'closed', mover, presentSet(harness.db, setId).version);
    await checkClosedSet(harness.context, setId);
    const own = (label: string) => {
      const { answerId } = partOf(sheet, label);
      const answer = harness.db.select().from(answers).where(eq(answers.id, answerId)).get();
      const check = harness.db.select().from(checks).where(eq(checks.answerId, answerId)).get();
      const mark = harness.db.select().from(marks).where(eq(marks.answerId, answerId)).get();
      return { state: answer?.state, verdict: check?.result.verdict, total: mark?.total, result: check?.result };
    };
    return { ...around, sheet, own, client };
  }

  it('lets right answers and empty ones stand, and everything else wait for a person', async () => {
    const { own } = await closeAfter({ a: (nbar) => String(2 * nbar), b: () => 'what?', d: () => 'B' });
    expect(own('a')).toMatchObject({ state: 'marked', verdict: 'right', total: 2 });
    expect(own('b')).toMatchObject({ state: 'waits', verdict: 'unreadable', total: undefined });
    expect(own('c')).toMatchObject({ state: 'marked', verdict: 'unanswered', total: 0 });
    expect(own('d')).toMatchObject({ state: 'marked', verdict: 'right', total: 2 });
  });

  it('judges a later part by the student’s own earlier answer too', async () => {
    const { own, sheet } = await closeAfter({ a: (nbar) => String(5 * nbar), b: (nbar) => String(15 * nbar) });
    expect(own('a')).toMatchObject({ state: 'waits', verdict: 'wrong' });
    expect(own('b')).toMatchObject({ state: 'waits', verdict: 'follow-through' });
    expect(own('b').result).toMatchObject({ fraction: 0.5 });
    expect(own('b').result?.proposed).toHaveLength(1);
    expect(sheet.problems).toHaveLength(1);
  });

  it('recognises slips', async () => {
    const { own } = await closeAfter({ b: (nbar) => String(2 * nbar) });
    expect(own('b').result).toMatchObject({
      verdict: 'slip',
      slip: 0,
      fraction: 0.25,
      relation: { name: 'slip: once' },
    });
  });

  it('leaves words to a person', async () => {
    const { own } = await closeAfter({ c: () => 'Because the field is coherent.' });
    expect(own('c')).toMatchObject({ state: 'waits', verdict: undefined });
  });

  it('shows the student after closing what was handed in, and nothing of the checks', async () => {
    const { client, setId } = await closeAfter({ a: (nbar) => String(2 * nbar) });
    const sheet = await sheetOf(client, setId);
    expect(sheet).toMatchObject({ state: 'closed', submission: { by: 'closing' } });
    expect(JSON.stringify(sheet)).not.toMatch(/verdict|right|proposed/);
    await client.get(`/api/sets/${setId}/feedback`).expect(404);
  });

  it('hands in what was saved of somebody who has left the course', async () => {
    const { setId, student, mover } = await buildOpenSet(harness);
    const client = await harness.agent(student);
    await save(client, partOf(await sheetOf(client, setId), 'a').answerId, '4', 0).expect(200);
    harness.db
      .update(memberships)
      .set({ removedAt: harness.clock.now() })
      .where(eq(memberships.id, student.membershipId))
      .run();
    await moveStage(harness.context, setId, 'closed', mover, presentSet(harness.db, setId).version);
    const script = harness.db.select().from(scripts).where(eq(scripts.membershipId, student.membershipId)).get();
    const [submission] = harness.db
      .select()
      .from(submissions)
      .where(eq(submissions.scriptId, script?.id ?? ''))
      .all();
    expect(submission?.content[0]?.text).toBe('4');
  });

  it('lets an answer wait whose key has no value', async () => {
    const content = buildContent({
      statement: '(a) Well?',
      parts: [buildPart({ answer: { form: 'number', key: '1 / nothing', tolerance: { relative: 0.01 } } })],
    });
    const { setId, student, mover } = await buildOpenSet(harness, { content });
    const client = await harness.agent(student);
    const { answerId } = partOf(await sheetOf(client, setId), 'a');
    await save(client, answerId, '4', 0).expect(200);
    await moveStage(harness.context, setId, 'closed', mover, presentSet(harness.db, setId).version);
    await checkClosedSet(harness.context, setId);
    expect(harness.db.select().from(answers).where(eq(answers.id, answerId)).get()).toMatchObject({
      state: 'waits',
      checkId: null,
    });
  });
});
