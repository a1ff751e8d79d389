import { eq } from 'drizzle-orm';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { audits, jobs, problems } from '@drizzle/schema';
import type { AuditState } from '@shared/audit';
import type { ProblemDraft } from '@shared/problem-draft';
import type { ProblemDetail } from '@shared/problem-routes';
import { workJobs } from '../jobs/work-jobs';
import { buildDraft, buildPart } from '../testing/build-draft';
import { createHarness, type Harness } from '../testing/harness';

let harness: Harness;
let courseId: string;
let lead: Awaited<ReturnType<Harness['agent']>>;

beforeEach(async () => {
  harness = createHarness();
  courseId = harness.makeCourse().id;
  lead = await harness.agent(harness.makeMember(courseId, 'lead'));
});
afterEach(() => harness.close());

async function begin(overrides: Partial<ProblemDraft> = {}): Promise<ProblemDetail> {
  const begun = (await lead.post('/api/problems').send({ courseId, title: 'A splitter' }).expect(201))
    .body as ProblemDetail;
  const saved = await lead
    .put(`/api/problems/${begun.id}/draft`)
    .set('If-Match', `"${String(begun.version)}"`)
    .send(buildDraft(overrides))
    .expect(200);
  return saved.body as ProblemDetail;
}

async function revise(problem: ProblemDetail): Promise<ProblemDetail> {
  const { body } = await lead
    .post(`/api/problems/${problem.id}/revisions`)
    .set('If-Match', `"${String(problem.version)}"`)
    .send({ reason: 'first' })
    .expect(201);
  return body as ProblemDetail;
}

const makeReady = (problem: ProblemDetail) =>
  lead
    .put(`/api/problems/${problem.id}/status`)
    .set('If-Match', `"${String(problem.version)}"`)
    .send({ status: 'ready' });

/** T = 1/2 makes the slip equal to the key. */
const meeting = () => {
  const [nbar, T] = buildDraft().givens;
  return { givens: [nbar!, { ...T!, values: '0.35; 0.50; 0.85' }] };
};

const stateOf = async (problem: ProblemDetail) =>
  (await lead.get(`/api/problems/${problem.id}/audit`).expect(200)).body as AuditState;

describe('the audit of a draft', () => {
  it('is begun, runs as a job, and is kept with what it found', async () => {
    const problem = await begin(meeting());
    expect(await stateOf(problem)).toEqual({ audit: null, job: null, obstacle: null });
    const { body } = await lead.post(`/api/problems/${problem.id}/audit`).send({}).expect(200);
    expect((body as AuditState).job?.kind).toBe('key audit');
    await workJobs(harness.context);
    const { audit, job } = await stateOf(problem);
    expect(job).toBeNull();
    expect(audit?.variants).toBe(39);
    expect(audit?.findings[0]).toMatchObject({ kind: 'slip equals key', grade: 'stops use', part: 0, count: 13 });
    expect(harness.db.select().from(audits).all()).toHaveLength(1);
    expect(harness.db.select().from(jobs).get()).toMatchObject({ state: 'done', done: 39, total: 39 });
  });

  it('is of exactly what is written: a change makes it another one', async () => {
    const problem = await begin();
    await lead.post(`/api/problems/${problem.id}/audit`).send({}).expect(200);
    await workJobs(harness.context);
    expect((await stateOf(problem)).audit).not.toBeNull();
    harness.db
      .update(problems)
      .set({ draft: { ...problem.draft, title: 'Another name', tags: 'splitters, light' } })
      .where(eq(problems.id, problem.id))
      .run();
    expect((await stateOf(problem)).audit).not.toBeNull();
    const parts = [buildPart({ key: '(1 - T)*nbar*1.01' })];
    harness.db
      .update(problems)
      .set({ draft: { ...problem.draft, parts } })
      .where(eq(problems.id, problem.id))
      .run();
    expect((await stateOf(problem)).audit).toBeNull();
  });

  it('takes a draft that is not saved, and runs once for two wishes', async () => {
    const problem = await begin();
    const draft = buildDraft(meeting());
    await lead.post(`/api/problems/${problem.id}/audit`).send({ draft }).expect(200);
    await lead.post(`/api/problems/${problem.id}/audit`).send({ draft }).expect(200);
    expect(harness.db.select().from(jobs).all()).toHaveLength(1);
    await workJobs(harness.context);
  });

  it('says what stands in its way', async () => {
    const problem = await begin({ parts: [buildPart({ key: '' })] });
    expect((await stateOf(problem)).obstacle).toContain('left to mend');
    const { body } = await lead.post(`/api/problems/${problem.id}/audit`).send({}).expect(400);
    expect(body).toMatchObject({ type: '/errors/invalid-input' });
  });
});

describe('making a problem ready', () => {
  it('audits the revision first', async () => {
    const problem = await revise(await begin());
    const overruling = { revision: 1, reason: 'No colleague this term.', courseId };
    await lead.post(`/api/problems/${problem.id}/overruling`).send(overruling).expect(201);
    const { body } = await makeReady(problem).expect(200);
    expect(body).toMatchObject({ status: 'ready' });
    expect(harness.db.select().from(audits).all()).toHaveLength(1);
  });

  it('is refused in a sentence while something found stops use', async () => {
    const problem = await revise(await begin(meeting()));
    const { body } = await makeReady(problem).expect(409);
    const { detail, type } = body as { detail: string; type: string };
    expect(type).toBe('/errors/conflict');
    expect(detail).toContain('The slip “T for R” of (a) equals the key in 13 of 39 variants');
    expect(harness.db.select().from(problems).get()).toMatchObject({ status: 'draft' });
    // The findings are kept: a second wish draws nothing anew.
    await makeReady(problem).expect(409);
    expect(harness.db.select().from(audits).all()).toHaveLength(1);
  });
});

describe('the routes of audits', () => {
  it('answer leads alone, and know no other person’s draft', async () => {
    const problem = await begin();
    const other = harness.makeCourse().id;
    for (const [person, status] of [
      [harness.makeMember(courseId, 'marker'), 403],
      [harness.makeMember(courseId, 'student'), 403],
      [harness.makeMember(other, 'lead'), 404],
      [null, 401],
    ] as const) {
      const client = await harness.agent(person);
      await client.get(`/api/problems/${problem.id}/audit`).expect(status);
      await client.post(`/api/problems/${problem.id}/audit`).send({}).expect(status);
    }
    expect(harness.db.select().from(jobs).all()).toEqual([]);
  });
});
