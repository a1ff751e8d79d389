import { and, eq } from 'drizzle-orm';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { problemComments, problems, record, reviewDecisions, reviewRequests } from '@drizzle/schema';
import type { Desk } from '@shared/desk';
import type { ProblemDraft } from '@shared/problem-draft';
import type { ProblemDetail } from '@shared/problem-routes';
import type { ProblemComment, ProblemReview } from '@shared/review';
import { policy } from '../access/policy';
import { newId } from '../http/new-id';
import type { Emitted } from '../live/live';
import { problemRoom } from '../live/rooms';
import { buildDraft, buildPart } from '../testing/build-draft';
import { createHarness, testNow, type Harness } from '../testing/harness';

type Agent = Awaited<ReturnType<Harness['agent']>>;

let harness: Harness;
let courseId: string;
let colleagueId: string;
let markerId: string;
let author: Agent;
let colleague: Agent;
let marker: Agent;
let otherMarker: Agent;
let student: Agent;
let facts: Emitted[];

beforeAll(async () => {
  harness = createHarness();
  courseId = harness.makeCourse().id;
  author = await harness.agent(harness.makeMember(courseId, 'lead', { name: 'Mara Lindqvist' }));
  const second = harness.makeMember(harness.makeCourse().id, 'lead', { name: 'Ivo Tarrant' });
  colleagueId = second.id;
  colleague = await harness.agent(second);
  const third = harness.makeMember(courseId, 'marker', { name: 'Oda Brenner' });
  markerId = third.id;
  marker = await harness.agent(third);
  otherMarker = await harness.agent(harness.makeMember(courseId, 'marker', { name: 'Pavel Ruud' }));
  student = await harness.agent(harness.makeMember(courseId, 'student'));
  harness.context.live.observe((fact) => facts.push(fact));
});
beforeEach(() => {
  facts = [];
  harness.clock.set(testNow);
});
afterAll(() => harness.close());

const rowOf = ({ id }: ProblemDetail) => harness.db.select().from(problems).where(eq(problems.id, id)).get();
const commentsOn = ({ id }: ProblemDetail) =>
  harness.db.select().from(problemComments).where(eq(problemComments.problemId, id)).all();
const requestsFor = ({ id }: ProblemDetail) =>
  harness.db.select().from(reviewRequests).where(eq(reviewRequests.problemId, id)).all();
const decisionsOn = ({ id }: ProblemDetail) =>
  harness.db.select().from(reviewDecisions).where(eq(reviewDecisions.problemId, id)).all();
const entryOf = ({ id }: ProblemDetail, action: string) =>
  harness.db
    .select()
    .from(record)
    .where(and(eq(record.action, action), eq(record.thingId, id)))
    .get();

const statement = 'Light of $\\bar n = \\val{nbar}$\nmeets a splitter of $T = \\val{T}$.\n(a) How many photons leave?';
const part = buildPart();
const draft = (overrides: Partial<ProblemDraft> = {}) => buildDraft({ statement, parts: [part], ...overrides });
const tomorrow = testNow + 24 * 3_600_000;
const key = () => ['Idempotency-Key', newId()] as const;
const versioned = ({ version }: { readonly version: number }) => ['If-Match', `"${String(version)}"`] as const;

async function save(problem: ProblemDetail, next: ProblemDraft): Promise<ProblemDetail> {
  const sent = author.put(`/api/problems/${problem.id}/draft`).set(...versioned(problem));
  return (await sent.send(next).expect(200)).body as ProblemDetail;
}

async function revise(problem: ProblemDetail): Promise<ProblemDetail> {
  const sent = author.post(`/api/problems/${problem.id}/revisions`).set(...versioned(problem));
  return (await sent.send({ reason: 'as agreed' }).expect(201)).body as ProblemDetail;
}

const setStatus = (who: Agent, problem: ProblemDetail, status: string) =>
  who
    .put(`/api/problems/${problem.id}/status`)
    .set(...versioned(problem))
    .send({ status });

