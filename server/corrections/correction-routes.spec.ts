import { eq } from 'drizzle-orm';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import {
  answers,
  checks,
  correctionChanges,
  corrections,
  marks,
  record,
  revisions,
  setProblems,
  sets,
} from '@drizzle/schema';
import type { Correction, CorrectionChange, CorrectablePart } from '@shared/corrections';
import type { SetStage } from '@shared/primitives';
import type { Feedback } from '@shared/results';
import { newId } from '../http/new-id';
import { workJobs } from '../jobs/work-jobs';
import type { Emitted } from '../live/live';
import { studentsRoom } from '../live/rooms';
import { checkSubmission } from '../scripts/check-submission';
import { buildCheck, buildContent, buildPile } from '../marking/testing/build-pile';
import { createHarness, type Harness } from '../testing/harness';

let harness: Harness;
let courseId: string;
let leadPerson: ReturnType<Harness['makeMember']>;
let lead: Awaited<ReturnType<Harness['agent']>>;
let told: Emitted[];

beforeEach(async () => {
  harness = createHarness();
  courseId = harness.makeCourse().id;
  leadPerson = harness.makeMember(courseId, 'lead');
  lead = await harness.agent(leadPerson);
  told = [];
  harness.context.live.observe((emitted) => told.push(emitted));
});
afterEach(() => harness.close());

/** nbar = 4 everywhere and the key is nbar/2: 2 is right, 4 is twice the key, 5.3 is nothing. */
function buildAnswered(stage: SetStage = 'marking') {
  const content = buildContent();
  const accuracy = content.parts[0]?.criteria[2]?.id ?? '';
  const right = buildCheck(2, { proposed: [accuracy] });
  const built = buildPile(harness, { courseId, stage, content, values: [right, 4, 4, 4, 5.3] });
  const marker = harness.makeMember(courseId, 'marker');
  // One of those who wrote 4 was marked by a person.
  const byPerson = built.handedIn[3]!.answerId;
  const criteria = built.part.criteria.map(({ id }, index) => ({ criterionId: id, awarded: index === 0 }));
  const markId = newId();
  harness.db
    .insert(marks)
    .values({
      id: markId,
      answerId: byPerson,
      kind: 'first',
      markerId: marker.membershipId,
      criteria,
      total: 1,
      at: 1,
      idempotencyKey: newId(),
    })
    .run();
  harness.db.update(answers).set({ state: 'marked', standingMarkId: markId }).where(eq(answers.id, byPerson)).run();
  return { ...built, marker, byPerson, markId };
}

const amended = (more: object = {}) => ({ form: 'number', key: 'nbar', tolerance: { relative: 0.01 }, ...more });
const words = { reason: 'The key forgot that nothing is lost.', note: 'We had halved the number by mistake' };

const propose = (pileId: string, answer: object = amended(), key: string = newId()) =>
  lead
    .post(`/api/piles/${pileId}/corrections`)
    .set('Idempotency-Key', key)
    .send({ answer, ...words });

async function proposed(pileId: string, answer: object = amended()): Promise<Correction> {
  const { body } = await propose(pileId, answer).expect(201);
  await workJobs(harness.context);
  return read((body as Correction).id);
}

const read = async (id: string) => (await lead.get(`/api/corrections/${id}`).expect(200)).body as Correction;
const changesOf = async (id: string, page = 1) =>
  (await lead.get(`/api/corrections/${id}/changes?page=${String(page)}`).expect(200)).body as {
    items: CorrectionChange[];
    total: number;
  };

const confirm = (correction: Correction) =>
  lead
    .post(`/api/corrections/${correction.id}/confirmation`)
    .set('If-Match', `"${String(correction.version)}"`)
    .send({});

async function make(correction: Correction): Promise<Correction> {
  await confirm(correction).expect(200);
  await workJobs(harness.context);
  return read(correction.id);
}

const answerOf = (id: string) => harness.db.select().from(answers).where(eq(answers.id, id)).get();
const markOf = (id: string) => {
  const standing = answerOf(id)?.standingMarkId;
  return standing ? harness.db.select().from(marks).where(eq(marks.id, standing)).get() : undefined;
};

