import { eq } from 'drizzle-orm';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { answers, courses, letters, markQueries, marks, queryAnswers, record, sets } from '@drizzle/schema';
import type { Desk } from '@shared/desk';
import type { OwnQueries, Query } from '@shared/queries';
import { queriesLast } from '@shared/query-policy';
import { newId } from '../http/new-id';
import { buildPile } from '../marking/testing/build-pile';
import { createHarness, testNow, type Harness } from '../testing/harness';

let harness: Harness;
beforeEach(() => {
  harness = createHarness();
});
afterEach(() => harness.close());

type Client = Awaited<ReturnType<Harness['agent']>>;

/** A released set: the first student's answer was marked 1 of 3 by Mo Marker, and a lead and a second marker did not mark it. */
function released() {
  const courseId = harness.makeCourse().id;
  const built = buildPile(harness, { courseId, values: [4, 2], stage: 'released' });
  const lead = harness.makeMember(courseId, 'lead', { name: 'Ada Lead' });
  const marker = harness.makeMember(courseId, 'marker', { name: 'Mo Marker' });
  const second = harness.makeMember(courseId, 'marker', { name: 'Sam Second' });
  const [handed, other] = built.handedIn;
  if (!handed || !other) throw new Error('Nobody handed in.');
  const criteria = built.part.criteria.map(({ id }, index) => ({ criterionId: id, awarded: index === 0 }));
  const markId = newId();
  harness.db
    .insert(marks)
    .values({
      id: markId,
      answerId: handed.answerId,
      kind: 'first',
      markerId: marker.membershipId,
      criteria,
      total: 1,
      remark: 'See part (a).',
      at: testNow,
      idempotencyKey: newId(),
    })
    .run();
  harness.db
    .update(answers)
    .set({ state: 'marked', standingMarkId: markId })
    .where(eq(answers.id, handed.answerId))
    .run();
  const awarding = (count: number) =>
    built.part.criteria.map(({ id }, index) => ({ criterionId: id, awarded: index < count }));
  return {
    ...built,
    courseId,
    lead,
    marker,
    second,
    student: handed.student,
    other: other.student,
    handed,
    markId,
    awarding,
  };
}

type Released = ReturnType<typeof released>;

const ask = (client: Client, { setId, part }: Released, overrides: object = {}, key = newId()) =>
  client
    .post(`/api/sets/${setId}/own-queries`)
    .set('Idempotency-Key', key)
    .send({
      position: 1,
      partId: part.id,
      criterionId: part.criteria[1]?.id,
      reason: 'The loss is named.',
      ...overrides,
    });

async function asked(built: Released): Promise<string> {
  const done = await ask(await harness.agent(built.student), built).expect(201);
  return (done.body as OwnQueries).items.at(-1)?.id ?? '';
}

const answer = (client: Client, queryId: string, body: object, version = 1, key = newId()) =>
  client
    .post(`/api/queries/${queryId}/answer`)
    .set('If-Match', `"${String(version)}"`)
    .set('Idempotency-Key', key)
    .send(body);

const markQuery = (id: string) => harness.db.select().from(markQueries).where(eq(markQueries.id, id)).get();
const standing = ({ handed }: Released) =>
  harness.db
    .select({ mark: marks, version: answers.version })
    .from(answers)
    .innerJoin(marks, eq(marks.id, answers.standingMarkId))
    .where(eq(answers.id, handed.answerId))
    .get();

