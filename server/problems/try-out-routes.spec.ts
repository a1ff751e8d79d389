import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { tryOuts } from '@drizzle/schema';
import type { ProblemDetail } from '@shared/problem-routes';
import type { TryOut, TryOutPaper } from '@shared/try-outs';
import { newId } from '../http/new-id';
import { buildDraft, buildPart } from '../testing/build-draft';
import { createHarness, testNow, type Harness } from '../testing/harness';

type Agent = Awaited<ReturnType<Harness['agent']>>;

let harness: Harness;
let author: Agent;
let marker: Agent;
let otherMarker: Agent;
let student: Agent;
let problem: ProblemDetail;

const worked = buildPart({ form: 'worked', key: '' });
const parts = [buildPart(), buildPart({ key: 'T*nbar', slips: [] }), worked];

beforeAll(async () => {
  harness = createHarness();
  const courseId = harness.makeCourse().id;
  author = await harness.agent(harness.makeMember(courseId, 'lead'));
  const asked = harness.makeMember(courseId, 'marker', { name: 'Oda Brenner' });
  marker = await harness.agent(asked);
  otherMarker = await harness.agent(harness.makeMember(courseId, 'marker'));
  student = await harness.agent(harness.makeMember(courseId, 'student'));
  const statement = 'Light of $\\val{nbar}$ meets $T = \\val{T}$.\n(a) How many leave?\n(b) And there?\n(c) Why?';
  const begun = (await author.post('/api/problems').send({ courseId, title: 'A splitter' }).expect(201)).body;
  const saved = await author
    .put(`/api/problems/${String(begun.id)}/draft`)
    .set('If-Match', '"1"')
    .send(buildDraft({ statement, parts }))
    .expect(200);
  problem = saved.body as ProblemDetail;
  await author.post(`/api/problems/${problem.id}/try-outs`).expect(409);
  await author
    .post(`/api/problems/${problem.id}/revisions`)
    .set('If-Match', `"${String(problem.version)}"`)
    .send({ reason: 'first' })
    .expect(201);
  await author
    .post(`/api/problems/${problem.id}/review-requests`)
    .send({ colleagueIds: [asked.id], dueAt: testNow + 3_600_000 })
    .expect(201);
});
afterAll(() => harness.close());

const path = () => `/api/problems/${problem.id}/try-outs`;
const begin = async () => (await marker.post(path()).expect(201)).body as TryOutPaper;
const rowOf = (id: string) => harness.db.select().from(tryOuts).where(eq(tryOuts.id, id)).get();

describe('a try-out', () => {
  it('is a variant as a student gets it, without key or mark scheme, and goes on where it was left', async () => {
    const paper = await begin();
    expect(paper).toMatchObject({ revision: 1, title: 'A splitter', activeSeconds: 0 });
    expect(paper.parts.map(({ label, text }) => [label, text])).toEqual([
      ['a', 'How many leave?'],
      ['b', 'And there?'],
      ['c', 'Why?'],
    ]);
    expect(JSON.stringify(paper)).not.toMatch(/T for R|T\*nbar|criteria|tolerance/);
    const answers = { [parts[0]!.id]: '1.2' };
    await marker.put(`${path()}/${paper.id}/answers`).send({ answers, activeSeconds: 90 }).expect(204);
    await marker.put(`${path()}/${paper.id}/answers`).send({ answers, activeSeconds: 30 }).expect(204);
    const again = await begin();
    expect(again).toMatchObject({ id: paper.id, givens: paper.givens, activeSeconds: 90 });
    expect(again.parts[0]?.answer).toBe('1.2');
    expect(rowOf(paper.id)).toMatchObject({ answers, activeSeconds: 90, handedInAt: null });
  });

  it('is checked as a student’s answers are, and its differences to the key are shown', async () => {
    const paper = await begin();
    const [nbar, T] = [Number(paper.givens['nbar']?.printed), Number(paper.givens['T']?.printed)];
    const slipped = String(T * nbar);
    const answers = { [parts[0]!.id]: slipped, [parts[1]!.id]: slipped, [worked.id]: 'Since light splits.' };
    const sent = await marker
      .post(`${path()}/${paper.id}/submission`)
      .send({ answers, activeSeconds: 610 })
      .expect(201);
    const made = sent.body as TryOut;
    expect(made).toMatchObject({ by: { name: 'Oda Brenner' }, revision: 1, activeMinutes: 10, right: 1, checked: 2 });
    expect(made.answers).toMatchObject([
      {
        label: 'a',
        answer: slipped,
        verdict: 'slip',
        relation: 'T for R',
        key: expect.closeTo((1 - T) * nbar, 9) as number,
      },
      { label: 'b', verdict: 'right' },
      { label: 'c', answer: 'Since light splits.', verdict: null },
    ]);
    expect(rowOf(paper.id)).toMatchObject({ handedInAt: testNow, activeSeconds: 610 });
    const { body } = await author.get(path()).expect(200);
    expect(body).toEqual({ items: [made], total: 1 });
    await marker.post(`${path()}/${paper.id}/submission`).send({ answers, activeSeconds: 1 }).expect(409);
    await marker.put(`${path()}/${paper.id}/answers`).send({ answers, activeSeconds: 1 }).expect(409);
    expect((await begin()).id).not.toBe(paper.id);
  });

  it('is one’s own, and for those who may read the problem', async () => {
    const { id } = await begin();
    const body = { answers: {}, activeSeconds: 0 };
    await author.put(`${path()}/${id}/answers`).send(body).expect(404);
    await author.post(`${path()}/${id}/submission`).send(body).expect(404);
    await marker.post(`${path()}/${newId()}/submission`).send(body).expect(404);
    await marker.put(`${path()}/${id}/answers`).send({ answers: {}, activeSeconds: -1 }).expect(400);
    for (const who of [student, otherMarker]) {
      const refused = await who.post(path()).expect(403);
      expect(refused.body).toMatchObject({ type: '/errors/not-allowed' });
      await who.get(path()).expect(403);
      await who.put(`${path()}/${id}/answers`).send(body).expect(403);
      await who.post(`${path()}/${id}/submission`).send(body).expect(403);
    }
    await (await harness.agent(null)).get(path()).expect(401);
  });
});