describe('a correction', () => {
  it('shows before anything changes whose verdict and marks would', async () => {
    const built = buildAnswered();
    const before = harness.db.select().from(answers).all();
    const correction = await proposed(built.pileId);
    expect(correction).toMatchObject({
      state: 'proposed',
      place: 'Set 4, 1 (a)',
      job: { kind: 'correction preview', state: 'done', done: 5, total: 5 },
      counts: { changed: 4, replaced: 0, given: 2, returned: 1, look: 1, alone: 0 },
      setsElsewhere: 0,
    });
    const { items, total } = await changesOf(correction.id);
    expect(total).toBe(4);
    expect(items.find(({ answerId }) => answerId === built.handedIn[0]?.answerId)).toMatchObject({
      code: 'K000',
      before: { verdict: 'right', total: 3 },
      after: { verdict: 'wrong', relation: 'half the key', total: null },
      deed: 'returned to the pile',
    });
    expect(items.find(({ answerId }) => answerId === built.handedIn[1]?.answerId)).toMatchObject({
      before: { verdict: 'wrong', relation: 'twice the key', total: null },
      after: { verdict: 'right', total: 1 },
      deed: 'mark given',
    });
    expect(harness.db.select().from(answers).all()).toEqual(before);
    expect(harness.db.select().from(setProblems).get()?.correctionId).toBeNull();
  });

  it('is made by a job, append-only, and leaves marks that a person gave', async () => {
    const built = buildAnswered();
    const revisionBefore = harness.db.select().from(revisions).get();
    const marksBefore = harness.db.select().from(marks).all();
    const checksBefore = harness.db.select().from(checks).all();
    const correction = await make(await proposed(built.pileId));
    expect(correction).toMatchObject({ state: 'made', job: { kind: 'correction', state: 'done' } });

    const [right, twice, , person, none] = built.handedIn.map(({ answerId }) => answerId);
    expect(answerOf(right!)).toMatchObject({ state: 'waits', standingMarkId: null });
    expect(markOf(twice!)).toMatchObject({ markerId: null, total: 1, idempotencyKey: `correction ${correction.id}` });
    expect(markOf(twice!)?.reason).toContain(words.reason);
    expect(answerOf(person!)).toMatchObject({ state: 'marked', standingMarkId: built.markId });
    expect(answerOf(person!)?.anotherLook).toContain('correction');
    expect(answerOf(none!)).toMatchObject({ state: 'waits' });

    // Whatever was there is there still; statement and givens of the revision are what they were.
    expect(harness.db.select().from(marks).all()).toEqual(expect.arrayContaining(marksBefore));
    expect(harness.db.select().from(checks).all()).toEqual(expect.arrayContaining(checksBefore));
    expect(harness.db.select().from(revisions).get()).toEqual(revisionBefore);
    expect(harness.db.select().from(setProblems).get()?.correctionId).toBe(correction.id);

    const entries = harness.db.select().from(record).all();
    expect(entries.map(({ action }) => action)).toEqual(
      expect.arrayContaining([
        'correction proposed',
        'correction confirmed',
        'key corrected',
        'mark changed',
        'mark to be looked at again',
      ]),
    );
    const corrected = entries.find(({ action }) => action === 'key corrected');
    expect(corrected).toMatchObject({ courseId, actorId: leadPerson.id, reason: words.reason });
    expect(corrected?.before).toMatchObject({ key: 'nbar / 2' });
    expect(corrected?.after).toMatchObject({ key: 'nbar' });
    // Benches fetch their pile again; students hear nothing.
    expect(told.filter(({ event }) => event === 'pileChanged')).toHaveLength(1);
    expect(told.some(({ rooms }) => rooms.includes(studentsRoom(courseId)))).toBe(false);
  });

  it('amends slips: a pattern becomes one, with feedback', async () => {
    const built = buildAnswered();
    const { body } = await lead
      .get(`/api/piles/${built.pileId}/correctable-part`)
      .query({ pattern: 'relation twice the key' })
      .expect(200);
    const part = body as CorrectablePart;
    expect(part.slip).toEqual({ name: 'twice the key', expression: '2*(nbar / 2)', answers: 3 });
    const slips = [{ name: 'not halved', expression: part.slip?.expression, feedback: 'Half is lost.', fraction: 0.5 }];
    const correction = await make(await proposed(built.pileId, { ...part.answer, slips }));
    expect(correction.counts).toMatchObject({ changed: 3, look: 1, alone: 2 });
    const check = harness.db
      .select()
      .from(checks)
      .where(eq(checks.id, answerOf(built.handedIn[1]!.answerId)?.checkId ?? ''))
      .get();
    expect(check?.result).toMatchObject({ verdict: 'slip', slip: 0, fraction: 0.5 });
    // The bench sees the corrected part at once.
    const pile = await lead.get(`/api/piles/${built.pileId}`).expect(200);
    expect(JSON.stringify(pile.body)).toContain('not halved');
  });

  it('says why a pattern is no slip', async () => {
    const built = buildAnswered();
    for (const [pattern, sentence] of [
      ['no relation', 'No expression says'],
      ['relation gone', 'not on the pile any more'],
    ] as const) {
      const { body } = await lead.get(`/api/piles/${built.pileId}/correctable-part`).query({ pattern }).expect(200);
      expect((body as CorrectablePart).slip).toBeNull();
      expect((body as CorrectablePart).noSlip).toContain(sentence);
    }
  });

  it('after release replaces what a check gave, and tells the students', async () => {
    const built = buildAnswered('released');
    const [right, twice, , person] = built.handedIn;
    const release = async (who: typeof right) =>
      (await (await harness.agent(who!.student)).get(`/api/sets/${built.setId}/feedback`).expect(200)).body as Feedback;
    const correctionsOf = async (who: typeof right) => (await release(who)).problems[0]?.parts[0]?.corrections;
    expect(await correctionsOf(right)).toEqual([]);
    harness.clock.advance(1000);
    await make(await proposed(built.pileId));
    // Wrong by the corrected key: replaced, and somebody looks, since a pile is not marked any more.
    expect(markOf(right!.answerId)).toMatchObject({ markerId: null, total: 0 });
    expect(answerOf(right!.answerId)?.anotherLook).not.toBeNull();
    expect(await correctionsOf(right)).toEqual([
      {
        at: harness.clock.now(),
        sentence:
          'The key of this part was corrected after you handed in. We had halved the number by mistake. Your marks for it went from 3 to 0.',
      },
    ]);
    expect((await correctionsOf(person))?.[0]?.sentence).toContain('asked to look again');
    const theirs = (await release(twice)).problems[0]?.parts[0];
    expect(theirs).toMatchObject({ verdict: 'right', key: { value: 4 } });
    expect(theirs?.corrections[0]?.sentence).toContain('did not change');
    const text = JSON.stringify(theirs);
    for (const secret of [words.reason, leadPerson.name, leadPerson.id]) expect(text.includes(secret)).toBe(false);
  });

  it('lets a lead say that a mark stands, which a release waits for', async () => {
    const built = buildAnswered();
    const correction = await make(await proposed(built.pileId));
    const waits = async () => (await lead.get(`/api/sets/${built.setId}/release`).expect(200)).text;
    expect(await waits()).toContain('1 mark that a person gave waits for another look');
    const seen = await lead.get(`/api/answers/${built.byPerson}/bench`).expect(200);
    expect((seen.body as { anotherLook: string }).anotherLook).toContain(words.reason);
    const path = `/api/corrections/${correction.id}/answers/${built.byPerson}/mark-stands`;
    await lead.post(path).send({}).expect(204);
    expect(answerOf(built.byPerson)).toMatchObject({ anotherLook: null, standingMarkId: built.markId });
    await lead.post(path).send({}).expect(404);
    expect(await waits()).not.toContain('another look');
    expect(
      harness.db
        .select()
        .from(record)
        .all()
        .map(({ action }) => action),
    ).toContain('mark stands');
  });

  it('is undone for an answer by marking it again: the flag goes with the new mark', async () => {
    const built = buildAnswered();
    await make(await proposed(built.pileId));
    const benchId = newId();
    await lead.post(`/api/piles/${built.pileId}/holds`).send({ benchId, answerId: built.byPerson }).expect(200);
    const criteria = built.part.criteria.map(({ id }) => ({ criterionId: id, awarded: true }));
    await lead
      .post(`/api/answers/${built.byPerson}/marks`)
      .set('If-Match', `"${String(answerOf(built.byPerson)?.version)}"`)
      .set('Idempotency-Key', newId())
      .send({ benchId, criteria, reason: 'Right by the corrected key.' })
      .expect(201);
    expect(answerOf(built.byPerson)).toMatchObject({ anotherLook: null, state: 'marked' });
    expect(markOf(built.byPerson)).toMatchObject({ total: 3, replacesId: built.markId });
  });

  it('does not take an answer out of the hand of who marks it', async () => {
    const built = buildAnswered();
    const [, twice] = built.handedIn;
    const marker = await harness.agent(built.marker);
    const benchId = newId();
    await marker.post(`/api/piles/${built.pileId}/holds`).send({ benchId, answerId: twice!.answerId }).expect(200);
    await make(await proposed(built.pileId));
    // The check is a new one, so the mark that was begun is refused with the answer as it is now, and nothing is lost.
    expect(answerOf(twice!.answerId)).toMatchObject({ state: 'waits' });
    const criteria = built.part.criteria.map(({ id }) => ({ criterionId: id, awarded: true }));
    const send = (version: number) =>
      marker
        .post(`/api/answers/${twice!.answerId}/marks`)
        .set('If-Match', `"${String(version)}"`)
        .set('Idempotency-Key', newId())
        .send({ benchId, criteria });
    await send(1).expect(412);
    await send(answerOf(twice!.answerId)?.version ?? 0).expect(201);
  });

  it('judges what is handed in while it is made by the corrected key', async () => {
    const built = buildAnswered('open');
    const correction = await proposed(built.pileId);
    const { submissionId } = harness.db.select().from(checks).get()!;
    const before = harness.db.select().from(checks).all().length;
    // Judged under the key before, stored after: what was computed meanwhile must not be kept.
    const late = checkSubmission(harness.context, submissionId);
    const made = make(correction);
    await Promise.all([late, made]);
    const rows = harness.db.select().from(checks).all().slice(before);
    expect(rows.every(({ result }) => result.key?.value === 4)).toBe(true);
  });

  it('follows through to later parts, whose answers change with it', async () => {
    const first = buildContent().parts[0]!;
    const second = {
      ...buildContent().parts[0]!,
      id: newId(),
      answer: { form: 'number' as const, key: '3*part_a', tolerance: { relative: 0.01 } },
    };
    const built = buildPile(harness, { courseId, values: [4], content: buildContent({ parts: [first, second] }) });
    const correction = await proposed(built.pileId);
    expect(correction.counts?.changed).toBe(1);
  });
});

