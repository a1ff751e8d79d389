import { eq } from 'drizzle-orm';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { answers, letters, marks, record, sets } from '@drizzle/schema';
import type { Feedback, Release } from '@shared/results';
import { newId } from '../http/new-id';
import { buildCheck, buildContent, buildPile } from '../marking/testing/build-pile';
import { createHarness, type Harness } from '../testing/harness';

let harness: Harness;
let courseId: string;

beforeEach(() => {
  harness = createHarness();
  courseId = harness.makeCourse({ title: 'Light and its quanta' }).id;
});
afterEach(() => harness.close());

const asLead = () => harness.agent(harness.makeMember(courseId, 'lead', { name: 'Signe Halloran' }));
const setRow = (setId: string) => harness.db.select().from(sets).where(eq(sets.id, setId)).get();
const releasedLetters = () => harness.db.select().from(letters).where(eq(letters.kind, 'released')).all();

type Built = ReturnType<typeof buildPile>;

/** Marks an answer directly, as a marker did. */
function settle(built: Built, index: number, total: number, remark = '') {
  const answerId = built.handedIn[index]?.answerId ?? '';
  const marker = harness.makeMember(courseId, 'marker', { name: 'Iwo Brandt' });
  const id = newId();
  const criteria = built.part.criteria.map((each, place) => ({ criterionId: each.id, awarded: place < total }));
  harness.db
    .insert(marks)
    .values({
      id,
      answerId,
      kind: 'first',
      markerId: marker.membershipId,
      criteria,
      total,
      remark,
      at: harness.clock.now(),
      idempotencyKey: newId(),
    })
    .run();
  harness.db.update(answers).set({ state: 'marked', standingMarkId: id }).where(eq(answers.id, answerId)).run();
  return marker;
}

async function releasedSet(
  values: Parameters<typeof buildPile>[1]['values'],
  wishes: Partial<Parameters<typeof buildPile>[1]> = {},
) {
  const built = buildPile(harness, { courseId, values, ...wishes });
  const markers = values.flatMap((value, index) =>
    value === 2 ? [] : [settle(built, index, 1, 'You took the amplitude.')],
  );
  const lead = await asLead();
  const before = (await lead.get(`/api/sets/${built.setId}/release`).expect(200)).body as Release;
  await lead
    .post(`/api/sets/${built.setId}/release`)
    .set('If-Match', `"${String(before.version)}"`)
    .send({})
    .expect(200);
  return { built, lead, markers };
}

