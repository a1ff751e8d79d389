import { eq } from 'drizzle-orm';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { answers, holds, marks, record, sets } from '@drizzle/schema';
import type { Held, Pile } from '@shared/marking';
import { newId } from '../http/new-id';
import type { Emitted } from '../live/live';
import { createHarness, type Harness } from '../testing/harness';
import { sweepHolds } from './marking-routes';
import { buildCheck, buildPile } from './testing/build-pile';

type Agent = Awaited<ReturnType<Harness['agent']>>;

let harness: Harness;
let courseId: string;
let told: Emitted[];

beforeEach(() => {
  harness = createHarness();
  courseId = harness.makeCourse().id;
  told = [];
  harness.context.live.observe((emitted) => told.push(emitted));
});
afterEach(() => harness.close());

/** Two markers and a lead, each with a bench. */
async function team() {
  const people = {
    brandt: harness.makeMember(courseId, 'marker', { name: 'Iwo Brandt' }),
    okafor: harness.makeMember(courseId, 'marker', { name: 'Tamsin Okafor' }),
    lead: harness.makeMember(courseId, 'lead', { name: 'Signe Halloran' }),
  };
  return {
    people,
    brandt: { client: await harness.agent(people.brandt), benchId: newId() },
    okafor: { client: await harness.agent(people.okafor), benchId: newId() },
    lead: { client: await harness.agent(people.lead), benchId: newId() },
  };
}

interface Bench {
  readonly client: Agent;
  readonly benchId: string;
}

const take = (bench: Bench, pileId: string, wish: object = {}) =>
  bench.client.post(`/api/piles/${pileId}/holds`).send({ benchId: bench.benchId, ...wish });

const pileOf = async (bench: Bench, pileId: string) =>
  (await bench.client.get(`/api/piles/${pileId}`).expect(200)).body as Pile;

type Built = ReturnType<typeof buildPile>;

function sendMark(
  bench: Bench,
  built: Built,
  answerId: string,
  version: number,
  extra: { awarded?: readonly string[]; key?: string; body?: object } = {},
) {
  const awarded = new Set(extra.awarded ?? ['M1']);
  return bench.client
    .post(`/api/answers/${answerId}/marks`)
    .set('If-Match', `"${String(version)}"`)
    .set('Idempotency-Key', extra.key ?? newId())
    .send({
      benchId: bench.benchId,
      criteria: built.part.criteria.map(({ id, name }) => ({ criterionId: id, awarded: awarded.has(name) })),
      ...extra.body,
    });
}

const rowOf = (answerId: string) => harness.db.select().from(answers).where(eq(answers.id, answerId)).get();
const marksOf = (answerId: string) => harness.db.select().from(marks).where(eq(marks.answerId, answerId)).all();

describe('piles', () => {
  it('stand in pattern order, with codes and no name or membership of a student', async () => {
    const { brandt } = await team();
    const built = buildPile(harness, { courseId, values: [7, 4, 2, 4, buildCheck(9, { verdict: 'unreadable' })] });
    const pile = await pileOf(brandt, built.pileId);
    expect(pile.patterns).toEqual([
      { key: 'right', name: 'right', total: 1 },
      { key: 'relation twice the key', name: 'twice the key', total: 2 },
      { key: 'no relation', name: 'no relation', total: 1 },
      { key: 'unreadable', name: 'unreadable', total: 1 },
    ]);
    expect(pile.answers.map((answer) => answer.code)).toEqual(['K002', 'K001', 'K003', 'K000', 'K004']);
    const text = JSON.stringify(pile);
    for (const { student, scriptId } of built.handedIn)
      for (const secret of [student.id, student.membershipId, student.name, student.email, scriptId])
        expect(text).not.toContain(secret);
  });

  it('show a marker the totals of their own marks, a lead all', async () => {
    const { brandt, okafor, lead } = await team();
    const built = buildPile(harness, { courseId, values: [4, 4, 2] });
    const held = (await take(brandt, built.pileId)).body as Held;
    await sendMark(brandt, built, held.inHand ?? '', 1, { awarded: ['M1', 'B1'] }).expect(201);
    const totalFor = async (bench: Bench) =>
      (await pileOf(bench, built.pileId)).answers.find((answer) => answer.id === held.inHand)?.total;
    expect(await totalFor(brandt)).toBe(2);
    expect(await totalFor(lead)).toBe(2);
    expect(await totalFor(okafor)).toBeNull();
    const seen = (await okafor.client.get(`/api/answers/${held.inHand ?? ''}/bench`).expect(200)).body as object;
    expect(seen).toMatchObject({ standing: null, history: [], state: 'marked' });
  });

  it('are listed for the team, and for nobody else', async () => {
    const { brandt } = await team();
    const built = buildPile(harness, { courseId, values: [4, 2] });
    const list = await brandt.client.get(`/api/courses/${courseId}/piles`).expect(200);
    expect(list.body).toMatchObject({
      total: 1,
      items: [{ number: 4, piles: [{ id: built.pileId, total: 2, waiting: 1, marked: 1, setAside: 0, onIt: [] }] }],
    });
    const student = await harness.agent(built.handedIn[0]?.student ?? null);
    for (const path of [
      `/courses/${courseId}/piles`,
      `/piles/${built.pileId}`,
      `/answers/${built.handedIn[0]?.answerId ?? ''}/bench`,
    ])
      await student.get(`/api${path}`).expect(403);
    const stranger = await harness.agent(harness.makeMember(harness.makeCourse().id, 'lead'));
    await stranger.get(`/api/piles/${built.pileId}`).expect(403);
    await (await harness.agent(null)).get(`/api/piles/${built.pileId}`).expect(401);
    await brandt.client.get(`/api/piles/${newId()}`).expect(404);
  });
});

