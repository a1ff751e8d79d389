import { eq } from 'drizzle-orm';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { answers, marks, scripts, sets, submissions } from '@drizzle/schema';
import type { Feedback, Results } from '@shared/results';
import type { Sheet } from '@shared/scripts';
import type { SetDetail } from '@shared/sets';
import { newId } from '../http/new-id';
import { buildOpenSet, hour } from '../scripts/testing/build-set';
import { runClockStages } from '../sets/run-clock-stages';
import { createHarness, testNow, type Harness } from '../testing/harness';

let harness: Harness;
beforeEach(() => {
  harness = createHarness();
});
afterEach(() => harness.close());

type Client = Awaited<ReturnType<Harness['agent']>>;

/** Tuesday 24 November 2026, 15:36 in Vienna, is now; the set closes on Thursday at the same time. */
const closesAt = testNow + 48 * hour;
const lateRule = { percent: 10, of: 'awarded', per: 'started day', until: closesAt + 96 * hour } as const;

const submit = (client: Client, setId: string) =>
  client.post(`/api/sets/${setId}/submissions`).set('Idempotency-Key', newId()).send({});

async function save(client: Client, setId: string, text: string) {
  const sheet = (await client.get(`/api/sets/${setId}/sheet`).expect(200)).body as Sheet;
  const part = sheet.problems[0]?.parts[0];
  return client
    .put(`/api/answers/${part?.answerId ?? ''}/text`)
    .set('If-Match', String(part?.version ?? 0))
    .set('Idempotency-Key', newId())
    .send({ text });
}

/** Gives every answer of a set six marks in all a script, and releases it. */
async function markAndRelease(lead: Client, setId: string) {
  for (const answer of harness.db.select().from(answers).all()) {
    const id = newId();
    const before = answer.standingMarkId;
    harness.db
      .insert(marks)
      .values({
        id,
        answerId: answer.id,
        kind: 'first',
        criteria: [],
        total: 1.5,
        at: harness.clock.now(),
        replacesId: before,
        idempotencyKey: newId(),
      })
      .run();
    harness.db.update(answers).set({ state: 'marked', standingMarkId: id }).where(eq(answers.id, answer.id)).run();
  }
  const { body } = await lead.get(`/api/sets/${setId}/release`).expect(200);
  await lead
    .post(`/api/sets/${setId}/release`)
    .set('If-Match', String((body as { version: number }).version))
    .send({})
    .expect(200);
}

