import { eq } from 'drizzle-orm';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { answers, marks, patternApplications, record, sets, submissions } from '@drizzle/schema';
import type { Held, Pile } from '@shared/marking';
import type { PatternOutcome, PatternPreview, PatternUndone } from '@shared/pattern-marks';
import type { ProblemContent } from '@shared/problems';
import { newId } from '../http/new-id';
import type { Emitted } from '../live/live';
import { createHarness, type Harness } from '../testing/harness';
import { buildCheck, buildContent, buildPile } from './testing/build-pile';

type Agent = Awaited<ReturnType<Harness['agent']>>;
interface Bench {
  readonly client: Agent;
  readonly benchId: string;
}

let harness: Harness;
let courseId: string;
let told: Emitted[];
let brandt: Bench;
let okafor: Bench;
let lead: Bench;
let built: ReturnType<typeof buildPile>;

beforeEach(async () => {
  harness = createHarness();
  courseId = harness.makeCourse().id;
  const benchOf = async (role: 'marker' | 'lead', name: string) => ({
    client: await harness.agent(harness.makeMember(courseId, role, { name })),
    benchId: newId(),
  });
  brandt = await benchOf('marker', 'Iwo Brandt');
  okafor = await benchOf('marker', 'Tamsin Okafor');
  lead = await benchOf('lead', 'Signe Halloran');
  // Six answers are twice the key, two have no relation to it, one is right and stands by its check.
  built = buildPile(harness, { courseId, values: [4, 4, 4, 4, 4, 4, 7, 9, 2] });
  told = [];
  harness.context.live.observe((emitted) => told.push(emitted));
});
afterEach(() => harness.close());

const answerId = (index: number) => built.handedIn[index]?.answerId ?? '';
const rowOf = (index: number) =>
  harness.db
    .select()
    .from(answers)
    .where(eq(answers.id, answerId(index)))
    .get();
const marksOf = (index: number) =>
  harness.db
    .select()
    .from(marks)
    .where(eq(marks.answerId, answerId(index)))
    .all();
const codes = (list: readonly { readonly code: string }[]) => list.map(({ code }) => code);

const take = async (bench: Bench, index: number) =>
  (
    await bench.client
      .post(`/api/piles/${built.pileId}/holds`)
      .send({ benchId: bench.benchId, answerId: answerId(index) })
      .expect(200)
  ).body as Held;
const preview = async (bench: Bench, index: number) =>
  (await bench.client.get(`/api/answers/${answerId(index)}/pattern`).expect(200)).body as PatternPreview;

function apply(
  bench: Bench,
  index: number,
  list: readonly { readonly answerId: string; readonly version: number }[],
  extra: { readonly awarded?: readonly string[]; readonly key?: string; readonly remark?: string } = {},
) {
  const awarded = new Set(extra.awarded ?? ['A1']);
  return bench.client
    .post(`/api/answers/${answerId(index)}/pattern-marks`)
    .set('Idempotency-Key', extra.key ?? newId())
    .send({
      benchId: bench.benchId,
      criteria: built.part.criteria.map(({ id, name }) => ({ criterionId: id, awarded: awarded.has(name) })),
      remark: extra.remark ?? 'Twice the key, as ruled.',
      answers: list.map(({ answerId: id, version }) => ({ answerId: id, version })),
    });
}

const undo = (bench: Bench, applicationId: string) =>
  bench.client.post(`/api/pattern-applications/${applicationId}/undo`).send({ benchId: bench.benchId });

async function applied(bench: Bench, index: number, extra: Parameters<typeof apply>[3] = {}) {
  await take(bench, index);
  const { marks: list } = await preview(bench, index);
  return (await apply(bench, index, list, extra).expect(201)).body as PatternOutcome;
}

function addPage(index: number): void {
  const { scriptId } = built.handedIn[index] ?? {};
  const last = harness.db
    .select()
    .from(submissions)
    .where(eq(submissions.scriptId, scriptId ?? ''))
    .get();
  if (!last) throw new Error('It was handed in.');
  const content = last.content.map((each) => ({ ...each, pages: [{ id: newId(), sha256: 'a'.repeat(64) }] }));
  harness.db
    .insert(submissions)
    .values({ ...last, id: newId(), number: 2, content, idempotencyKey: newId() })
    .run();
}