/** A problem in review, with one revision. */
async function inReview(next = draft()): Promise<ProblemDetail> {
  const begun = (await author.post('/api/problems').send({ courseId, title: 'A splitter' }).expect(201)).body;
  const revised = await revise(await save(begun as ProblemDetail, next));
  return (await setStatus(author, revised, 'in review').expect(200)).body as ProblemDetail;
}

const read = async (who: Agent, { id }: ProblemDetail) =>
  (await who.get(`/api/problems/${id}/review`).expect(200)).body as ProblemReview;
const present = async ({ id }: ProblemDetail) =>
  (await author.get(`/api/problems/${id}`).expect(200)).body as ProblemDetail;

const send = (who: Agent, { id }: ProblemDetail, body: object, [name, value] = key()) =>
  who.post(`/api/problems/${id}/comments`).set(name, value).send(body);
const onLine = (line: number) => ({ kind: 'line', line, text: statement.split('\n')[line - 1] ?? '' });
const comment = async (who: Agent, problem: ProblemDetail, body: object) =>
  (await send(who, problem, body).expect(201)).body as ProblemComment;

const ask = (who: Agent, { id }: ProblemDetail, colleagueIds: readonly string[], dueAt = tomorrow) =>
  who.post(`/api/problems/${id}/review-requests`).send({ colleagueIds, dueAt, note: 'Please look at T.' });
const decide = (who: Agent, { id }: ProblemDetail, kind: string, words = '', revision = 1) =>
  who.post(`/api/problems/${id}/decisions`).send({ revision, kind, words });
const overrule = (who: Agent, { id }: ProblemDetail, reason: string, course = courseId) =>
  who.post(`/api/problems/${id}/overruling`).send({ revision: 1, reason, courseId: course });
const commentPath = ({ id }: ProblemDetail, { id: commentId }: { readonly id: string }) =>
  `/api/problems/${id}/comments/${commentId}`;

describe('who may review', () => {
  it('stands in the policy table', () => {
    expect(policy['review problems']).toEqual(['lead of any course', 'marker of any course']);
    expect(policy['overrule reviews']).toEqual(['lead']);
  });

  it('refuses students, markers who were not asked, and nobody at all', async () => {
    const problem = await inReview();
    const nobody = await harness.agent(null);
    const written = await comment(author, problem, { anchor: { kind: 'problem' }, text: 'x' });
    for (const [who, status, type] of [
      [nobody, 401, '/errors/not-signed-in'],
      [student, 403, '/errors/not-allowed'],
      [otherMarker, 403, '/errors/not-allowed'],
    ] as const) {
      const { body } = await who.get(`/api/problems/${problem.id}/review`).expect(status);
      expect(body).toMatchObject({ type });
      await who.get(`/api/problems/${problem.id}`).expect(status);
      await who.get(`/api/problems/${problem.id}/colleagues`).expect(status);
      await send(who, problem, { anchor: onLine(1), text: 'x' }).expect(status);
      await who
        .post(`${commentPath(problem, written)}/replies`)
        .set(...key())
        .send({ text: 'x' })
        .expect(status);
      await who
        .put(`${commentPath(problem, written)}/settled`)
        .send({ settled: true })
        .expect(status);
      await who
        .post(`${commentPath(problem, written)}/acceptance`)
        .set(...versioned(problem))
        .send({})
        .expect(status);
      await ask(who, problem, [colleagueId]).expect(status);
      await decide(who, problem, 'signed off').expect(status);
      await overrule(who, problem, 'x').expect(status);
    }
    expect(commentsOn(problem)).toHaveLength(1);
    expect(decisionsOn(problem)).toEqual([]);
    expect(requestsFor(problem)).toEqual([]);
  });

  it('keeps a draft to its author, even from a marker who was asked before', async () => {
    const problem = await inReview();
    await ask(author, problem, [markerId]).expect(201);
    await marker.get(`/api/problems/${problem.id}`).expect(200);
    await marker.get(`/api/problems/${problem.id}/audit`).expect(200);
    await marker.get(`/api/problems/${problem.id}/revisions/1`).expect(200);
    await setStatus(author, problem, 'draft').expect(200);
    await colleague.get(`/api/problems/${problem.id}/review`).expect(404);
    await marker.get(`/api/problems/${problem.id}/review`).expect(403);
  });

  it('lets a marker who was asked write no problem', async () => {
    const problem = await inReview();
    await ask(author, problem, [markerId]).expect(201);
    await setStatus(marker, problem, 'ready').expect(403);
    await ask(marker, problem, [colleagueId]).expect(403);
    await overrule(marker, problem, 'x').expect(403);
    await marker
      .put(`/api/problems/${problem.id}/draft`)
      .set(...versioned(problem))
      .send(draft())
      .expect(403);
  });
});

