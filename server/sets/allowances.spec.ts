import { eq } from 'drizzle-orm';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { allowances, answers, letters, marks, memberships, record, scripts, submissions } from '@drizzle/schema';
import type { Desk } from '@shared/desk';
import type { SetPiles } from '@shared/marking';
import type { Receipt, Sheet } from '@shared/scripts';
import { newId } from '../http/new-id';
import { buildOpenSet, hour } from '../scripts/testing/build-set';
import { createHarness, type Harness } from '../testing/harness';
import { runClockStages } from './run-clock-stages';

let harness: Harness;
beforeEach(() => {
  harness = createHarness();
});
afterEach(() => harness.close());

type Client = Awaited<ReturnType<Harness['agent']>>;

const sheetOf = async (client: Client, setId: string) =>
  (await client.get(`/api/sets/${setId}/sheet`).expect(200)).body as Sheet;

function firstPart(sheet: Sheet) {
  const part = sheet.problems[0]?.parts[0];
  if (!part) throw new Error('The sheet has no part.');
  return part;
}

const save = (client: Client, answerId: string, text: string, version: number) =>
  client
    .put(`/api/answers/${answerId}/text`)
    .set('If-Match', String(version))
    .set('Idempotency-Key', newId())
    .send({ text });

async function openSet(settings: Parameters<typeof buildOpenSet>[1] = {}) {
  const built = await buildOpenSet(harness, settings);
  const lead = await harness.agent(built.lead);
  const student = await harness.agent(built.student);
  const marker = harness.makeMember(built.course.id, 'marker', { name: 'Mo Marker' });
  const give = (body: object) => lead.post(`/api/sets/${built.setId}/allowances`).send(body);
  const later = harness.clock.now() + 72 * hour;
  const wish = { membershipId: built.student.membershipId, closesAt: later, reason: 'planted-reason-5512' };
  return { ...built, client: { lead, student, marker: await harness.agent(marker) }, marker, give, later, wish };
}

describe('an allowance', () => {
  it('is given with a reason, kept in the record, told to its student, and withdrawn', async () => {
    const { client, setId, give, wish, later, student, lead } = await openSet();
    const given = await give(wish).expect(201);
    expect(given.body).toMatchObject({ name: 'Sol Reed', closesAt: later, givenBy: 'Ada Lead', isOpen: true });
    const id = (given.body as { id: string }).id;
    const row = () => harness.db.select().from(allowances).where(eq(allowances.id, id)).get();
    expect(row()).toMatchObject({ closesAt: later, reason: wish.reason, byId: lead.id, withdrawnAt: null });
    const entry = harness.db.select().from(record).where(eq(record.thingId, id)).get();
    expect(entry).toMatchObject({ action: 'allowance given', reason: wish.reason });
    expect(entry?.sentence).not.toContain('Sol');
    const [letter] = harness.db.select().from(letters).where(eq(letters.userId, student.id)).all();
    expect(letter).toMatchObject({ kind: 'allowance' });
    expect(letter?.text).not.toContain(wish.reason);

    expect(await sheetOf(client.student, setId)).toMatchObject({
      state: 'open',
      closesAt: later,
      allowance: { closesAt: later, othersCloseAt: harness.clock.now() + 48 * hour, waivesLateRule: false },
    });
    await client.lead.delete(`/api/allowances/${id}`).expect(204);
    expect(row()?.withdrawnAt).toBe(harness.clock.now());
    expect(await sheetOf(client.student, setId)).toMatchObject({ allowance: null });
    await client.lead.delete(`/api/allowances/${id}`).expect(404);
  });

  it('takes the place of the one before', async () => {
    const { client, setId, give, wish } = await openSet();
    await give(wish).expect(201);
    await give({ ...wish, closesAt: wish.closesAt + hour }).expect(201);
    const { body } = await client.lead.get(`/api/sets/${setId}/allowances`).expect(200);
    expect(body).toMatchObject({ total: 1, items: [{ closesAt: wish.closesAt + hour }] });
    expect(harness.db.select().from(allowances).all()).toHaveLength(2);
  });

  it('is refused by field, and to all but leads', async () => {
    const { client, setId, give, wish, other } = await openSet();
    const { body } = await give({ ...wish, reason: ' ' }).expect(400);
    expect(body).toMatchObject({ type: '/errors/invalid-input', fields: [{ path: ['reason'] }] });
    for (const closesAt of [harness.clock.now() + 47 * hour, null])
      expect((await give({ ...wish, closesAt }).expect(400)).body).toMatchObject({ fields: [{ path: ['closesAt'] }] });
    expect((await give({ ...wish, waivesLateRule: true }).expect(400)).body).toMatchObject({
      fields: [{ path: ['waivesLateRule'] }],
    });
    await give({ ...wish, membershipId: newId() }).expect(404);
    const nobody = await harness.agent(null);
    const outsider = await harness.agent(harness.makePerson());
    const given = await give(wish).expect(201);
    for (const [who, status] of [
      [client.marker, 403],
      [client.student, 403],
      [await harness.agent(other), 403],
      [outsider, 403],
      [nobody, 401],
    ] as const) {
      await who.get(`/api/sets/${setId}/allowances`).expect(status);
      await who.post(`/api/sets/${setId}/allowances`).send(wish).expect(status);
      await who.delete(`/api/allowances/${(given.body as { id: string }).id}`).expect(status);
    }
    expect(harness.db.select().from(allowances).all()).toHaveLength(1);
  });
});