describe('applying a mark to a pattern', () => {
  it('shows first what it would mark: the free answers of the pattern, without the one in hand', async () => {
    await take(brandt, 0);
    const shown = await preview(brandt, 0);
    expect(shown).toMatchObject({ name: 'twice the key', refused: null, needPerson: [], held: [], openCriteria: [] });
    expect(codes(shown.marks)).toEqual(['K001', 'K002', 'K003', 'K004', 'K005']);
    expect(harness.db.select().from(patternApplications).all()).toEqual([]);
  });

  it('marks each by a row of its own that says it was not seen singly, and tells every bench', async () => {
    const outcome = await applied(brandt, 0);
    expect(codes(outcome.marked)).toEqual(['K001', 'K002', 'K003', 'K004', 'K005']);
    for (const index of [1, 2, 3, 4, 5]) {
      expect(marksOf(index)).toMatchObject([
        { total: 1, remark: 'Twice the key, as ruled.', patternApplicationId: outcome.applicationId, kind: 'first' },
      ]);
      expect(rowOf(index)).toMatchObject({ state: 'marked', version: 2, standingMarkId: marksOf(index)[0]?.id });
    }
    expect(rowOf(0)).toMatchObject({ state: 'waits', version: 1 });
    expect(rowOf(6)).toMatchObject({ state: 'waits' });
    expect(told.find(({ event }) => event === 'pileChanged')).toMatchObject({ body: { sequence: outcome.sequence } });
    const seen = (await okafor.client.get(`/api/piles/${built.pileId}`).expect(200)).body as Pile;
    expect(seen.sequence).toBe(outcome.sequence);
    expect(seen.answers.filter(({ state }) => state === 'marked')).toHaveLength(6);
    expect(harness.db.select().from(record).where(eq(record.action, 'pattern marked')).all()).toMatchObject([
      { sentence: '5 answers of the pattern “twice the key” of set 4, 1 (a) were marked alike, not seen singly.' },
    ]);
    // What the bench kept ready is marked now; the answer in hand stays in hand.
    expect(outcome.held).toMatchObject({ inHand: answerId(0), reserved: [] });
  });

  it('leaves methods as the check proposes them, whatever is awarded to the answer in hand', async () => {
    await applied(brandt, 0, { awarded: ['M1', 'B1', 'A1'] });
    const awarded = marksOf(1)[0]?.criteria.filter((each) => each.awarded) ?? [];
    const names = awarded.map(({ criterionId }) => built.part.criteria.find(({ id }) => id === criterionId)?.name);
    expect(names).toEqual(['A1']);
  });

  it('leaves answers with worked pages to a person where a method is open, and says which', async () => {
    addPage(1);
    addPage(2);
    await take(brandt, 0);
    const shown = await preview(brandt, 0);
    expect(codes(shown.needPerson)).toEqual(['K001', 'K002']);
    expect(shown.openCriteria).toEqual(['M1', 'B1']);
    expect(codes(shown.marks)).toEqual(['K003', 'K004', 'K005']);
    const named = built.handedIn.slice(1, 6).map((each) => ({ answerId: each.answerId, version: 1 }));
    const outcome = (await apply(brandt, 0, named).expect(201)).body as PatternOutcome;
    expect(codes(outcome.skipped).sort()).toEqual(['K001', 'K002']);
    expect(marksOf(1)).toEqual([]);
  });

  it('marks answers with pages too where the check decides every criterion', async () => {
    const content: ProblemContent = buildContent();
    const [part] = content.parts;
    if (!part) throw new Error('It has a part.');
    const decided = { ...part, criteria: part.criteria.map((each) => ({ ...each, awardedBy: ['wrong' as const] })) };
    const check = buildCheck(4, { proposed: decided.criteria.map(({ id }) => id) });
    built = buildPile(harness, {
      courseId: harness.makeCourse().id,
      values: [check, check],
      content: { ...content, parts: [decided] },
    });
    addPage(1);
    // Its course is another: only its own people see it.
    await brandt.client.get(`/api/answers/${answerId(0)}/pattern`).expect(403);
    const { courseId: own } = harness.db.select().from(sets).where(eq(sets.id, built.setId)).get() ?? { courseId: '' };
    const bench = { client: await harness.agent(harness.makeMember(own, 'marker')), benchId: newId() };
    const outcome = await applied(bench, 0, { awarded: ['M1', 'B1'] });
    expect(codes(outcome.marked)).toEqual(['K001']);
    expect(marksOf(1)[0]?.total).toBe(2);
  });

  it('skips what colleagues hold, and what changed since the preview', async () => {
    await take(brandt, 0);
    const { marks: list } = await preview(brandt, 0);
    // Okafor takes K003 in hand, and K004 and K005 are kept ready.
    await take(okafor, 3);
    expect(codes((await preview(brandt, 0)).held)).toEqual(['K003', 'K004', 'K005']);
    harness.db
      .update(answers)
      .set({ version: 5 })
      .where(eq(answers.id, answerId(1)))
      .run();
    const outcome = (await apply(brandt, 0, list).expect(201)).body as PatternOutcome;
    expect(codes(outcome.marked)).toEqual(['K002']);
    expect(codes(outcome.skipped).sort()).toEqual(['K001', 'K003', 'K004', 'K005']);
    expect(rowOf(3)?.state).toBe('waits');
  });

  it('happens once however often it is sent', async () => {
    await take(brandt, 0);
    const { marks: list } = await preview(brandt, 0);
    const key = newId();
    const first = (await apply(brandt, 0, list, { key }).expect(201)).body as PatternOutcome;
    const again = (await apply(brandt, 0, list, { key }).expect(201)).body as PatternOutcome;
    expect(again.applicationId).toBe(first.applicationId);
    expect(again.marked).toHaveLength(5);
    expect(marksOf(1)).toHaveLength(1);
  });

  it('is refused without an answer in hand, for answers with nothing in common, and to students', async () => {
    const all = [{ answerId: answerId(1), version: 1 }];
    expect((await apply(brandt, 0, all).expect(409)).body).toMatchObject({ type: '/errors/conflict' });
    await take(brandt, 6);
    expect((await preview(brandt, 6)).refused).toMatch(/no mistake in common/);
    await apply(brandt, 6, [{ answerId: answerId(7), version: 1 }]).expect(409);
    const student = { client: await harness.agent(built.handedIn[0]?.student ?? null), benchId: newId() };
    await student.client.get(`/api/answers/${answerId(0)}/pattern`).expect(403);
    expect((await apply(student, 0, all).expect(403)).body).toMatchObject({ type: '/errors/not-allowed' });
    expect(harness.db.select().from(patternApplications).all()).toEqual([]);
  });
});