describe('comments', () => {
  it('stand at a line, with who and when, and are told to those who have the problem open', async () => {
    const problem = await inReview();
    const written = await comment(colleague, problem, { anchor: onLine(2), text: ' T may be 0.50. ' });
    expect(written).toMatchObject({
      anchor: onLine(2),
      by: { name: 'Ivo Tarrant' },
      at: testNow,
      text: 'T may be 0.50.',
      settled: null,
      suggestion: null,
      replies: [],
    });
    expect(commentsOn(problem)[0]).toMatchObject({
      byId: colleagueId,
      text: 'T may be 0.50.',
    });
    expect(facts).toContainEqual({
      rooms: [problemRoom(problem.id)],
      event: 'reviewChanged',
      body: { problemId: problem.id },
    });
    expect((await read(author, problem)).comments).toEqual([written]);
  });

  it('may be about a part, a key or a criterion that is there', async () => {
    const problem = await inReview();
    const criterionId = part.criteria[0]?.id;
    for (const anchor of [
      { kind: 'part', partId: part.id },
      { kind: 'key', partId: part.id },
      { kind: 'criterion', partId: part.id, criterionId },
    ])
      expect((await comment(author, problem, { anchor, text: 'x' })).anchor).toEqual(anchor);
    const gone = await send(author, problem, { anchor: { kind: 'key', partId: newId() }, text: 'x' }).expect(400);
    expect(gone.body).toMatchObject({ type: '/errors/invalid-input', fields: [{ path: ['anchor', 'partId'] }] });
    const criterion = { kind: 'criterion', partId: part.id, criterionId: newId() };
    await send(author, problem, { anchor: criterion, text: 'x' }).expect(400);
    const empty = await send(author, problem, { anchor: onLine(1), text: ' ' }).expect(400);
    expect(empty.body).toMatchObject({ fields: [{ path: ['text'] }] });
  });

  it('happen once however often they are sent', async () => {
    const problem = await inReview();
    const once = key();
    const first = await send(author, problem, { anchor: onLine(1), text: 'x' }, [...once]).expect(201);
    const second = await send(author, problem, { anchor: onLine(1), text: 'x' }, [...once]).expect(201);
    expect(second.body).toEqual(first.body);
    expect(commentsOn(problem)).toHaveLength(1);
  });

  it('are answered, settled and opened again', async () => {
    const problem = await inReview();
    const written = await comment(colleague, problem, { anchor: onLine(2), text: 'T may be 0.50.' });
    harness.clock.advance(60_000);
    await author
      .post(`${commentPath(problem, written)}/replies`)
      .set(...key())
      .send({ text: 'Agreed.' })
      .expect(201);
    const settle = (settled: boolean) => author.put(`${commentPath(problem, written)}/settled`).send({ settled });
    expect((await settle(true).expect(200)).body).toMatchObject({
      settled: { by: { name: 'Mara Lindqvist' }, at: testNow + 60_000 },
      replies: [{ text: 'Agreed.', by: { name: 'Mara Lindqvist' } }],
    });
    expect((await settle(false).expect(200)).body).toMatchObject({ settled: null });
    await author.put(`/api/problems/${problem.id}/comments/${newId()}/settled`).send({ settled: true }).expect(404);
    const other = await inReview();
    await author
      .post(`${commentPath(other, written)}/replies`)
      .set(...key())
      .send({ text: 'x' })
      .expect(404);
  });

  it('are settled by an asked marker where they are their own only', async () => {
    const problem = await inReview();
    await ask(author, problem, [markerId]).expect(201);
    const own = await comment(marker, problem, { anchor: onLine(1), text: 'mine' });
    const others = await comment(author, problem, { anchor: onLine(1), text: 'not mine' });
    await marker
      .put(`${commentPath(problem, own)}/settled`)
      .send({ settled: true })
      .expect(200);
    await marker
      .put(`${commentPath(problem, others)}/settled`)
      .send({ settled: true })
      .expect(403);
  });

  it('follow their line when the draft is saved', async () => {
    const problem = await inReview();
    await comment(colleague, problem, { anchor: onLine(3), text: 'Which photons?' });
    const moved = await save(problem, draft({ statement: `A line before.\n${statement}` }));
    expect((await read(author, problem)).comments[0]?.anchor).toEqual({ ...onLine(3), line: 4 });
    await save(moved, draft({ statement: statement.replace('How many', 'On average, how many') }));
    expect((await read(author, problem)).comments[0]?.anchor).toEqual(onLine(3));
  });
});