describe('a mark query', () => {
  it('is asked by its student, once however often it is sent, and waits', async () => {
    const built = released();
    const client = await harness.agent(built.student);
    const before = (await client.get(`/api/sets/${built.setId}/own-queries`).expect(200)).body as OwnQueries;
    expect(before).toEqual({ closesAt: testNow + queriesLast, isOpen: true, policy: 'raise or lower', items: [] });
    const key = newId();
    const first = await ask(client, built, {}, key).expect(201);
    expect(
      await ask(client, built, {}, key)
        .expect(201)
        .then(({ body }: { body: unknown }) => body),
    ).toEqual(first.body);
    expect(first.body).toMatchObject({
      items: [{ position: 1, partLabel: 'a', criterionName: 'B1', reason: 'The loss is named.', outcome: null }],
    });
    expect(harness.db.select().from(markQueries).all()).toMatchObject([
      { answerId: built.handed.answerId, markId: built.markId, policy: 'raise or lower', at: testNow },
    ]);
    expect(harness.db.select().from(record).where(eq(record.action, 'mark queried')).all()).toMatchObject([
      { actorId: built.student.id, courseId: built.courseId, reason: 'The loss is named.' },
    ]);
    const again = await ask(client, built).expect(409);
    expect(again.body).toMatchObject({ type: '/errors/conflict' });
    expect(harness.db.select().from(markQueries).all()).toHaveLength(1);
  });

  it('is refused with a sentence where something is missing', async () => {
    const built = released();
    const client = await harness.agent(built.student);
    for (const [wrong, field] of [
      [{ reason: '  ' }, 'reason'],
      [{ criterionId: newId() }, 'criterionId'],
      [{ partId: newId() }, 'partId'],
    ] as const) {
      const refused = await ask(client, built, wrong).expect(400);
      expect(refused.body).toMatchObject({ type: '/errors/invalid-input', fields: [{ path: [field] }] });
    }
    expect(harness.db.select().from(markQueries).all()).toHaveLength(0);
  });

  it('is the student’s own, and only after the release', async () => {
    const built = released();
    await ask(await harness.agent(built.lead), built).expect(403);
    await ask(await harness.agent(built.marker), built).expect(403);
    await ask(await harness.agent(harness.makePerson()), built).expect(403);
    await ask(await harness.agent(null), built).expect(401);
    // Without a script in the set.
    await ask(await harness.agent(harness.makeMember(built.courseId, 'student')), built).expect(404);
    await asked(built);
    const others = await (await harness.agent(built.other)).get(`/api/sets/${built.setId}/own-queries`).expect(200);
    expect((others.body as OwnQueries).items).toEqual([]);

    harness.db.update(sets).set({ stage: 'marking' }).where(eq(sets.id, built.setId)).run();
    const early = await ask(await harness.agent(built.student), built).expect(404);
    expect(early.body).toMatchObject({ type: '/errors/not-found' });
  });

  it('can be asked until its closing time, which a lead can move', async () => {
    const built = released();
    const student = await harness.agent(built.student);
    harness.clock.advance(queriesLast);
    expect((await ask(student, built).expect(409)).body).toMatchObject({ type: '/errors/conflict' });

    const path = `/api/sets/${built.setId}/query-closing`;
    const closesAt = harness.clock.now() + 3_600_000;
    const lead = await harness.agent(built.lead);
    const put = (client: Client, body: object, version = 1) =>
      client
        .put(path)
        .set('If-Match', `"${String(version)}"`)
        .send(body);
    for (const person of [built.marker, built.student])
      await put(await harness.agent(person), { closesAt }).expect(403);
    expect((await put(lead, { closesAt: 1 }).expect(400)).body).toMatchObject({ fields: [{ path: ['closesAt'] }] });
    await put(lead, { closesAt }).expect(200);
    await put(lead, { closesAt: null }).expect(412);
    expect(harness.db.select().from(sets).get()).toMatchObject({ queriesCloseAt: closesAt, version: 2 });
    await ask(student, built).expect(201);
    harness.clock.set(closesAt);
    await ask(student, built, { criterionId: null }).expect(409);
  });
});