describe('taking an application back', () => {
  it('lets every answer wait again; the marks stay on record', async () => {
    const { applicationId } = await applied(brandt, 0);
    const undone = (await undo(brandt, applicationId).expect(200)).body as PatternUndone;
    expect(codes(undone.restored)).toEqual(['K001', 'K002', 'K003', 'K004', 'K005']);
    expect(rowOf(1)).toMatchObject({ state: 'waits', standingMarkId: null, version: 3 });
    expect(marksOf(1)).toHaveLength(1);
    expect(harness.db.select().from(record).where(eq(record.action, 'mark taken back')).all()).toHaveLength(5);
    expect(told.at(-2)).toMatchObject({ event: 'pileChanged', body: { sequence: undone.sequence } });
    const twice = (await undo(brandt, applicationId).expect(200)).body as PatternUndone;
    expect(twice).toMatchObject({ restored: [], kept: [] });
    // And it can be applied anew: each mark follows the one that was taken back.
    const again = await applied(brandt, 0);
    expect(again.marked).toHaveLength(5);
    expect(marksOf(1)[1]?.replacesId).toBe(marksOf(1)[0]?.id);
  });

  it('leaves what somebody changed since as it is, and what a colleague holds', async () => {
    const { applicationId } = await applied(brandt, 0);
    await take(lead, 1);
    await lead.client
      .post(`/api/answers/${answerId(1)}/marks`)
      .set('If-Match', '"2"')
      .set('Idempotency-Key', newId())
      .send({
        benchId: lead.benchId,
        criteria: built.part.criteria.map(({ id }) => ({ criterionId: id, awarded: true })),
        reason: 'The method is there.',
        takeNext: false,
      })
      .expect(201);
    await take(lead, 2);
    const undone = (await undo(brandt, applicationId).expect(200)).body as PatternUndone;
    expect(codes(undone.kept)).toEqual(['K001', 'K002']);
    expect(rowOf(1)).toMatchObject({ state: 'marked', standingMarkId: marksOf(1)[1]?.id });
    expect(rowOf(2)).toMatchObject({ state: 'marked', version: 2 });
    expect(rowOf(3)).toMatchObject({ state: 'waits' });
  });

  it('is for who applied it, or a lead, while marks are given', async () => {
    const { applicationId } = await applied(brandt, 0);
    await undo(okafor, applicationId).expect(403);
    await undo(brandt, newId()).expect(404);
    harness.db.update(sets).set({ stage: 'released' }).where(eq(sets.id, built.setId)).run();
    await undo(lead, applicationId).expect(409);
    expect(rowOf(1)?.state).toBe('marked');
    harness.db.update(sets).set({ stage: 'marking' }).where(eq(sets.id, built.setId)).run();
    await undo(lead, applicationId).expect(200);
    expect(rowOf(1)?.state).toBe('waits');
  });
});
