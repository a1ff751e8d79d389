import { eq } from 'drizzle-orm';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { answers, answerVersions, letters, marks, record, scripts, sets } from '@drizzle/schema';
import { ownData, type OwnData } from '@shared/own-data';
import { newId } from '../http/new-id';
import { buildCheck, buildContent, buildPile } from '../marking/testing/build-pile';
import { enter } from '../record/enter';
import { createHarness, testNow, type Harness } from '../testing/harness';

/** What may never be in anybody's file: nothing else in the world looks like these. */
const planted = {
  key: '0.7310573519',
  tolerance: '0.0192837465',
  slip: '0.5271839462',
  guidance: 'planted guidance',
  otherAnswer: '4.0000271828',
  marker: 'Planted Marker',
  reason: 'planted reason of a colleague',
} as const;

/** What is theirs once it is released, and not before. */
const released = { remark: 'planted remark', slipFeedback: 'planted slip feedback' } as const;

let harness: Harness;
beforeEach(() => {
  harness = createHarness();
});
afterEach(() => harness.close());

function plantedContent() {
  const content = buildContent();
  return {
    ...content,
    parts: content.parts.map((part) => ({
      ...part,
      answer: {
        form: 'number' as const,
        key: `nbar * ${planted.key}`,
        tolerance: { relative: Number(planted.tolerance) },
        slips: [{ name: 's', expression: planted.slip, feedback: released.slipFeedback, fraction: 0.5 }],
      },
      criteria: part.criteria.map((criterion) => ({ ...criterion, guidance: planted.guidance })),
    })),
  };
}

/** A marked set of two students, with a record that names the marker. */
function markedSet(stage: 'marking' | 'released') {
  const courseId = harness.makeCourse().id;
  const slip = (text: string) => buildCheck(4, { verdict: 'slip', slip: 0, readAs: text });
  const built = buildPile(harness, {
    courseId,
    stage,
    content: plantedContent(),
    values: [slip('4.1'), slip(planted.otherAnswer)],
  });
  const marker = harness.makeMember(courseId, 'marker', { name: planted.marker });
  const [handed, other] = built.handedIn;
  if (!handed || !other) throw new Error('Nobody handed in.');
  for (const { answerId } of built.handedIn) {
    const id = newId();
    const criteria = built.part.criteria.map((each) => ({ criterionId: each.id, awarded: false }));
    const mark = { id, answerId, kind: 'first' as const, markerId: marker.membershipId, criteria, total: 0 };
    harness.db
      .insert(marks)
      .values({ ...mark, remark: released.remark, at: testNow, idempotencyKey: newId() })
      .run();
    harness.db.update(answers).set({ state: 'marked', standingMarkId: id }).where(eq(answers.id, answerId)).run();
    harness.db
      .insert(answerVersions)
      .values({
        id: newId(),
        answerId,
        number: 1,
        text: answerId === handed.answerId ? 'my first thought' : planted.otherAnswer,
        savedAt: testNow,
        idempotencyKey: newId(),
      })
      .run();
    enter(harness.db, {
      at: testNow,
      actorId: marker.id,
      courseId,
      action: 'mark changed',
      thing: 'answer',
      thingId: answerId,
      sentence: `${planted.marker} changed a mark.`,
      before: { total: 1 },
      after: { total: 0 },
      reason: planted.reason,
    });
  }
  harness.db
    .insert(letters)
    .values({
      id: newId(),
      kind: 'receipt',
      userId: handed.student.id,
      subject: 'Receipt: Set 4',
      text: 'text of the letter',
      createdAt: testNow,
      dueAt: testNow,
    })
    .run();
  return { ...built, courseId, marker, handed, other };
}

async function dataOf(person: { id: string }): Promise<{ data: OwnData; text: string }> {
  const response = await (await harness.agent(person)).get('/api/account/own-data').expect(200);
  expect(response.headers['content-disposition']).toBe('attachment; filename=halfsilver-own-data.json');
  return { data: ownData.parse(response.body), text: response.text };
}