describe('release', () => {
  it('says what is missing, and refuses until nothing is', async () => {
    const built = buildPile(harness, { courseId, values: [2, 4] });
    const lead = await asLead();
    const before = (await lead.get(`/api/sets/${built.setId}/release`).expect(200)).body as Release;
    expect(before).toMatchObject({ ready: false, students: 2, answers: 2, totals: [0, 3], outOf: 3, releasedAt: null });
    expect(before.readiness.find((item) => item.name === 'marked')).toEqual({
      name: 'marked',
      ready: false,
      sentence: '1 answer waits for a mark.',
      piles: [{ id: built.pileId, name: '1 (a)', missing: 1 }],
    });
    const refused = await lead.post(`/api/sets/${built.setId}/release`).set('If-Match', '"1"').send({}).expect(409);
    expect(refused.body).toMatchObject({ type: '/errors/conflict', detail: '1 answer waits for a mark.' });
    expect(setRow(built.setId)?.stage).toBe('marking');
    expect(releasedLetters()).toEqual([]);
  });

  it('moves the set on, queues a letter to every student and enters the record', async () => {
    const { built, lead } = await releasedSet([2, 4]);
    expect(setRow(built.setId)).toMatchObject({ stage: 'released', version: 2 });
    const queued = releasedLetters();
    expect(new Set(queued.map((letter) => letter.userId))).toEqual(
      new Set(built.handedIn.map((each) => each.student.id)),
    );
    expect(queued[0]).toMatchObject({ dueAt: harness.clock.now() + 600_000, sentAt: null });
    expect(queued[0]?.text).toContain(`/courses/${courseId}/feedback/${built.setId}`);
    expect(harness.db.select().from(record).where(eq(record.action, 'set released')).get()?.sentence).toBe(
      'Signe Halloran released set 4 to 2 students.',
    );
    const after = (await lead.get(`/api/sets/${built.setId}/release`)).body as Release;
    expect(after.takeBackUntil).toBe(harness.clock.now() + 600_000);
  });

  it('can be taken back until the first letter leaves', async () => {
    const { built, lead } = await releasedSet([2, 4]);
    const student = await harness.agent(built.handedIn[0]?.student ?? null);
    await student.get(`/api/sets/${built.setId}/feedback`).expect(200);
    await lead.post(`/api/sets/${built.setId}/release/take-back`).set('If-Match', '"1"').send({}).expect(412);
    await lead.post(`/api/sets/${built.setId}/release/take-back`).set('If-Match', '"2"').send({}).expect(200);
    expect(setRow(built.setId)).toMatchObject({ stage: 'marking', version: 3 });
    expect(releasedLetters().every((letter) => letter.cancelledAt !== null)).toBe(true);
    await student.get(`/api/sets/${built.setId}/feedback`).expect(404);

    harness.clock.advance(1_000);
    await lead
      .post(`/api/sets/${built.setId}/release`)
      .set('If-Match', '"3"')
      .send({ text: 'In own words.' })
      .expect(200);
    const [letter] = releasedLetters().filter((each) => each.cancelledAt === null);
    expect(letter?.text).toContain('In own words.');
    harness.db
      .update(letters)
      .set({ sentAt: harness.clock.now() })
      .where(eq(letters.id, letter?.id ?? ''))
      .run();
    await lead.post(`/api/sets/${built.setId}/release/take-back`).set('If-Match', '"4"').send({}).expect(409);
  });

  it('cannot be taken back after ten minutes', async () => {
    const { built, lead } = await releasedSet([2]);
    harness.clock.advance(600_000);
    await lead.post(`/api/sets/${built.setId}/release/take-back`).set('If-Match', '"2"').send({}).expect(409);
  });

  it('is for leads of the course', async () => {
    const built = buildPile(harness, { courseId, values: [2] });
    const marker = await harness.agent(harness.makeMember(courseId, 'marker'));
    const stranger = await harness.agent(harness.makeMember(harness.makeCourse().id, 'lead'));
    for (const client of [marker, stranger]) {
      await client.get(`/api/sets/${built.setId}/release`).expect(403);
      await client.post(`/api/sets/${built.setId}/release`).set('If-Match', '"1"').send({}).expect(403);
      await client.get(`/api/sets/${built.setId}/results`).expect(403);
      await client.get(`/api/sets/${built.setId}/results.csv`).expect(403);
    }
    const lead = await asLead();
    await lead.get(`/api/sets/${newId()}/release`).expect(404);
    await lead.post(`/api/sets/${built.setId}/release`).send({}).expect(428);
  });
});