describe('closing', () => {
  it('comes to each student at their own time', async () => {
    const { client, setId, course, give, wish, later, other } = await openSet();
    await give(wish).expect(201);
    const part = firstPart(await sheetOf(client.student, setId));
    const others = await harness.agent(other);
    const theirs = firstPart(await sheetOf(others, setId));
    await save(others, theirs.answerId, '5', 0).expect(200);

    harness.clock.advance(48 * hour);
    await runClockStages(harness.context);
    expect((await save(others, theirs.answerId, '6', 1).expect(409)).body).toMatchObject({ type: '/errors/conflict' });
    await save(client.student, part.answerId, '7', 0).expect(200);
    const receipt = await client.student
      .post(`/api/sets/${setId}/submissions`)
      .set('Idempotency-Key', newId())
      .expect(201);
    expect(receipt.body).toMatchObject({ state: 'open', closesAt: later });
    await save(client.student, part.answerId, '8', 1).expect(200);

    const state = (answerId: string) =>
      harness.db.select().from(answers).where(eq(answers.id, answerId)).get()?.state ?? null;
    await runClockStages(harness.context);
    expect(state(theirs.answerId)).not.toBeNull();
    expect(state(part.answerId)).toBeNull();
    const desk = (await client.student.get(`/api/courses/${course.id}/desk`).expect(200)).body as Desk;
    expect(desk.sets[0]).toMatchObject({ stage: 'open', closesAt: later, act: { page: 'sheet' } });
    expect(desk.needs[0]).toMatchObject({ due: later });

    harness.clock.set(later);
    await save(client.student, part.answerId, '9', 2).expect(409);
    await runClockStages(harness.context);
    expect(state(part.answerId)).not.toBeNull();
    const last = (await client.student.get(`/api/sets/${setId}/receipt`).expect(200)).body as Receipt;
    expect(last.submission).toMatchObject({ number: 2, at: later, by: 'closing' });
    expect(last.content[0]?.text).toBe('8');
  });

  it('leaves a pile open to others while one student still has time, and begins marking without them', async () => {
    const { client, setId, give, wish } = await openSet();
    await give(wish).expect(201);
    await sheetOf(client.student, setId);
    harness.clock.advance(48 * hour);
    await runClockStages(harness.context);
    const preview = await client.lead.get(`/api/sets/${setId}/stages/marking/preview`).expect(200);
    expect(preview.body).toMatchObject({ allowed: true });
  });

  it('is undone for a student who gets more time afterwards, unless a person marked them', async () => {
    const { client, setId, give, wish, student } = await openSet();
    const part = firstPart(await sheetOf(client.student, setId));
    harness.clock.advance(48 * hour);
    await runClockStages(harness.context);
    const script = harness.db.select().from(scripts).where(eq(scripts.membershipId, student.membershipId)).get();
    const own = () =>
      harness.db
        .select()
        .from(answers)
        .where(eq(answers.scriptId, script?.id ?? ''))
        .all();
    expect(own().every((answer) => answer.state === 'marked')).toBe(true);
    const given = await give(wish).expect(201);
    expect(own().map((answer) => answer.state)).toEqual([null, null, null, null]);
    await save(client.student, part.answerId, '12', 0).expect(200);

    await client.lead.delete(`/api/allowances/${(given.body as { id: string }).id}`).expect(204);
    const last = harness.db.select().from(submissions).orderBy(submissions.at).all().at(-1);
    expect(last).toMatchObject({ at: harness.clock.now(), by: 'closing' });
    await runClockStages(harness.context);
    await expect.poll(() => own().some((answer) => answer.state === null)).toBe(false);

    const [first] = own();
    const markId = newId();
    harness.db
      .insert(marks)
      .values({
        id: markId,
        answerId: first?.id ?? '',
        kind: 'second',
        markerId: student.membershipId,
        criteria: [],
        total: 1,
        at: harness.clock.now(),
        idempotencyKey: newId(),
      })
      .run();
    harness.db
      .update(answers)
      .set({ state: 'marked', standingMarkId: markId })
      .where(eq(answers.id, first?.id ?? ''))
      .run();
    expect((await give(wish).expect(409)).body).toMatchObject({ type: '/errors/conflict' });
    expect(own().every((answer) => answer.state !== null)).toBe(true);
  });

  it('brings an unchanged script back to its piles', async () => {
    const { client, setId, give, wish, student } = await openSet();
    await sheetOf(client.student, setId);
    harness.clock.advance(48 * hour);
    await runClockStages(harness.context);
    await give(wish).expect(201);
    harness.clock.set(wish.closesAt);
    await runClockStages(harness.context);
    const own = harness.db
      .select({ state: answers.state })
      .from(answers)
      .innerJoin(scripts, eq(scripts.id, answers.scriptId))
      .where(eq(scripts.membershipId, student.membershipId))
      .all();
    expect(own.map(({ state }) => state)).toEqual(['marked', 'marked', 'marked', 'marked']);
  });
});