describe('suggested wording', () => {
  const accept = (problem: ProblemDetail, written: ProblemComment) =>
    author
      .post(`${commentPath(problem, written)}/acceptance`)
      .set(...versioned(problem))
      .send({});

  it('goes into the draft with one act, which settles the comment', async () => {
    const problem = await inReview();
    const wording = '(a) How many photons leave at output 2\non average?';
    const written = await comment(colleague, problem, { anchor: onLine(3), wording });
    expect(written.suggestion).toEqual({ wording, instead: onLine(3).text, accepted: null });
    const { body } = await accept(problem, written).expect(200);
    const lines = statement.split('\n');
    expect(body).toMatchObject({
      version: problem.version + 1,
      draft: { statement: [...lines.slice(0, 2), wording].join('\n') },
    });
    const [after] = (await read(author, problem)).comments;
    expect(after).toMatchObject({
      suggestion: { accepted: { by: { name: 'Mara Lindqvist' }, at: testNow } },
      settled: { by: { name: 'Mara Lindqvist' } },
    });
    const entry = entryOf(problem, 'wording accepted');
    expect(entry).toMatchObject({ before: onLine(3).text, after: wording });
    await accept(body as ProblemDetail, written).expect(409);
  });

  it('takes the place of a part’s lines', async () => {
    const problem = await inReview();
    const anchor = { kind: 'part', partId: part.id };
    const written = await comment(colleague, problem, { anchor, wording: '(a) Which mean?' });
    const { body } = await accept(problem, written).expect(200);
    expect((body as ProblemDetail).draft.statement.split('\n').at(-1)).toBe('(a) Which mean?');
  });

  it('is not put where the text has changed, nor over a draft that was saved meanwhile', async () => {
    const problem = await inReview();
    const written = await comment(colleague, problem, { anchor: onLine(3), wording: '(a) Which mean?' });
    const saved = await save(problem, draft({ statement: statement.replace('leave', 'go') }));
    expect((await accept(problem, written).expect(412)).body).toMatchObject({ type: '/errors/stale' });
    const { body } = await accept(saved, written).expect(409);
    expect(body.detail).toContain('has changed since');
    expect((await present(problem)).draft.statement).toContain('go?');
  });

  it('is for lines and parts', async () => {
    const problem = await inReview();
    const { body } = await send(author, problem, { anchor: { kind: 'key', partId: part.id }, wording: 'T' }).expect(
      400,
    );
    expect(body).toMatchObject({ fields: [{ path: ['wording'] }] });
    await send(author, problem, { anchor: onLine(1), wording: onLine(1).text }).expect(400);
  });
});