describe('what is held about a student', () => {
  it('is all there once marks are released: work, receipts, feedback, queries, letters, record', async () => {
    const built = markedSet('released');
    const { student } = built.handed;
    await (
      await harness.agent(student)
    )
      .post(`/api/sets/${built.setId}/own-queries`)
      .set('Idempotency-Key', newId())
      .send({ position: 1, partId: built.part.id, criterionId: null, reason: 'Look again, please.' })
      .expect(201);
    const { data, text } = await dataOf(student);
    expect(data.account).toMatchObject({ id: student.id, email: student.email, hasPassword: true });
    expect(data.memberships).toMatchObject([{ courseId: built.courseId, role: 'student' }]);
    expect(data.scripts).toMatchObject([
      {
        setNumber: 4,
        code: built.handed.code,
        answers: [{ part: '1 (a)', versions: [{ number: 1, text: 'my first thought' }] }],
        submissions: [{ number: 1, by: 'student', receipt: { script: built.handed.code } }],
        feedback: { total: 0, outOf: 3 },
        queries: [{ reason: 'Look again, please.', outcome: null }],
      },
    ]);
    expect(data.letters).toMatchObject([{ kind: 'receipt', subject: 'Receipt: Set 4' }]);
    expect(data.record).toMatchObject([
      { action: 'mark changed', by: 'marker', sentence: null },
      { action: 'mark queried', by: 'you' },
    ]);
    for (const secret of Object.values(released)) expect(text).toContain(secret);
    for (const secret of ['text of the letter', 'passwordHash']) expect(text).not.toContain(secret);
    // That it was taken is recorded.
    expect(harness.db.select().from(record).where(eq(record.action, 'own data taken')).all()).toMatchObject([
      { actorId: student.id, thingId: student.id },
    ]);
  });

  it.each(['marking', 'released'] as const)(
    'holds no key, slip, tolerance, guidance, colleague or other student while the set is %s',
    async (stage) => {
      const built = markedSet(stage);
      const { text } = await dataOf(built.handed.student);
      const { other, marker } = built;
      const others = [other.code, other.answerId, other.scriptId, other.student.id, other.student.membershipId];
      for (const secret of [...Object.values(planted), ...others, marker.id, marker.membershipId])
        expect(text.includes(secret), secret).toBe(false);
    },
  );

  it('holds nothing of marks before their release', async () => {
    const built = markedSet('marking');
    const { data, text } = await dataOf(built.handed.student);
    expect(data.scripts).toMatchObject([{ feedback: null, queries: [] }]);
    expect(data.record).toEqual([]);
    for (const secret of Object.values(released)) expect(text).not.toContain(secret);
    // One script that was released before its set has its feedback.
    harness.db.update(scripts).set({ releasedAt: testNow }).where(eq(scripts.id, built.handed.scriptId)).run();
    expect((await dataOf(built.handed.student)).data.scripts[0]?.feedback).toMatchObject({ total: 0 });
    expect((await dataOf(built.other.student)).data.scripts[0]?.feedback).toBeNull();
  });

  it('is there for those who are signed in, of themselves alone', async () => {
    const built = markedSet('released');
    for (const path of ['/api/account/own-data', '/api/account/looks'])
      expect((await (await harness.agent(null)).get(path).expect(401)).body).toMatchObject({
        type: '/errors/not-signed-in',
      });
    const outsider = await dataOf(harness.makePerson());
    expect(outsider.data).toMatchObject({ memberships: [], scripts: [], letters: [], looks: [] });
    const { data } = await dataOf(built.marker);
    expect(data.scripts).toEqual([]);
  });
});

describe('a look at a script after its release', () => {
  it('is recorded once an hour for each person, and told by role', async () => {
    const built = markedSet('released');
    const path = `/api/answers/${built.handed.answerId}/bench`;
    const marker = await harness.agent(built.marker);
    await marker.get(path).expect(200);
    await marker.get(path).expect(200);
    harness.clock.advance(3_600_001);
    const lead = harness.makeMember(built.courseId, 'lead', { name: 'Ada Lead' });
    await (await harness.agent(lead)).get(path).expect(200);
    await marker.get(path).expect(200);
    const looks = await (await harness.agent(built.handed.student)).get('/api/account/looks').expect(200);
    expect((looks.body as { items: { by: string }[] }).items.map(({ by }) => by).sort()).toEqual([
      'lead',
      'marker',
      'marker',
    ]);
    for (const secret of [planted.marker, 'Ada Lead', built.marker.id, lead.id])
      expect(looks.text).not.toContain(secret);
    const others = await (await harness.agent(built.other.student)).get('/api/account/looks').expect(200);
    expect(others.body).toEqual({ items: [], total: 0 });
    expect(harness.db.select().from(record).where(eq(record.action, 'script looked at')).all()).toHaveLength(3);
  });

  it('is not recorded before', async () => {
    const built = markedSet('marking');
    await (await harness.agent(built.marker)).get(`/api/answers/${built.handed.answerId}/bench`).expect(200);
    expect(harness.db.select().from(record).where(eq(record.action, 'script looked at')).all()).toEqual([]);
    expect(harness.db.select().from(sets).where(eq(sets.id, built.setId)).get()).toMatchObject({ stage: 'marking' });
  });
});