describe('a correction is refused', () => {
  it.each([
    [{ form: 'complex', key: 'nbar', tolerance: { relative: 0.01 } }, 'form of an answer'],
    [amended({ unit: 'MHz' }), 'never what students were asked for'],
    [{ form: 'number', key: 'nbar / 2', tolerance: { relative: 0.01 } }, 'Nothing is changed'],
    [amended({ key: 'nbar*' }), ''],
    [amended({ key: 'nobody' }), ''],
    [amended({ tolerance: {} }), 'tolerance'],
    [amended({ slips: [{ expression: '', feedback: '', fraction: 2 }] }), ''],
  ])('where it changes more than it may, nothing, or has no value (%j)', async (answer, sentence) => {
    const built = buildAnswered();
    const { body } = await propose(built.pileId, answer).expect(400);
    expect(body).toMatchObject({ type: '/errors/invalid-input' });
    expect(JSON.stringify(body)).toContain(sentence);
    expect(harness.db.select().from(corrections).all()).toEqual([]);
  });

  it('before its changes are known, twice, after another, and by an old version', async () => {
    const built = buildAnswered();
    const key = newId();
    const first = (await propose(built.pileId, amended(), key).expect(201)).body as Correction;
    const again = (await propose(built.pileId, amended(), key).expect(201)).body as Correction;
    expect(again.id).toBe(first.id);
    harness.db.update(corrections).set({ previewJobId: null }).where(eq(corrections.id, first.id)).run();
    await confirm(first).expect(409);
    await workJobs(harness.context);

    const one = await proposed(built.pileId);
    const other = await proposed(built.pileId, amended({ key: 'nbar + 1' }));
    await confirm({ ...one, version: 9 }).expect(412);
    const made = await make(one);
    await confirm(made).expect(409);
    const { body } = await confirm(other).expect(409);
    expect(body).toMatchObject({ detail: expect.stringContaining('Another correction') as string });
    const withdrawn = await lead
      .post(`/api/corrections/${other.id}/withdrawal`)
      .set('If-Match', `"${String(other.version)}"`)
      .send({})
      .expect(200);
    expect(withdrawn.body).toMatchObject({ state: 'withdrawn' });
    await confirm({ ...other, version: other.version + 1 }).expect(409);
  });

  it('to all but leads of the course', async () => {
    const built = buildAnswered();
    const correction = await proposed(built.pileId);
    for (const [person, status] of [
      [built.marker, 403],
      [built.handedIn[0]!.student, 403],
      [harness.makeMember(harness.makeCourse().id, 'lead'), 403],
      [null, 401],
    ] as const) {
      const client = await harness.agent(person);
      const own = `/api/corrections/${correction.id}`;
      await client.get(`/api/piles/${built.pileId}/correctable-part`).expect(status);
      await client.get(own).expect(status);
      await client.get(`${own}/changes`).expect(status);
      await client
        .post(`/api/piles/${built.pileId}/corrections`)
        .set('Idempotency-Key', newId())
        .send({ answer: amended(), ...words })
        .expect(status);
      for (const act of ['confirmation', 'withdrawal'])
        await client
          .post(`${own}/${act}`)
          .set('If-Match', `"${String(correction.version)}"`)
          .send({})
          .expect(status);
      await client.post(`${own}/answers/${built.byPerson}/mark-stands`).send({}).expect(status);
      expect((await client.get(own)).text).not.toContain('halved');
    }
    expect(harness.db.select().from(corrections).get()?.state).toBe('proposed');
  });

  it('by the job where it cannot be finished: nothing is half made', async () => {
    const built = buildAnswered();
    const correction = await proposed(built.pileId);
    // A mark that cannot be written any more, in the middle of the transaction.
    const [, twice] = built.handedIn;
    harness.db
      .insert(marks)
      .values({
        id: newId(),
        answerId: twice!.answerId,
        kind: 'first',
        criteria: [],
        total: 0,
        at: 0,
        idempotencyKey: `correction ${correction.id}`,
      })
      .run();
    await confirm(correction).expect(200);
    await workJobs(harness.context);
    expect(await read(correction.id)).toMatchObject({ state: 'confirmed', job: { state: 'failed' } });
    expect(answerOf(built.handedIn[0]!.answerId)).toMatchObject({ state: 'marked' });
    expect(harness.db.select().from(setProblems).get()?.correctionId).toBeNull();
    expect(harness.db.select().from(correctionChanges).all()).toHaveLength(4);
  });
});

it('pages its changes by fifty', async () => {
  const built = buildPile(harness, { courseId, values: Array.from({ length: 53 }, () => 4) });
  const correction = await proposed(built.pileId);
  expect((await changesOf(correction.id)).items).toHaveLength(50);
  const second = await changesOf(correction.id, 2);
  expect(second.items).toHaveLength(3);
  expect(second.total).toBe(53);
});

it('leaves a set of a course that the lead does not lead as it is', async () => {
  const built = buildAnswered();
  const elsewhere = harness.makeCourse();
  const other = {
    id: newId(),
    courseId: elsewhere.id,
    number: 1,
    title: 'Theirs',
    stage: 'marking' as const,
    seed: 's',
    createdAt: 1,
  };
  harness.db.insert(sets).values(other).run();
  const { problemId, revisionId } = harness.db.select().from(setProblems).get()!;
  const row = { id: newId(), setId: other.id, position: 1, problemId, revisionId };
  harness.db.insert(setProblems).values(row).run();
  const correction = await make(await proposed(built.pileId));
  expect(correction.setsElsewhere).toBe(1);
  expect(harness.db.select().from(setProblems).where(eq(setProblems.id, row.id)).get()?.correctionId).toBeNull();
});