describe('asking for review', () => {
  it('names colleagues and a date, makes a draft visible, and tells them at their desk', async () => {
    const begun = (await author.post('/api/problems').send({ courseId, title: 'A splitter' })).body as ProblemDetail;
    const saved = await save(begun, draft());
    expect((await ask(author, saved, [markerId]).expect(409)).body.detail).toContain('Save a revision first');
    const problem = await revise(saved);
    const { body } = await ask(author, problem, [markerId]).expect(201);
    expect((body as ProblemReview).requests).toMatchObject([
      { colleague: { name: 'Oda Brenner' }, askedBy: { name: 'Mara Lindqvist' }, dueAt: tomorrow, answeredAt: null },
    ]);
    expect(rowOf(problem)?.status).toBe('in review');
    const needs = async () =>
      ((await marker.get(`/api/courses/${courseId}/desk`).expect(200)).body as Desk).needs.filter(
        ({ act }) => act.id === problem.id,
      );
    expect(await needs()).toMatchObject([
      { due: tomorrow, title: '“A splitter” waits for your review', act: { page: 'problem', id: problem.id } },
    ]);
    await decide(marker, problem, 'signed off').expect(201);
    expect(await needs()).toEqual([]);
    expect(requestsFor(problem)[0]?.answeredAt).toBe(testNow);
  });

  it('changes the date of one who is waited for already', async () => {
    const problem = await inReview();
    await ask(author, problem, [colleagueId]).expect(201);
    await ask(author, problem, [colleagueId], tomorrow + 5).expect(201);
    expect(requestsFor(problem)).toMatchObject([{ dueAt: tomorrow + 5 }]);
  });

  it('offers leads and one’s own markers, never a student or oneself', async () => {
    const problem = await inReview();
    const { body } = await author.get(`/api/problems/${problem.id}/colleagues`).expect(200);
    expect(body.items.map((each: { name: string }) => each.name)).toEqual(['Ivo Tarrant', 'Oda Brenner', 'Pavel Ruud']);
    const wrong = await ask(author, problem, [newId()]).expect(400);
    expect(wrong.body).toMatchObject({ fields: [{ path: ['colleagueIds', 0] }] });
    const past = await ask(author, problem, [colleagueId], testNow).expect(400);
    expect(past.body).toMatchObject({ fields: [{ path: ['dueAt'] }] });
    expect(requestsFor(problem)).toEqual([]);
  });
});