describe('the answer to a mark query', () => {
  it('by a colleague changes the mark: a new row that names the one before, a letter, the feedback and the record', async () => {
    const built = released();
    const queryId = await asked(built);
    harness.clock.advance(60_000);
    const client = await harness.agent(built.second);
    const shown = (await client.get(`/api/queries/${queryId}`).expect(200)).body as Query;
    expect(shown).toMatchObject({ part: '1 (a)', criterionName: 'B1', notYours: null, version: 1, outcome: null });
    expect(shown.marks).toMatchObject([{ marker: 'Mo Marker', total: 1, stands: true }]);

    const key = newId();
    const body = { criteria: built.awarding(2), words: 'The loss is named on your page; B1 is awarded.' };
    const done = (await answer(client, queryId, body, 1, key).expect(200)).body as Query;
    expect(done.outcome).toMatchObject({ before: 1, after: 2, words: body.words });
    expect(standing(built)).toMatchObject({
      version: 2,
      mark: {
        total: 2,
        markerId: built.second.membershipId,
        replacesId: built.markId,
        reason: body.words,
        remark: 'See part (a).',
      },
    });
    // The mark before is there as it was.
    expect(harness.db.select().from(marks).where(eq(marks.id, built.markId)).get()).toMatchObject({ total: 1 });
    await answer(client, queryId, body, 1, key).expect(200);
    expect(harness.db.select().from(queryAnswers).all()).toMatchObject([{ queryId, isChanged: true }]);
    expect(harness.db.select().from(record).where(eq(record.action, 'query answered')).all()).toMatchObject([
      { actorId: built.second.id, thingId: queryId, before: { total: 1 }, after: { total: 2 }, reason: body.words },
    ]);

    const letter = harness.db.select().from(letters).where(eq(letters.kind, 'query answered')).all();
    expect(letter).toMatchObject([{ userId: built.student.id }]);
    expect(letter[0]?.text).toContain('the mark went from 1 to 2');
    const student = await harness.agent(built.student);
    const own = await student.get(`/api/sets/${built.setId}/own-queries`).expect(200);
    expect(own.body).toMatchObject({ items: [{ outcome: { before: 1, after: 2, words: body.words } }] });
    const feedback = await student.get(`/api/sets/${built.setId}/feedback`).expect(200);
    expect(feedback.body).toMatchObject({ total: 2 });
    for (const text of [own.text, feedback.text, letter[0]?.text ?? ''])
      for (const secret of ['Sam Second', 'Mo Marker', built.second.membershipId, built.marker.membershipId])
        expect(text).not.toContain(secret);
  });

  it('can be that the mark stands, with a reason', async () => {
    const built = released();
    const queryId = await asked(built);
    const lead = await harness.agent(built.lead);
    expect((await answer(lead, queryId, { criteria: null, words: '' }).expect(400)).body).toMatchObject({
      fields: [{ path: ['words'] }],
    });
    const same = await answer(lead, queryId, { criteria: built.awarding(1), words: 'No.' }).expect(400);
    expect(same.body).toMatchObject({ fields: [{ path: ['criteria'] }] });
    const done = await answer(lead, queryId, { criteria: null, words: 'The loss is not named.' }).expect(200);
    expect(done.body).toMatchObject({ outcome: { before: 1, after: 1 } });
    expect(standing(built)).toMatchObject({ version: 1, mark: { id: built.markId } });
    expect(harness.db.select().from(queryAnswers).all()).toMatchObject([{ markId: built.markId, isChanged: false }]);
    await answer(lead, queryId, { criteria: null, words: 'Once more.' }).expect(409);
  });

  it('is not given by who gave the mark, nor by one who answered it before, students or outsiders', async () => {
    const built = released();
    const queryId = await asked(built);
    const body = { criteria: built.awarding(3), words: 'Sorry.' };
    const marker = await harness.agent(built.marker);
    expect((await marker.get(`/api/queries/${queryId}`).expect(200)).body).toMatchObject({
      notYours: 'You gave a mark of this answer, so a colleague answers the query.',
    });
    const refused = await answer(marker, queryId, body).expect(403);
    expect(refused.body).toMatchObject({
      type: '/errors/not-allowed',
      detail: 'You gave a mark of this answer, so a colleague answers the query.',
    });
    const outsider = harness.makeMember(harness.makeCourse().id, 'lead');
    for (const person of [built.student, built.other, outsider]) {
      const client = await harness.agent(person);
      await client.get(`/api/queries/${queryId}`).expect(403);
      await answer(client, queryId, body).expect(403);
      await client.get(`/api/courses/${built.courseId}/queries`).expect(403);
    }
    await answer(await harness.agent(null), queryId, body).expect(401);
    await answer(await harness.agent(built.lead), newId(), body).expect(404);
    expect(standing(built)?.mark.id).toBe(built.markId);

    await answer(await harness.agent(built.second), queryId, { ...body, criteria: built.awarding(2) }).expect(200);
    const next = await asked(built);
    await answer(await harness.agent(built.second), next, body, 2).expect(403);
    await answer(await harness.agent(built.lead), next, body, 2).expect(200);
    expect(standing(built)?.mark).toMatchObject({ total: 3 });
    // First, then replaced, then replaced: the whole chain is kept.
    expect(harness.db.select().from(marks).where(eq(marks.answerId, built.handed.answerId)).all()).toHaveLength(3);
  });

  it('lowers a mark only where the student was told so', async () => {
    const built = released();
    const lead = await harness.agent(built.lead);
    const path = `/api/courses/${built.courseId}/query-policy`;
    for (const person of [built.marker, built.student])
      await (await harness.agent(person)).put(path).send({ policy: 'only raise' }).expect(403);
    await lead.put(path).send({ policy: 'only raise' }).expect(200);
    expect(harness.db.select().from(courses).get()).toMatchObject({ queryPolicy: 'only raise' });
    const queryId = await asked(built);
    // The course changes its mind; this student was told otherwise.
    await lead.put(path).send({ policy: 'raise or lower' }).expect(200);
    expect(markQuery(queryId)).toMatchObject({ policy: 'only raise' });
    const lower = { criteria: built.awarding(0), words: 'Not even that.' };
    const refused = await answer(lead, queryId, lower).expect(400);
    expect(refused.body).toMatchObject({ fields: [{ path: ['criteria'] }] });
    await answer(lead, queryId, { criteria: null, words: 'It stands.' }).expect(200);
    const next = await asked(built);
    await answer(lead, next, lower).expect(200);
    expect(standing(built)?.mark).toMatchObject({ total: 0 });
  });

  it('is refused on a state that has changed', async () => {
    const built = released();
    const queryId = await asked(built);
    const lead = await harness.agent(built.lead);
    const stale = await answer(lead, queryId, { criteria: null, words: 'x' }, 7).expect(412);
    expect(stale.body).toMatchObject({ type: '/errors/stale', current: { id: queryId, version: 1 } });
    await lead.post(`/api/queries/${queryId}/answer`).send({ criteria: null, words: 'x' }).expect(428);
  });
});

it('the team sees what waits, on the list and on the desk, and whose it is not', async () => {
  const built = released();
  await asked(built);
  const needsOf = async (person: { id: string }) =>
    (
      (await (await harness.agent(person)).get(`/api/courses/${built.courseId}/desk`).expect(200)).body as Desk
    ).needs.map(({ title }) => title);
  for (const person of [built.lead, built.second]) expect(await needsOf(person)).toContain('One mark query waits');
  for (const person of [built.marker, built.student])
    expect((await needsOf(person)).some((title) => title.includes('quer'))).toBe(false);
  const list = await (await harness.agent(built.marker)).get(`/api/courses/${built.courseId}/queries`).expect(200);
  expect(list.body).toMatchObject({ total: 1, waiting: 0, sets: [{ number: 4, isChosen: false }] });
});

it('queries and their answers are append-only', async () => {
  const built = released();
  const queryId = await asked(built);
  await answer(await harness.agent(built.lead), queryId, { criteria: null, words: 'It stands.' }).expect(200);
  expect(() => harness.db.update(markQueries).set({ reason: 'x' }).run()).toThrow();
  expect(() => harness.db.delete(queryAnswers).run()).toThrow();
});