describe('late work', () => {
  it('is taken until the last date, and costs what the rule says, in feedback, results and CSV', async () => {
    const { setId, student, other, lead } = await buildOpenSet(harness, { lateRule });
    const [late, inTime] = [await harness.agent(student), await harness.agent(other)];
    await save(late, setId, 'first').then((response) => expect(response.status).toBe(200));
    await save(inTime, setId, 'in time').then((response) => expect(response.status).toBe(200));

    harness.clock.set(closesAt + 30 * hour);
    await runClockStages(harness.context);
    expect(harness.db.select().from(sets).get()).toMatchObject({ stage: 'open', closesAt });
    const onTime = harness.db.select().from(submissions).all();
    expect(onTime.map(({ at, by }) => [at, by])).toEqual([
      [closesAt, 'closing'],
      [closesAt, 'closing'],
    ]);
    const sheet = (await late.get(`/api/sets/${setId}/sheet`).expect(200)).body as Sheet;
    expect(sheet).toMatchObject({ state: 'open', closesAt, late: { until: lateRule.until } });
    expect(sheet.late?.rule).toContain('10 % of the marks awarded');
    expect((await save(late, setId, 'second')).status).toBe(200);
    await submit(late, setId).expect(201);
    // What is saved late and not submitted costs nothing.
    expect((await save(inTime, setId, 'late thought')).status).toBe(200);

    harness.clock.set(lateRule.until);
    expect((await save(late, setId, 'third')).status).toBe(409);
    await submit(late, setId).expect(409);
    await runClockStages(harness.context);
    expect(harness.db.select().from(sets).get()).toMatchObject({ stage: 'closed', closesAt });

    const client = await harness.agent(lead);
    await markAndRelease(client, setId);
    const mine = (await late.get(`/api/sets/${setId}/feedback`).expect(200)).body as Feedback;
    expect(mine).toMatchObject({ total: 4.8, outOf: 8, late: { days: 2, marks: 1.2 } });
    expect(mine.late?.sentence).toBe(
      'Handed in late: 2 started days after the closing time. 20 % of the marks awarded, 1.2 marks, are taken off.',
    );
    expect(mine.problems[0]?.total).toBe(6);
    const theirs = (await inTime.get(`/api/sets/${setId}/feedback`).expect(200)).body as Feedback;
    expect(theirs).toMatchObject({ total: 6, late: null });
    expect(theirs.problems[0]?.parts[0]?.answer).toBe('in time');
    const { body: list } = await late.get(`/api/courses/${mine.courseId}/feedback`).expect(200);
    expect(list).toMatchObject({ items: [{ total: 4.8 }] });
    const results = (await client.get(`/api/sets/${setId}/results`).expect(200)).body as Results;
    expect(results.items.map(({ name, total, late: lost }) => [name, total, lost?.marks ?? 0]).sort()).toEqual([
      ['Kit Moor', 6, 0],
      ['Sol Reed', 4.8, 1.2],
    ]);
    const { text: csv } = await client.get(`/api/sets/${setId}/results.csv`).expect(200);
    expect(csv).toContain('days late,taken off,total,out of');
    expect(csv).toContain('1.5,1.5,1.5,1.5,2,1.2,4.8,8');
  });

  it('is handed in at the end where there is nothing else', async () => {
    const { setId, student } = await buildOpenSet(harness, { lateRule });
    const client = await harness.agent(student);
    harness.clock.set(closesAt + hour);
    expect((await save(client, setId, 'late, but something')).status).toBe(200);
    harness.clock.set(lateRule.until);
    await runClockStages(harness.context);
    const script = harness.db.select().from(scripts).where(eq(scripts.membershipId, student.membershipId)).get();
    const own = harness.db
      .select()
      .from(submissions)
      .where(eq(submissions.scriptId, script?.id ?? ''))
      .all();
    expect(own.map(({ at, content }) => [at, content[0]?.text])).toEqual([
      [closesAt, ''],
      [lateRule.until, 'late, but something'],
    ]);
  });

  it('costs nothing for whom a lead waives it, and counts from a time of one’s own', async () => {
    const { setId, student, other, lead } = await buildOpenSet(harness, { lateRule });
    const client = await harness.agent(lead);
    const give = (body: object) => client.post(`/api/sets/${setId}/allowances`).send({ reason: 'r', ...body });
    await give({ membershipId: student.membershipId, closesAt: null, waivesLateRule: true }).expect(201);
    await give({ membershipId: other.membershipId, closesAt: closesAt + 24 * hour }).expect(201);
    harness.clock.set(closesAt + 30 * hour);
    for (const person of [student, other]) {
      const own = await harness.agent(person);
      expect((await save(own, setId, 'late')).status).toBe(200);
      await submit(own, setId).expect(201);
    }
    harness.clock.set(lateRule.until);
    await runClockStages(harness.context);
    await markAndRelease(client, setId);
    const of = async (person: { id: string }) =>
      (await (await harness.agent(person)).get(`/api/sets/${setId}/feedback`).expect(200)).body as Feedback;
    expect(await of(student)).toMatchObject({ total: 6, late: { days: 2, marks: 0 } });
    expect(await of(other)).toMatchObject({ total: 5.4, late: { days: 1, marks: 0.6 } });
  });

  it('has a rule that makes sense, and that stays once the set is closed', async () => {
    const { setId, lead } = await buildOpenSet(harness, { lateRule });
    const client = await harness.agent(lead);
    const get = async () => (await client.get(`/api/sets/${setId}`).expect(200)).body as SetDetail;
    const change = async (fields: object) => {
      const { version, title, coverText, opensAt, individualVariants, showKeys } = await get();
      return client
        .put(`/api/sets/${setId}`)
        .set('If-Match', String(version))
        .send({ title, coverText, opensAt, closesAt, individualVariants, showKeys, lateRule, ...fields });
    };
    const refused = [
      [{ ...lateRule, until: closesAt }, ['lateRule', 'until']],
      [{ ...lateRule, percent: 120 }, ['lateRule', 'percent']],
      [{ ...lateRule, percent: -5 }, ['lateRule', 'percent']],
    ] as const;
    for (const [rule, path] of refused) {
      const response = await change({ lateRule: rule });
      expect([response.status, response.body]).toMatchObject([400, { fields: [{ path }] }]);
    }
    expect((await change({ lateRule: { ...lateRule, percent: 5 } })).status).toBe(200);
    expect((await get()).lateRule).toEqual({ ...lateRule, percent: 5 });
    harness.clock.set(lateRule.until);
    await runClockStages(harness.context);
    const response = await change({ lateRule: null });
    expect([response.status, response.body]).toMatchObject([400, { fields: [{ path: ['lateRule'] }] }]);
    expect((await get()).lateRule).toEqual({ ...lateRule, percent: 5 });
  });
});