describe('sign-off', () => {
  it('is another person’s than the revision’s author', async () => {
    const problem = await inReview();
    const { body } = await decide(author, problem, 'signed off').expect(403);
    expect(body).toMatchObject({ type: '/errors/not-allowed' });
    expect(await read(author, problem)).toMatchObject({ mayDecide: false, standing: { state: 'needed' } });
    await decide(colleague, problem, 'signed off', '', 2).expect(409);
    expect(decisionsOn(problem)).toEqual([]);
  });

  it('makes a problem usable, and stands in the record', async () => {
    const problem = await inReview();
    const refused = await setStatus(author, problem, 'ready').expect(409);
    expect(refused.body).toMatchObject({ type: '/errors/conflict' });
    expect(refused.body.detail).toContain('Nobody has signed off revision 1 yet.');
    const { body } = await decide(colleague, problem, 'signed off').expect(201);
    expect((body as ProblemReview).standing).toMatchObject({
      state: 'signed off',
      sentence: 'Ivo Tarrant signed off revision 1.',
    });
    await setStatus(author, problem, 'ready').expect(200);
    expect(rowOf(problem)?.status).toBe('ready');
    const entry = entryOf(problem, 'revision signed off');
    expect(entry).toMatchObject({ actorId: colleagueId, thingId: problem.id });
  });

  it('gives way to changes that are asked, in words', async () => {
    const problem = await inReview();
    await decide(marker, problem, 'changes asked', 'x').expect(403);
    await ask(author, problem, [markerId]).expect(201);
    await decide(marker, problem, 'changes asked').expect(400);
    await decide(marker, problem, 'changes asked', 'Say what leaves.').expect(201);
    await decide(colleague, problem, 'signed off').expect(201);
    const { standing, decisions } = await read(author, problem);
    expect(standing).toMatchObject({ state: 'changes asked', sentence: 'Oda Brenner asks for changes to revision 1.' });
    expect(decisions.map(({ kind, words }) => [kind, words])).toEqual([
      ['signed off', ''],
      ['changes asked', 'Say what leaves.'],
    ]);
    await setStatus(author, problem, 'ready').expect(409);
    await decide(marker, problem, 'signed off').expect(201);
    await setStatus(author, problem, 'ready').expect(200);
  });

  it('outlives a change of wording', async () => {
    const problem = await inReview();
    await decide(colleague, problem, 'signed off').expect(201);
    const ready = (await setStatus(author, problem, 'ready').expect(200)).body as ProblemDetail;
    const wording = statement.replace('How many photons leave', 'How many photons leave on average');
    const revised = await revise(await save(ready, draft({ statement: wording, title: 'A beam splitter' })));
    expect(revised.status).toBe('ready');
    expect((await read(author, problem)).standing).toMatchObject({
      state: 'signed off',
      sentence: 'Ivo Tarrant signed off revision 1. Only wording has changed since.',
    });
  });

  const answer = part.answer;
  const criterion = part.criteria[0]!;
  it.each<[string, Partial<ProblemDraft>]>([
    ['the key of (a)', { parts: [{ ...part, answer: { ...answer, key: '(1 - T)*nbar + 0' } }] }],
    [
      'the tolerance of (a)',
      { parts: [{ ...part, answer: { ...answer, tolerance: { ...answer.tolerance, relative: '3%' } } }] },
    ],
    ['the slips of (a)', { parts: [{ ...part, answer: { ...answer, slips: [] } }] }],
    ['the mark scheme of (a)', { parts: [{ ...part, criteria: [{ ...criterion, marks: '2' }] }] }],
    [
      'the givens',
      { givens: draft().givens.map((given) => (given.name === 'T' ? { ...given, values: '0.35; 0.70' } : given)) },
    ],
    ['the givens', { statement: statement.replace(' of $T = \\val{T}$', '') }],
  ])('is void once %s changed, and the problem goes back to review', async (what, change) => {
    const problem = await inReview();
    await decide(colleague, problem, 'signed off').expect(201);
    const ready = (await setStatus(author, problem, 'ready').expect(200)).body as ProblemDetail;
    const revised = await revise(await save(ready, draft(change)));
    expect(revised.status).toBe('in review');
    const { standing } = await read(author, problem);
    expect(standing).toMatchObject({ state: 'void', lastRevision: 1, changed: [what] });
    expect(standing.sentence).toContain('changed since, so a fresh sign-off is needed.');
    await setStatus(author, revised, 'ready').expect(409);
    await decide(colleague, problem, 'signed off', '', 2).expect(201);
    await setStatus(author, revised, 'ready').expect(200);
  });
});

describe('overruling', () => {
  it('lets a lead go on alone, with a reason that enters the record of the course', async () => {
    const problem = await inReview();
    await overrule(author, problem, ' ').expect(400);
    await overrule(author, problem, 'x', harness.makeCourse().id).expect(403);
    const { body } = await overrule(author, problem, 'No colleague this term.').expect(201);
    expect((body as ProblemReview).standing).toMatchObject({
      state: 'overruled',
      sentence: 'Mara Lindqvist let revision 1 be used without a sign-off.',
    });
    await setStatus(author, problem, 'ready').expect(200);
    const { body: entries } = await author.get(`/api/courses/${courseId}/record`).expect(200);
    expect(entries.items).toContainEqual(
      expect.objectContaining({ action: 'sign-off overruled', reason: 'No colleague this term.' }),
    );
    await overrule(author, problem, 'again').expect(409);
    expect(decisionsOn(problem)).toHaveLength(1);
  });

  it('settles changes that were asked before it, not after it', async () => {
    const problem = await inReview();
    await decide(colleague, problem, 'changes asked', 'Not yet.').expect(201);
    await overrule(author, problem, 'It is right as it is.').expect(201);
    expect((await read(author, problem)).standing.state).toBe('overruled');
    await decide(colleague, problem, 'changes asked', 'Still not.').expect(201);
    expect((await read(author, problem)).standing.state).toBe('changes asked');
  });

  it('is a decision that cannot be taken out of the table', async () => {
    const problem = await inReview();
    await overrule(author, problem, 'Alone.').expect(201);
    expect(() => harness.db.delete(reviewDecisions).run()).toThrow(/append-only/);
    expect(() => harness.db.update(reviewDecisions).set({ words: '' }).run()).toThrow(/append-only/);
  });
});