describe('feedback', () => {
  it('prints the givens that the statement names, and none that only keys use', async () => {
    const { content, check } = withSlip();
    const silent = { ...content, statement: 'A pulse passes a loss.\n\n(a) How many are left?' };
    const { built } = await releasedSet([check], { content: silent });
    const student = await harness.agent(built.handedIn[0]?.student ?? null);
    const { body } = await student.get(`/api/sets/${built.setId}/feedback`).expect(200);
    expect((body as Feedback).problems[0]?.givens).toEqual([]);
  });

  const slips = [
    { name: 'amplitude for intensity', expression: 'nbar', feedback: 'The loss acts on the number.', fraction: 0.5 },
  ];

  function withSlip() {
    const content = buildContent();
    const [part] = content.parts;
    return {
      content: { ...content, parts: [{ ...part, answer: { ...part?.answer, slips } }] } as unknown as typeof content,
      check: buildCheck(4, { verdict: 'slip', slip: 0, relation: { name: 'slip: amplitude for intensity' } }),
    };
  }

  it('shows a student their own marks, criteria, key, slip and remark, and no marker', async () => {
    const { content, check } = withSlip();
    const { built, markers } = await releasedSet([check, 2], { content });
    const own = built.handedIn[0];
    const student = await harness.agent(own?.student ?? null);
    const response = await student.get(`/api/sets/${built.setId}/feedback`).expect(200);
    const body = response.body as Feedback;
    expect(body).toMatchObject({ total: 1, outOf: 3, showKeys: true });
    expect(body.problems[0]).toMatchObject({
      stem: 'A pulse of $\\val{nbar}$ photons passes a loss.',
      givens: [{ name: 'nbar', printed: '4' }],
    });
    expect(body.problems[0]?.parts[0]).toMatchObject({
      label: 'a',
      text: 'How many are left?',
      answer: '4',
      verdict: 'slip',
      key: { value: 2, band: { low: 1.98, high: 2.02 }, answer: 4 },
      slip: { name: 'amplitude for intensity', feedback: 'The loss acts on the number.' },
      criteria: [
        { name: 'M1', awarded: true },
        { name: 'B1', awarded: false },
        { name: 'A1', awarded: false },
      ],
      remark: 'You took the amplitude.',
    });
    for (const secret of [
      'Brandt',
      ...markers.flatMap((each) => [each.id, each.membershipId]),
      'guidance',
      'nbar / 2',
      built.handedIn[1]?.code ?? '?',
    ])
      expect(response.text).not.toContain(secret);
    const list = await student.get(`/api/courses/${courseId}/feedback`).expect(200);
    expect(list.body).toMatchObject({ total: 1, items: [{ setId: built.setId, total: 1, outOf: 3 }] });
  });

  it('keeps the key, and how the answer stands to it, where the set does not show keys', async () => {
    const { built } = await releasedSet([4], { showKeys: false });
    const student = await harness.agent(built.handedIn[0]?.student ?? null);
    const { body } = (await student.get(`/api/sets/${built.setId}/feedback`).expect(200)) as { body: Feedback };
    expect(body.problems[0]?.parts[0]).toMatchObject({ verdict: 'wrong', key: null, relation: null });
  });

  it('is not there before the release, nor for who has no script, nor for the team', async () => {
    const built = buildPile(harness, { courseId, values: [2] });
    const student = await harness.agent(built.handedIn[0]?.student ?? null);
    await student.get(`/api/sets/${built.setId}/feedback`).expect(404);
    expect((await student.get(`/api/courses/${courseId}/feedback`)).body).toEqual({ items: [], total: 0 });
    harness.db.update(sets).set({ stage: 'released' }).where(eq(sets.id, built.setId)).run();
    const other = await harness.agent(harness.makeMember(courseId, 'student'));
    await other.get(`/api/sets/${built.setId}/feedback`).expect(404);
    await (await asLead()).get(`/api/sets/${built.setId}/feedback`).expect(403);
  });
});

describe('results', () => {
  it('carry codes until the release, then names, and export safely', async () => {
    const built = buildPile(harness, { courseId, values: [2, 4] });
    const lead = await asLead();
    const before = await lead.get(`/api/sets/${built.setId}/results`).expect(200);
    expect(before.body).toMatchObject({
      outOf: 3,
      items: [{ code: 'K000', name: null, marks: [3] }, { marks: [null] }],
    });
    expect((await lead.get(`/api/courses/${courseId}/results`)).body).toMatchObject({
      items: [{ scripts: 2, answers: 2, marked: 1 }],
    });

    const set = await releasedSet([2], { courseId: (courseId = harness.makeCourse().id) });
    const student = set.built.handedIn[0]?.student;
    const csv = await set.lead.get(`/api/sets/${set.built.setId}/results.csv`).expect(200);
    expect(csv.headers['content-type']).toContain('text/csv');
    expect(csv.text).toBe(
      `\uFEFFscript,name,e-mail,1 (a),total,out of\r\nK000,${student?.name ?? ''},${student?.email ?? ''},3,3,3\r\n`,
    );
  });
});
