import { eq } from 'drizzle-orm';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { answers, marks, piles, record, scripts, sets, setStages, submissions, variants } from '@drizzle/schema';
import type { SetDetail, StagePreview } from '@shared/sets';
import { newId } from '../http/new-id';
import { buildCourse, buildOpenSet, buildPart, buildContent, buildProblem, hour } from '../scripts/testing/build-set';
import { createHarness, type Harness } from '../testing/harness';
import { checkClosedSet, closeSet } from './close-set';
import { theClock } from './enter-stage';
import { runClockStages } from './run-clock-stages';

let harness: Harness;
beforeEach(() => {
  harness = createHarness();
});
afterEach(() => harness.close());

const bodyOf = <T>(response: { body: unknown }) => response.body as T;

describe('a set', () => {
  it('begins as a draft with the next number, and keeps the order of its problems', async () => {
    const { course, lead } = buildCourse(harness);
    const one = buildProblem(harness, lead.id);
    const two = buildProblem(harness, harness.makePerson().id);
    const client = await harness.agent(lead);
    const made = await client
      .post(`/api/courses/${course.id}/sets`)
      .send({ title: 'Counting', problems: [two, one].map(({ problemId, revisionId }) => ({ problemId, revisionId })) })
      .expect(201);
    const set = bodyOf<SetDetail>(made);
    expect(set).toMatchObject({ number: 1, stage: 'draft', version: 1, moves: ['review'] });
    expect(set.problems.map((each) => each.problemId)).toEqual([two.problemId, one.problemId]);

    const changed = await client
      .put(`/api/sets/${set.id}`)
      .set('If-Match', '"1"')
      .send({ title: 'Counting quanta', problems: [{ problemId: one.problemId, revisionId: one.revisionId }] })
      .expect(200);
    expect(bodyOf<SetDetail>(changed).problems.map((each) => [each.position, each.problemId])).toEqual([
      [1, one.problemId],
    ]);
    expect(changed.headers['etag']).toBe('"2"');
    expect(harness.db.select().from(record).where(eq(record.thingId, set.id)).all()).toHaveLength(2);
  });

  it('refuses what cannot be, field by field, and changes nothing', async () => {
    const { course, lead } = buildCourse(harness);
    const foreign = buildProblem(harness, harness.makePerson().id, buildContent(), 'draft');
    const client = await harness.agent(lead);
    const now = harness.clock.now();
    const post = (body: object) => client.post(`/api/courses/${course.id}/sets`).send(body).expect(400);
    expect((await post({ title: ' ' })).body).toMatchObject({
      type: '/errors/invalid-input',
      fields: [{ path: ['title'] }],
    });
    expect((await post({ title: 'x', opensAt: now + hour, closesAt: now })).body).toMatchObject({
      fields: [{ path: ['closesAt'], message: 'The set must close after it opens.' }],
    });
    const { problemId, revisionId } = foreign;
    expect((await post({ title: 'x', problems: [{ problemId, revisionId }] })).body).toMatchObject({
      fields: [{ path: ['problems', 0], message: 'This problem is not ready yet, and it is not yours.' }],
    });
    expect((await post({ title: 'x', problems: [{ problemId, revisionId: newId() }] })).body).toMatchObject({
      fields: [{ path: ['problems', 0] }],
    });
    expect(harness.db.select().from(sets).all()).toHaveLength(0);
  });

  it('is for leads to change, for markers to read, for students neither', async () => {
    const { course, lead, student } = buildCourse(harness);
    const marker = harness.makeMember(course.id, 'marker');
    const set = bodyOf<SetDetail>(
      await (await harness.agent(lead)).post(`/api/courses/${course.id}/sets`).send({ title: 'Counting' }),
    );
    await (await harness.agent(marker)).get(`/api/sets/${set.id}`).expect(200);
    await (
      await harness.agent(marker)
    )
      .put(`/api/sets/${set.id}`)
      .set('If-Match', '1')
      .send({ title: 'x' })
      .expect(403);
    await (await harness.agent(marker)).get(`/api/sets/${set.id}/progress`).expect(403);
    await (await harness.agent(student)).get(`/api/sets/${set.id}`).expect(403);
    await (await harness.agent(student)).get(`/api/courses/${course.id}/sets`).expect(403);
    await (
      await harness.agent(harness.makeMember(harness.makeCourse().id, 'lead'))
    )
      .get(`/api/sets/${set.id}`)
      .expect(403);
    await (await harness.agent(null)).get(`/api/sets/${set.id}`).expect(401);
    await (await harness.agent(lead)).get(`/api/sets/${newId()}`).expect(404);
    expect(harness.db.select().from(sets).get()?.title).toBe('Counting');
  });

  it('shows a stale write what is there now, and asks for a version', async () => {
    const { course, lead } = buildCourse(harness);
    const client = await harness.agent(lead);
    const set = bodyOf<SetDetail>(await client.post(`/api/courses/${course.id}/sets`).send({ title: 'Counting' }));
    await client.put(`/api/sets/${set.id}`).set('If-Match', '1').send({ title: 'One' }).expect(200);
    const late = await client.put(`/api/sets/${set.id}`).set('If-Match', '1').send({ title: 'Two' }).expect(412);
    expect(late.body).toMatchObject({ type: '/errors/stale', current: { title: 'One', version: 2 } });
    await client.put(`/api/sets/${set.id}`).send({ title: 'Two' }).expect(428);
    expect(harness.db.select().from(sets).get()?.title).toBe('One');
  });

  it('offers problems that are ready, and one’s own, by their latest revision', async () => {
    const { course, lead } = buildCourse(harness);
    const other = harness.makePerson();
    const titled = (title: string) => buildContent({ title });
    buildProblem(harness, other.id, titled('Theirs, ready'));
    buildProblem(harness, other.id, titled('Theirs, draft'), 'draft');
    buildProblem(harness, lead.id, titled('Mine, draft'), 'draft');
    const client = await harness.agent(lead);
    const all = await client.get(`/api/courses/${course.id}/usable-problems`).expect(200);
    expect(bodyOf<{ items: { title: string }[] }>(all).items.map((each) => each.title)).toEqual([
      'Mine, draft',
      'Theirs, ready',
    ]);
    const found = await client.get(`/api/courses/${course.id}/usable-problems?search=theirs`).expect(200);
    expect(found.body).toMatchObject({ total: 1 });
  });
});