describe('release', () => {
  /** Closed, and marked but for the student who has more time. */
  async function closedSet(settings: Parameters<typeof openSet>[0] = {}) {
    const built = await openSet(settings);
    await built.give(built.wish).expect(201);
    await sheetOf(built.client.student, built.setId);
    harness.clock.advance(48 * hour);
    await runClockStages(harness.context);
    const { body } = await built.client.lead.get(`/api/sets/${built.setId}/release`).expect(200);
    const post = (path: string, version: number, sent: object) =>
      built.client.lead.post(`/api/sets/${built.setId}/${path}`).set('If-Match', String(version)).send(sent);
    return { ...built, release: body as { version: number }, post };
  }

  it('waits for the last', async () => {
    const { release, post, later } = await closedSet();
    expect(release).toMatchObject({ ready: false, stillOpen: { students: 1, until: later, othersReady: true } });
    const { body } = await post('release', release.version, {}).expect(409);
    expect((body as { detail: string }).detail).toContain('1 student still has time');
  });

  it('does not wait for somebody who has left the course', async () => {
    const { setId, client, student, later } = await closedSet();
    harness.db
      .update(memberships)
      .set({ removedAt: harness.clock.now() })
      .where(eq(memberships.id, student.membershipId))
      .run();
    const { body } = await client.lead.get(`/api/sets/${setId}/release`).expect(200);
    expect(body).toMatchObject({ ready: true, stillOpen: null, students: 1 });
    expect(JSON.stringify(body)).not.toContain(String(later));
  });

  it('or leaves out those who still have time, until a second release', async () => {
    const { setId, client, release, post, other, student, later } = await closedSet();
    const others = await harness.agent(other);
    const out = await post('release', release.version, { leaveOutOpen: true }).expect(200);
    expect(out.body).toMatchObject({
      stage: 'closed',
      releasedBefore: 1,
      takeBackUntil: harness.clock.now() + 600_000,
    });
    const released = (id: string) =>
      harness.db.select().from(scripts).where(eq(scripts.membershipId, id)).get()?.releasedAt ?? null;
    expect(released(other.membershipId)).toBe(harness.clock.now());
    expect(released(student.membershipId)).toBeNull();
    await others.get(`/api/sets/${setId}/feedback`).expect(200);
    await client.student.get(`/api/sets/${setId}/feedback`).expect(404);
    expect(await sheetOf(others, setId)).toMatchObject({ state: 'released' });
    expect(await sheetOf(client.student, setId)).toMatchObject({ state: 'open' });
    const kinds = () =>
      harness.db
        .select()
        .from(letters)
        .all()
        .filter((letter) => letter.kind === 'released' && letter.cancelledAt === null)
        .map((letter) => letter.userId);
    expect(kinds()).toEqual([other.id]);

    // It can be taken back, and made again.
    const back = await post('release/take-back', (out.body as { version: number }).version, {}).expect(200);
    expect(released(other.membershipId)).toBeNull();
    expect(kinds()).toEqual([]);
    await others.get(`/api/sets/${setId}/feedback`).expect(404);
    await post('release', (back.body as { version: number }).version, { leaveOutOpen: true }).expect(200);

    harness.clock.set(later);
    await runClockStages(harness.context);
    const now = (await client.lead.get(`/api/sets/${setId}/release`).expect(200)).body as { version: number };
    expect(now).toMatchObject({ ready: true, stillOpen: null, students: 1, releasedBefore: 1 });
    await post('release', now.version, {}).expect(200);
    await client.student.get(`/api/sets/${setId}/feedback`).expect(200);
    expect(kinds()).toEqual([other.id, student.id]);
  });

  it('keeps keys from everybody while somebody with the same numbers may still answer', async () => {
    const { setId, release, post, other, later } = await closedSet({ individualVariants: false });
    await post('release', release.version, { leaveOutOpen: true }).expect(200);
    const others = await harness.agent(other);
    const keys = async () => {
      const { text } = await others.get(`/api/sets/${setId}/feedback`).expect(200);
      return (JSON.parse(text) as { problems: { parts: { key: unknown }[] }[] }).problems.flatMap((each) =>
        each.parts.map(({ key }) => key !== null),
      );
    };
    expect(await keys()).toEqual([false, false, false, false]);
    harness.clock.set(later);
    expect((await keys()).some(Boolean)).toBe(true);
  });
});