describe('holds', () => {
  it('give one answer in hand and two kept ready, and others to others', async () => {
    const { brandt, okafor } = await team();
    const { pileId } = buildPile(harness, { courseId, values: [4, 4, 4, 4, 4] });
    const first = (await take(brandt, pileId).expect(200)).body as Held;
    const second = (await take(okafor, pileId).expect(200)).body as Held;
    expect(first.reserved).toHaveLength(2);
    const all = [first.inHand, ...first.reserved, second.inHand, ...second.reserved];
    expect(new Set(all).size).toBe(5);
    await take(okafor, pileId, { answerId: first.inHand }).expect(409);
    await take(okafor, pileId, { answerId: first.reserved[0] }).expect(409);
    expect(told.map((each) => each.event)).toEqual([
      'holdsChanged',
      'presenceChanged',
      'holdsChanged',
      'presenceChanged',
    ]);
  });

  it('begin in a pattern where no colleague is', async () => {
    const { brandt, okafor } = await team();
    const { pileId } = buildPile(harness, { courseId, values: [4, 4, 4, 4, 4, 7, 7] });
    await take(brandt, pileId);
    const held = (await take(okafor, pileId)).body as Held;
    const pile = await pileOf(okafor, pileId);
    expect(pile.answers.find((answer) => answer.id === held.inHand)?.pattern).toBe('no relation');
  });

  it('end after a minute unless renewed, and are told', async () => {
    const { brandt, okafor } = await team();
    const { pileId } = buildPile(harness, { courseId, values: [4] });
    const held = (await take(brandt, pileId)).body as Held;
    harness.clock.advance(50_000);
    await brandt.client.post(`/api/piles/${pileId}/holds/renewal`).send({ benchId: brandt.benchId }).expect(200);
    harness.clock.advance(50_000);
    await take(okafor, pileId, { answerId: held.inHand }).expect(409);
    harness.clock.advance(11_000);
    told.length = 0;
    sweepHolds(harness.context);
    expect(told[0]).toMatchObject({ event: 'holdsChanged', body: { letGo: [held.inHand] } });
    expect(harness.db.select().from(holds).all()).toEqual([]);
    expect(((await take(okafor, pileId)).body as Held).inHand).toBe(held.inHand);
  });

  it('are given up on leaving', async () => {
    const { brandt } = await team();
    const { pileId } = buildPile(harness, { courseId, values: [4, 4] });
    await take(brandt, pileId);
    await brandt.client.post(`/api/piles/${pileId}/holds/end`).send({ benchId: brandt.benchId }).expect(204);
    expect(harness.db.select().from(holds).all()).toEqual([]);
  });

  it('are not to be had by another who names the same bench', async () => {
    const { brandt, okafor } = await team();
    const { pileId } = buildPile(harness, { courseId, values: [4] });
    const held = (await take(brandt, pileId)).body as Held;
    const intruder = { client: okafor.client, benchId: brandt.benchId };
    expect(((await take(intruder, pileId)).body as Held).inHand).toBeNull();
    await take(intruder, pileId, { answerId: held.inHand }).expect(409);
  });

  it('are refused while the set is open, and after release', async () => {
    const { brandt } = await team();
    for (const stage of ['open', 'released'] as const) {
      const course = harness.makeCourse().id;
      const marker = harness.makeMember(course, 'marker');
      const { pileId } = buildPile(harness, { courseId: course, values: [4], stage });
      await take({ client: await harness.agent(marker), benchId: brandt.benchId }, pileId).expect(409);
    }
  });
});