describe('the stages of a set', () => {
  it('says what is in the way before it says what will happen', async () => {
    const { course, lead } = buildCourse(harness);
    const client = await harness.agent(lead);
    const draft = buildProblem(harness, lead.id, buildContent({ title: 'Unready' }), 'draft');
    const set = bodyOf<SetDetail>(
      await client.post(`/api/courses/${course.id}/sets`).send({ title: 'Counting', problems: [draft] }),
    );
    await client.post(`/api/sets/${set.id}/stage`).set('If-Match', '1').send({ stage: 'review' }).expect(200);
    const preview = bodyOf<StagePreview>(await client.get(`/api/sets/${set.id}/stages/ready/preview`).expect(200));
    expect(preview.allowed).toBe(false);
    expect(preview.obstacles.join(' ')).toMatch(/“Unready” is draft.*no closing time/);
    const refused = await client
      .post(`/api/sets/${set.id}/stage`)
      .set('If-Match', '2')
      .send({ stage: 'ready' })
      .expect(409);
    expect(refused.body).toMatchObject({ type: '/errors/conflict' });
    await client.post(`/api/sets/${set.id}/stage`).set('If-Match', '2').send({ stage: 'released' }).expect(409);
    expect(harness.db.select().from(sets).get()?.stage).toBe('review');
  });

  it('freezes problems at opening, makes the piles and draws a variant for every student', async () => {
    const { setId, lead, problem, student } = await buildOpenSet(harness);
    const { db } = harness;
    expect(db.select().from(piles).where(eq(piles.setId, setId)).all()).toHaveLength(4);
    const drawn = db.select().from(variants).all();
    expect(drawn).toHaveLength(2);
    const own = drawn.find((row) => row.membershipId === student.membershipId)?.givens;
    expect(own?.['hidden']?.value).toBe((own?.['nbar']?.value ?? 0) * 7);
    expect(
      db
        .select()
        .from(setStages)
        .where(eq(setStages.setId, setId))
        .all()
        .map((row) => row.stage),
    ).toEqual(['draft', 'review', 'ready', 'open']);

    const client = await harness.agent(lead);
    const set = bodyOf<SetDetail>(await client.get(`/api/sets/${setId}`));
    const settings = { title: set.title, opensAt: set.opensAt, closesAt: set.closesAt };
    const put = (body: object) => client.put(`/api/sets/${setId}`).set('If-Match', String(set.version)).send(body);
    await put({ ...settings, problems: [] }).expect(409);
    expect((await put({ ...settings, individualVariants: false }).expect(400)).body).toMatchObject({
      fields: [{ path: ['individualVariants'] }],
    });
    expect((await put({ ...settings, closesAt: harness.clock.now() - 1 }).expect(400)).body).toMatchObject({
      fields: [{ path: ['closesAt'] }],
    });
    const same = { problemId: problem.problemId, revisionId: problem.revisionId };
    await put({ ...settings, closesAt: harness.clock.now() + 72 * hour, problems: [same] }).expect(200);
  });

  it('draws one variant for all where they share it', async () => {
    await buildOpenSet(harness, { individualVariants: false });
    expect(
      harness.db
        .select()
        .from(variants)
        .all()
        .map((row) => row.membershipId),
    ).toEqual([null]);
  });

  it('opens and closes by the clock, and does neither twice', async () => {
    const { course, lead } = buildCourse(harness);
    const client = await harness.agent(lead);
    const problem = buildProblem(harness, lead.id);
    const now = harness.clock.now();
    const set = bodyOf<SetDetail>(
      await client
        .post(`/api/courses/${course.id}/sets`)
        .send({ title: 'Counting', opensAt: now + hour, closesAt: now + 2 * hour, problems: [problem] }),
    );
    await client.post(`/api/sets/${set.id}/stage`).set('If-Match', '1').send({ stage: 'review' });
    await client.post(`/api/sets/${set.id}/stage`).set('If-Match', '2').send({ stage: 'ready' }).expect(200);
    expect(await runClockStages(harness.context)).toEqual({ opened: 0, closed: 0, checked: 0 });
    harness.clock.advance(hour);
    expect(await runClockStages(harness.context)).toEqual({ opened: 1, closed: 0, checked: 0 });
    expect(await runClockStages(harness.context)).toEqual({ opened: 0, closed: 0, checked: 0 });
    harness.clock.advance(hour + 5_000);
    expect(await runClockStages(harness.context)).toEqual({ opened: 0, closed: 1, checked: 1 });
    expect(await runClockStages(harness.context)).toEqual({ opened: 0, closed: 0, checked: 0 });
    const entered = harness.db.select().from(setStages).where(eq(setStages.setId, set.id)).all();
    expect(entered.filter((row) => row.byId === null).map((row) => row.stage)).toEqual(['open', 'closed']);
    // Handed in at the closing time, although the server noticed five seconds later.
    expect(
      harness.db
        .select()
        .from(submissions)
        .all()
        .map((row) => [row.by, row.at]),
    ).toEqual([
      ['closing', now + 2 * hour],
      ['closing', now + 2 * hour],
    ]);
  });

  it('tells the course of a stage, but students nothing of drafts', async () => {
    const told: unknown[] = [];
    harness.context.live.observe(({ rooms, event, body }) => {
      if (event === 'stageChanged')
        told.push([rooms.map((room) => room.split(':').at(-1)), (body as { stage: string }).stage]);
    });
    await buildOpenSet(harness);
    expect(told).toEqual([
      [['team'], 'review'],
      [['team', 'students'], 'ready'],
      [['team', 'students'], 'open'],
    ]);
  });

  it('closes by hand: everybody’s work is handed in, also of those who never came', async () => {
    const { setId, lead, student } = await buildOpenSet(harness);
    const sheet = await (await harness.agent(student)).get(`/api/sets/${setId}/sheet`).expect(200);
    const [first] = (sheet.body as { problems: { parts: { answerId: string }[] }[] }).problems[0]?.parts ?? [];
    await (
      await harness.agent(student)
    )
      .put(`/api/answers/${first?.answerId ?? ''}/text`)
      .set('If-Match', '0')
      .set('Idempotency-Key', newId())
      .send({ text: '12 kelvin' })
      .expect(200);
    const client = await harness.agent(lead);
    const preview = bodyOf<StagePreview>(await client.get(`/api/sets/${setId}/stages/closed/preview`));
    expect(preview.effects.join(' ')).toContain('2 students have not handed in');
    const { version } = bodyOf<SetDetail>(await client.get(`/api/sets/${setId}`));
    await client
      .post(`/api/sets/${setId}/stage`)
      .set('If-Match', String(version))
      .send({ stage: 'closed' })
      .expect(200);
    await expect
      .poll(() =>
        harness.db
          .select()
          .from(answers)
          .all()
          .filter((row) => row.state === null),
      )
      .toEqual([]);

    expect(harness.db.select().from(scripts).all()).toHaveLength(2);
    expect(
      harness.db
        .select()
        .from(submissions)
        .all()
        .map((row) => row.by),
    ).toEqual(['closing', 'closing']);
    const states = harness.db
      .select()
      .from(answers)
      .all()
      .map((row) => row.state)
      .sort();
    // Seven empty answers stand as unanswered; the wrong one waits for a person.
    expect(states).toEqual([...Array<string>(7).fill('marked'), 'waits']);
    expect(
      harness.db
        .select()
        .from(marks)
        .all()
        .map((row) => [row.total, row.markerId]),
    ).toEqual(Array(7).fill([0, null]));
    const progress = await client.get(`/api/sets/${setId}/progress`).expect(200);
    expect(progress.body).toMatchObject({
      total: 2,
      counts: { students: 2, opened: 2, answered: 1, handedIn: 0 },
      items: [
        { name: 'Kit Moor', state: 'handed in at closing', answered: 0 },
        { name: 'Sol Reed', state: 'handed in at closing', answered: 1 },
      ],
    });
    await client
      .post(`/api/sets/${setId}/stage`)
      .set('If-Match', String(version + 1))
      .send({ stage: 'marking' })
      .expect(200);
  });

  it('takes up checks that were broken off after closing', async () => {
    const { setId } = await buildOpenSet(harness, {
      content: buildContent({ statement: '(a) Well?', parts: [buildPart()] }),
    });
    harness.clock.advance(49 * hour);
    // As after a crash: the set is closed and handed in, and no check was made.
    await closeSet(harness.context, setId, theClock);
    expect(
      harness.db
        .select()
        .from(answers)
        .all()
        .map((row) => row.state),
    ).toEqual([null, null]);
    const told: string[] = [];
    harness.context.live.observe(({ event }) => told.push(event));
    expect(await runClockStages(harness.context)).toEqual({ opened: 0, closed: 0, checked: 1 });
    expect(
      harness.db
        .select()
        .from(answers)
        .all()
        .map((row) => row.state),
    ).toEqual(['marked', 'marked']);
    expect(told).toContain('pileChanged');
    expect(await checkClosedSet(harness.context, setId)).toBe(0);
    expect(harness.db.select().from(marks).all()).toHaveLength(2);
  });
});
