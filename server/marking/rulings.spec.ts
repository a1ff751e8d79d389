import { eq } from 'drizzle-orm';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { record, rulingAnswers, rulings, sets } from '@drizzle/schema';
import type { Pile } from '@shared/marking';
import type { RulingOutcome } from '@shared/rulings';
import { newId } from '../http/new-id';
import type { Emitted } from '../live/live';
import { pileMarksRoom, pileRoom } from '../live/rooms';
import { createHarness, type Harness } from '../testing/harness';
import { buildPile } from './testing/build-pile';

type Agent = Awaited<ReturnType<Harness['agent']>>;

const question = 'Is twice the key right where the script states [x, p] = 2i?';

let harness: Harness;
let courseId: string;
let told: Emitted[];
let built: ReturnType<typeof buildPile>;
let marker: Agent;
let colleague: Agent;
let lead: Agent;

beforeEach(async () => {
  harness = createHarness();
  courseId = harness.makeCourse().id;
  told = [];
  built = buildPile(harness, { courseId, values: [4, 4, 7] });
  marker = await harness.agent(harness.makeMember(courseId, 'marker', { name: 'Iwo Brandt' }));
  colleague = await harness.agent(harness.makeMember(courseId, 'marker', { name: 'Tamsin Okafor' }));
  lead = await harness.agent(harness.makeMember(courseId, 'lead', { name: 'Signe Halloran' }));
  harness.context.live.observe((emitted) => told.push(emitted));
});
afterEach(() => harness.close());

const answerId = (index: number) => built.handedIn[index]?.answerId ?? '';
const ask = (client: Agent, body: object = {}, key = newId()) =>
  client
    .post(`/api/piles/${built.pileId}/rulings`)
    .set('Idempotency-Key', key)
    .send({ question, answerId: answerId(0), ...body });
const wait = (client: Agent, rulingId: string, index: number) =>
  client.post(`/api/rulings/${rulingId}/answers`).send({ answerId: answerId(index) });
const decide = (client: Agent, rulingId: string, decision = 'Yes, where the script says so.') =>
  client.post(`/api/rulings/${rulingId}/decision`).send({ decision });
const asked = async (client = marker) => ((await ask(client).expect(201)).body as RulingOutcome).ruling;
const rulingEvents = () => told.filter(({ event }) => event.startsWith('ruling'));

describe('a ruling', () => {
  it('is asked for by a marker, and reaches every bench of the pile with its number', async () => {
    const { body } = await ask(marker).expect(201);
    const { ruling, sequence } = body as RulingOutcome;
    expect(ruling).toMatchObject({ question, decision: null, answers: [{ answerId: answerId(0), code: 'K000' }] });
    expect(rulingEvents()).toEqual([
      {
        rooms: [pileRoom(built.pileId), pileMarksRoom(built.pileId)],
        event: 'rulingAsked',
        body: { pileId: built.pileId, sequence, ruling },
      },
    ]);
    const pile = (await colleague.get(`/api/piles/${built.pileId}`).expect(200)).body as Pile;
    expect(pile.rulings).toEqual([ruling]);
    expect(pile.sequence).toBe(sequence);
    expect(harness.db.select().from(record).where(eq(record.action, 'ruling asked')).all()).toMatchObject([
      { thingId: ruling.id, sentence: 'A ruling on set 4, 1 (a) was asked for, about answer K000.' },
    ]);
  });

  it('is asked once however often the same question arrives', async () => {
    const key = newId();
    const first = (await ask(marker, {}, key).expect(201)).body as RulingOutcome;
    const again = (await ask(marker, {}, key).expect(201)).body as RulingOutcome;
    expect(again.ruling.id).toBe(first.ruling.id);
    expect(harness.db.select().from(rulings).all()).toHaveLength(1);
    expect(rulingEvents()).toHaveLength(1);
  });

  it('shows who else waits, each answer once', async () => {
    const { id } = await asked();
    const outcome = (await wait(colleague, id, 1).expect(200)).body as RulingOutcome;
    expect(outcome.ruling.answers.map(({ code }) => code)).toEqual(['K000', 'K001']);
    expect(new Set(outcome.ruling.answers.map(({ byId }) => byId)).size).toBe(2);
    await wait(colleague, id, 1).expect(200);
    expect(harness.db.select().from(rulingAnswers).all()).toHaveLength(2);
    expect(rulingEvents().map(({ event }) => event)).toEqual(['rulingAsked', 'rulingAsked']);
  });

  it('is decided by the lead, once, and stays with the part', async () => {
    const { id } = await asked();
    const { ruling } = (await decide(lead, id).expect(200)).body as RulingOutcome;
    expect(ruling).toMatchObject({ decision: 'Yes, where the script says so.', decidedAt: harness.clock.now() });
    expect(rulingEvents().at(-1)).toMatchObject({ event: 'rulingDecided', body: { ruling } });
    const again = await decide(lead, id, 'No.').expect(409);
    expect(again.body).toMatchObject({ type: '/errors/conflict', current: { decision: ruling.decision } });
    await wait(colleague, id, 1).expect(409);
    expect(harness.db.select().from(record).where(eq(record.action, 'ruling decided')).get()).toMatchObject({
      before: { question },
      after: { decision: ruling.decision, answers: ['K000'] },
    });
    const pile = (await marker.get(`/api/piles/${built.pileId}`).expect(200)).body as Pile;
    expect(pile.rulings).toEqual([ruling]);
  });

  it('that is decided cannot be changed in the database either', async () => {
    const { id } = await asked();
    await decide(lead, id).expect(200);
    expect(() => harness.db.update(rulings).set({ decision: 'No.' }).where(eq(rulings.id, id)).run()).toThrow();
    expect(() => harness.db.delete(rulings).run()).toThrow();
    expect(() => harness.db.delete(rulingAnswers).run()).toThrow();
  });

  it('is not decided by a marker, and nothing of it reaches a student or a stranger', async () => {
    const { id } = await asked();
    expect((await decide(marker, id).expect(403)).body).toMatchObject({ type: '/errors/not-allowed' });
    const student = await harness.agent(built.handedIn[0]?.student ?? null);
    const stranger = await harness.agent(harness.makeMember(harness.makeCourse().id, 'lead'));
    for (const client of [student, stranger]) {
      await ask(client).expect(403);
      await wait(client, id, 1).expect(403);
      await decide(client, id).expect(403);
      const refused = await client.get(`/api/piles/${built.pileId}`).expect(403);
      expect(JSON.stringify(refused.body)).not.toContain(question);
    }
    expect(harness.db.select().from(rulings).get()?.decidedAt).toBeNull();
  });

  it('needs a question, an answer of its pile, and a pile that is being marked', async () => {
    expect((await ask(marker, { question: '  ' }).expect(400)).body).toMatchObject({
      fields: [{ path: ['question'] }],
    });
    const other = buildPile(harness, { courseId: harness.makeCourse().id, values: [4] });
    const elsewhere = await ask(marker, { answerId: other.handedIn[0]?.answerId ?? '' }).expect(400);
    expect(elsewhere.body).toMatchObject({ fields: [{ path: ['answerId'] }] });
    await decide(lead, newId()).expect(404);
    harness.db.update(sets).set({ stage: 'released' }).where(eq(sets.id, built.setId)).run();
    expect((await ask(marker).expect(409)).body).toMatchObject({ type: '/errors/conflict' });
    expect(harness.db.select().from(rulings).all()).toEqual([]);
  });
});