describe('marks', () => {
  it('are totalled on the server, stand, count up the version and number their facts', async () => {
    const { brandt, people } = await team();
    const built = buildPile(harness, { courseId, values: [4, 4] });
    const held = (await take(brandt, built.pileId)).body as Held;
    told.length = 0;
    const done = await sendMark(brandt, built, held.inHand ?? '', 1, {
      awarded: ['M1', 'A1'],
      body: { remark: ' You take Var x = 1. ' },
    }).expect(201);
    expect(done.body).toMatchObject({
      version: 2,
      answer: { state: 'marked', total: 2, hold: null },
      mark: { total: 2, remark: 'You take Var x = 1.', markerId: people.brandt.membershipId },
      held: { inHand: held.reserved[0] },
    });
    expect(rowOf(held.inHand ?? '')).toMatchObject({
      state: 'marked',
      version: 2,
      standingMarkId: marksOf(held.inHand ?? '')[0]?.id,
    });
    expect(
      told.map((each) => [each.event, each.rooms, (each.body as { sequence?: number; total?: number | null }).total]),
    ).toEqual([
      ['answerMarked', [`pile:${built.pileId}`], null],
      ['answerMarked', [`pile:${built.pileId}:marks`], 2],
      ['holdsChanged', [`pile:${built.pileId}`, `pile:${built.pileId}:marks`], undefined],
      ['presenceChanged', [`pile:${built.pileId}`, `pile:${built.pileId}:marks`], undefined],
    ]);
    const numbers = told.slice(1, 3).map((each) => (each.body as { sequence: number }).sequence);
    expect(numbers).toEqual([held.sequence + 1, held.sequence + 2]);
  });

  it('begin the marking of a set that is closed', async () => {
    const { brandt } = await team();
    const built = buildPile(harness, { courseId, values: [4], stage: 'closed' });
    const held = (await take(brandt, built.pileId)).body as Held;
    await sendMark(brandt, built, held.inHand ?? '', 1).expect(201);
    expect(harness.db.select().from(sets).where(eq(sets.id, built.setId)).get()).toMatchObject({
      stage: 'marking',
      version: 2,
    });
    expect(told.at(-1)).toMatchObject({ event: 'stageChanged', body: { setId: built.setId, stage: 'marking' } });
  });

  it('are the same mark when the same key comes twice', async () => {
    const { brandt } = await team();
    const built = buildPile(harness, { courseId, values: [4, 4] });
    const held = (await take(brandt, built.pileId)).body as Held;
    const key = newId();
    const first = await sendMark(brandt, built, held.inHand ?? '', 1, { key }).expect(201);
    const again = await sendMark(brandt, built, held.inHand ?? '', 1, { key }).expect(201);
    expect((again.body as { mark: unknown }).mark).toEqual((first.body as { mark: unknown }).mark);
    expect(marksOf(held.inHand ?? '')).toHaveLength(1);
  });

  it('of a stale version are refused with the current state', async () => {
    const { brandt } = await team();
    const built = buildPile(harness, { courseId, values: [4, 4] });
    const held = (await take(brandt, built.pileId)).body as Held;
    const answerId = held.inHand ?? '';
    await sendMark(brandt, built, answerId, 1, { body: { takeNext: false } }).expect(201);
    await take(brandt, built.pileId, { answerId }).expect(200);
    const refused = await sendMark(brandt, built, answerId, 1, { awarded: ['A1'] }).expect(412);
    expect(refused.body).toMatchObject({ type: '/errors/stale', current: { id: answerId, version: 2, total: 1 } });
    expect(marksOf(answerId)).toHaveLength(1);
    await brandt.client
      .post(`/api/answers/${answerId}/marks`)
      .set('Idempotency-Key', newId())
      .send({ benchId: brandt.benchId, criteria: [] })
      .expect(428);
  });

  it('of an expired hold are refused, with who holds it now', async () => {
    const { brandt, okafor, people } = await team();
    const built = buildPile(harness, { courseId, values: [4] });
    const held = (await take(brandt, built.pileId)).body as Held;
    harness.clock.advance(61_000);
    const lapsed = await sendMark(brandt, built, held.inHand ?? '', 1).expect(412);
    expect(lapsed.body).toMatchObject({ type: '/errors/stale', current: { hold: null, version: 1 } });
    await take(okafor, built.pileId);
    const taken = await sendMark(brandt, built, held.inHand ?? '', 1).expect(412);
    expect(taken.body).toMatchObject({ current: { hold: { holder: people.okafor.membershipId, kind: 'in hand' } } });
    expect(marksOf(held.inHand ?? '')).toEqual([]);
    expect(rowOf(held.inHand ?? '')).toMatchObject({ state: 'waits', version: 1 });
  });

  it('name every criterion of the scheme once', async () => {
    const { brandt } = await team();
    const built = buildPile(harness, { courseId, values: [4] });
    const held = (await take(brandt, built.pileId)).body as Held;
    const [first] = built.part.criteria;
    const send = (criteria: readonly object[]) => sendMark(brandt, built, held.inHand ?? '', 1, { body: { criteria } });
    const missing = await send([{ criterionId: first?.id, awarded: true }]).expect(400);
    expect(missing.body).toMatchObject({ fields: [{ path: ['criteria'] }] });
    const unknown = await send([{ criterionId: newId(), awarded: true }]).expect(400);
    expect(unknown.body).toMatchObject({ fields: [{ path: ['criteria', 0, 'criterionId'] }] });
    expect(marksOf(held.inHand ?? '')).toEqual([]);
  });

  it('change in a new row that replaces the old one, and enter the record', async () => {
    const { brandt, okafor, lead } = await team();
    const built = buildPile(harness, { courseId, values: [4, 4] });
    const answerId = ((await take(brandt, built.pileId)).body as Held).inHand ?? '';
    await sendMark(brandt, built, answerId, 1).expect(201);
    await take(brandt, built.pileId, { answerId }).expect(200);
    await sendMark(brandt, built, answerId, 2, { awarded: ['M1', 'B1'], body: { takeNext: false } }).expect(201);
    await take(okafor, built.pileId, { answerId }).expect(403);

    await take(lead, built.pileId, { answerId }).expect(200);
    const silent = await sendMark(lead, built, answerId, 3, { awarded: [] }).expect(400);
    expect(silent.body).toMatchObject({ fields: [{ path: ['reason'] }] });
    await sendMark(lead, built, answerId, 3, { awarded: [], body: { reason: 'The loss is not named.' } }).expect(201);
    const rows = marksOf(answerId);
    expect(rows.map((row) => row.total)).toEqual([1, 2, 0]);
    expect(rows.map((row) => row.replacesId)).toEqual([null, rows[0]?.id, rows[1]?.id]);
    expect(rowOf(answerId)?.standingMarkId).toBe(rows[2]?.id);
    const entries = harness.db.select().from(record).where(eq(record.thingId, answerId)).all();
    expect(entries.map((entry) => [entry.action, entry.reason])).toEqual([
      ['mark changed', null],
      ['mark changed', 'The loss is not named.'],
    ]);
    const seen = (await lead.client.get(`/api/answers/${answerId}/bench`)).body as { history: unknown[] };
    expect(seen.history).toHaveLength(3);
  });

  it('can be taken back: the one before stands again, or the answer waits', async () => {
    const { brandt, okafor } = await team();
    const built = buildPile(harness, { courseId, values: [4] });
    const answerId = ((await take(brandt, built.pileId)).body as Held).inHand ?? '';
    const undo = (bench: Bench, version: number, markId: string | undefined) =>
      bench.client
        .post(`/api/answers/${answerId}/marks/undo`)
        .set('If-Match', `"${String(version)}"`)
        .send({ benchId: bench.benchId, markId });
    await sendMark(brandt, built, answerId, 1).expect(201);
    await undo(okafor, 2, marksOf(answerId)[0]?.id).expect(403);
    await undo(brandt, 2, marksOf(answerId)[0]?.id).expect(200);
    expect(rowOf(answerId)).toMatchObject({ state: 'waits', standingMarkId: null, version: 3 });

    for (const [version, awarded] of [
      [3, ['M1']],
      [4, ['M1', 'B1', 'A1']],
    ] as const) {
      await take(brandt, built.pileId, { answerId }).expect(200);
      await sendMark(brandt, built, answerId, version, { awarded }).expect(201);
    }
    await undo(brandt, 5, marksOf(answerId)[2]?.id).expect(200);
    const rows = marksOf(answerId);
    expect(rows.map((row) => row.total)).toEqual([1, 1, 3, 1]);
    expect(rowOf(answerId)).toMatchObject({ state: 'marked', standingMarkId: rows[3]?.id, version: 6 });
  });

  it('cannot be given twice by two who race for the last answers', async () => {
    const { brandt, okafor } = await team();
    const built = buildPile(harness, { courseId, values: [4, 4, 4, 7, 7, 9, 9] });
    const work = async (bench: Bench) => {
      let held = (await take(bench, built.pileId)).body as Held;
      while (held.inHand) {
        const version = rowOf(held.inHand)?.version ?? 0;
        const done = await sendMark(bench, built, held.inHand, version);
        expect(done.status).toBe(201);
        held = (done.body as { held: Held }).held;
        // What a colleague keeps ready is theirs; whoever has nothing looks again until nothing waits.
        while (!held.inHand && built.handedIn.some((each) => rowOf(each.answerId)?.state === 'waits')) {
          held = (await take(bench, built.pileId)).body as Held;
          await new Promise((resolve) => setTimeout(resolve, 1));
        }
      }
    };
    await Promise.all([work(brandt), work(okafor)]);
    for (const { answerId } of built.handedIn) {
      expect(rowOf(answerId)?.state).toBe('marked');
      expect(marksOf(answerId)).toHaveLength(1);
    }
    expect(harness.db.select().from(holds).all()).toEqual([]);
  });

  it('are refused by the database itself when one more first mark is forced in', async () => {
    const { brandt, people } = await team();
    const built = buildPile(harness, { courseId, values: [4] });
    const answerId = ((await take(brandt, built.pileId)).body as Held).inHand ?? '';
    await sendMark(brandt, built, answerId, 1).expect(201);
    const row = {
      id: newId(),
      answerId,
      kind: 'first' as const,
      markerId: people.okafor.membershipId,
      criteria: [],
      total: 0,
      at: 0,
      idempotencyKey: newId(),
    };
    expect(() => harness.db.insert(marks).values(row).run()).toThrow(/UNIQUE/);
  });
});