describe('markers', () => {
  it('meet no allowance, no time and no reason in anything that they can ask for', async () => {
    const { client, setId, course, give, wish, later, marker, student } = await openSet();
    const given = await give(wish).expect(201);
    await sheetOf(client.student, setId);
    const planted = [
      wish.reason,
      String(later),
      new Date(later).toISOString().slice(0, 16),
      student.membershipId,
      (given.body as { id: string }).id,
      'Sol Reed',
    ];
    const ask = async () => {
      const { body } = await client.marker.get(`/api/courses/${course.id}/piles`).expect(200);
      const piles = (body as { items: SetPiles[] }).items.flatMap((set) => set.piles);
      const ids: Record<string, readonly string[]> = {
        courseId: [course.id],
        setId: [setId],
        pileId: piles.map((pile) => pile.id),
        answerId: harness.db
          .select()
          .from(answers)
          .all()
          .map((each) => each.id),
        membershipId: [student.membershipId, marker.membershipId],
        stage: ['closed', 'marking'],
      };
      let asked = 0;
      for (const route of harness.serve.routes.filter(({ method }) => method === 'GET')) {
        const names = [...route.path.matchAll(/:(\w+)/g)].map((match) => match[1] ?? '');
        const paths = names.reduce<string[]>(
          (made, name) => made.flatMap((path) => (ids[name] ?? [newId()]).map((id) => path.replace(`:${name}`, id))),
          [route.path],
        );
        for (const path of paths) {
          const { text } = await client.marker.get(`/api${path}`);
          for (const secret of planted) {
            // What a marker sends comes back in no answer; the address itself is not searched.
            expect(text, `${path} says ${secret}`).not.toContain(secret);
          }
          asked += 1;
        }
      }
      return asked;
    };
    expect(await ask()).toBeGreaterThan(20);
    harness.clock.advance(48 * hour);
    await runClockStages(harness.context);
    expect(await ask()).toBeGreaterThan(20);
    harness.clock.set(later + 90_000);
    await runClockStages(harness.context);
    expect(await ask()).toBeGreaterThan(20);
  });
});