describe('setting aside', () => {
  it('takes an answer off the pile with its reason, and the lead returns it', async () => {
    const { brandt, okafor, lead } = await team();
    const built = buildPile(harness, { courseId, values: [4, 4] });
    const answerId = ((await take(brandt, built.pileId)).body as Held).inHand ?? '';
    const aside = (reason: string) =>
      brandt.client
        .post(`/api/answers/${answerId}/set-aside`)
        .set('If-Match', '"1"')
        .send({ benchId: brandt.benchId, reason });
    const silent = await aside(' ').expect(400);
    expect(silent.body).toMatchObject({ fields: [{ path: ['reason'], message: 'Give a reason.' }] });
    await aside('Page cut off.').expect(200);
    expect(rowOf(answerId)).toMatchObject({ state: 'set aside', setAsideReason: 'Page cut off.', version: 2 });
    await take(okafor, built.pileId, { answerId }).expect(403);

    const bring = (bench: Bench) =>
      bench.client.post(`/api/answers/${answerId}/return`).set('If-Match', '"2"').send({ benchId: bench.benchId });
    await bring(okafor).expect(403);
    await bring(lead).expect(200);
    expect(rowOf(answerId)).toMatchObject({ state: 'waits', setAsideReason: null, version: 3 });
    expect(told.some((each) => each.event === 'answerReturned')).toBe(true);
  });

  it('lets the lead mark straight away', async () => {
    const { brandt, lead } = await team();
    const built = buildPile(harness, { courseId, values: [4] });
    const answerId = ((await take(brandt, built.pileId)).body as Held).inHand ?? '';
    await brandt.client
      .post(`/api/answers/${answerId}/set-aside`)
      .set('If-Match', '"1"')
      .send({ benchId: brandt.benchId, reason: 'Unsure.' })
      .expect(200);
    await take(lead, built.pileId, { answerId }).expect(200);
    await sendMark(lead, built, answerId, 2).expect(201);
    expect(rowOf(answerId)).toMatchObject({ state: 'marked', setAsideReason: null });
  });
});
