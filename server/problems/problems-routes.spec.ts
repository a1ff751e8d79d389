import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { problems, record, revisions } from '@drizzle/schema';
import { emptySlip, type DraftAnswer } from '@shared/problem-draft';
import type { ProblemDetail } from '@shared/problem-routes';
import { defaultConvention } from '@shared/primitives';
import { buildDraft, buildPart } from '../testing/build-draft';
import { createHarness, type Harness } from '../testing/harness';

let harness: Harness;
let courseId: string;
let lead: Awaited<ReturnType<Harness['agent']>>;
let colleague: Awaited<ReturnType<Harness['agent']>>;
let marker: Awaited<ReturnType<Harness['agent']>>;
let student: Awaited<ReturnType<Harness['agent']>>;

beforeAll(async () => {
  harness = createHarness();
  courseId = harness.makeCourse({ vacuumVariance: 0.25 }).id;
  lead = await harness.agent(harness.makeMember(courseId, 'lead', { name: 'Mara Lindqvist' }));
  colleague = await harness.agent(harness.makeMember(harness.makeCourse().id, 'lead', { name: 'Ivo Tarrant' }));
  marker = await harness.agent(harness.makeMember(courseId, 'marker'));
  student = await harness.agent(harness.makeMember(courseId, 'student'));
});
afterAll(() => harness.close());

async function begin(title = 'A splitter'): Promise<ProblemDetail> {
  const { body } = await lead.post('/api/problems').send({ courseId, title }).expect(201);
  return body as ProblemDetail;
}

async function save(problem: ProblemDetail, draft = buildDraft()): Promise<ProblemDetail> {
  const { body } = await lead
    .put(`/api/problems/${problem.id}/draft`)
    .set('If-Match', `"${String(problem.version)}"`)
    .send(draft)
    .expect(200);
  return body as ProblemDetail;
}

async function revise(problem: ProblemDetail, reason = 'first'): Promise<ProblemDetail> {
  const { body } = await lead
    .post(`/api/problems/${problem.id}/revisions`)
    .set('If-Match', `"${String(problem.version)}"`)
    .send({ reason })
    .expect(201);
  return body as ProblemDetail;
}

const setStatus = (who: typeof lead, problem: ProblemDetail, status: string) =>
  who
    .put(`/api/problems/${problem.id}/status`)
    .set('If-Match', `"${String(problem.version)}"`)
    .send({ status });

const rowOf = (problem: ProblemDetail) => harness.db.select().from(problems).where(eq(problems.id, problem.id)).get();

describe('who may see problems', () => {
  it('asks to sign in', async () => {
    const nobody = await harness.agent(null);
    const { body } = await nobody.get('/api/problems').expect(401);
    expect(body).toMatchObject({ type: '/errors/not-signed-in' });
  });

  it('refuses markers and students on every route', async () => {
    const problem = await begin();
    for (const person of [marker, student]) {
      for (const path of ['', `/${problem.id}`, `/${problem.id}/revisions`, `/${problem.id}/file`]) {
        const { body } = await person.get(`/api/problems${path}`).expect(403);
        expect(body).toMatchObject({ type: '/errors/not-allowed' });
      }
      await person.post('/api/problems').send({ courseId, title: 'x' }).expect(403);
      await person.put(`/api/problems/${problem.id}/draft`).set('If-Match', '"1"').send(buildDraft()).expect(403);
      await person
        .post(`/api/problems/${problem.id}/revisions`)
        .set('If-Match', '"1"')
        .send({ reason: 'x' })
        .expect(403);
      await setStatus(person, problem, 'retired').expect(403);
    }
    await student.get('/api/key-language').expect(403);
    await student.post('/api/problems/sample').send({ draft: buildDraft() }).expect(403);
    expect(rowOf(problem)?.version).toBe(1);
  });

  it('keeps a draft to its author, and shows the rest to the team', async () => {
    const problem = await save(await begin('Hidden until review'));
    await colleague.get(`/api/problems/${problem.id}`).expect(404);
    await colleague.post(`/api/problems/${problem.id}/copies`).expect(404);
    await setStatus(colleague, problem, 'retired').expect(404);
    const before = await colleague.get('/api/problems').query({ search: 'Hidden until' }).expect(200);
    expect(before.body).toEqual({ items: [], total: 0 });

    await setStatus(lead, await revise(problem), 'in review').expect(200);
    const { body } = await colleague.get(`/api/problems/${problem.id}`).expect(200);
    expect(body).toMatchObject({ mine: false, author: 'Mara Lindqvist', nextStatuses: ['ready', 'retired'] });
  });
});

describe('beginning a problem', () => {
  it('takes the course’s convention and enters the record', async () => {
    const problem = await begin('Fresh');
    expect(problem).toMatchObject({ title: 'Fresh', status: 'draft', mine: true, version: 1, latestRevision: null });
    expect(problem.draft.convention.vacuumVariance).toBe(0.25);
    const entry = harness.db.select().from(record).where(eq(record.thingId, problem.id)).get();
    expect(entry).toMatchObject({ action: 'problem begun', thing: 'problem' });
  });

  it('asks for a title, and for a course that one leads', async () => {
    const { body } = await lead.post('/api/problems').send({ courseId, title: ' ' }).expect(400);
    expect(body).toMatchObject({ type: '/errors/invalid-input', fields: [{ path: ['title'] }] });
    await colleague.post('/api/problems').send({ courseId, title: 'x' }).expect(403);
  });
});

describe('saving a draft', () => {
  it('keeps it exactly as it is typed, wrong or not', async () => {
    const draft = buildDraft({ title: '', statement: '$\\val{', parts: [buildPart({ key: '(((' })] });
    const saved = await save(await begin(), draft);
    expect(saved).toMatchObject({ version: 2, draft, changed: true, savedAt: harness.clock.now() });
    expect(rowOf(saved)?.draft).toEqual(draft);
  });

  it('demands the version, and answers a stale one with the current state', async () => {
    const problem = await begin();
    await lead.put(`/api/problems/${problem.id}/draft`).send(buildDraft()).expect(428);
    await save(problem, buildDraft({ title: 'Theirs' }));
    const { body } = await lead
      .put(`/api/problems/${problem.id}/draft`)
      .set('If-Match', '"1"')
      .send(buildDraft({ title: 'Mine' }))
      .expect(412);
    expect(body).toMatchObject({ type: '/errors/stale', current: { version: 2, draft: { title: 'Theirs' } } });
    expect(rowOf(problem)).toMatchObject({ version: 2, draft: { title: 'Theirs' } });
  });

  it('refuses what is no draft, by field', async () => {
    const problem = await begin();
    const { body } = await lead
      .put(`/api/problems/${problem.id}/draft`)
      .set('If-Match', '"1"')
      .send({ ...buildDraft(), statement: 'x'.repeat(60_001) })
      .expect(400);
    expect(body).toMatchObject({ fields: [{ path: ['statement'], message: 'At most 60,000 characters.' }] });
    await lead.put(`/api/problems/${problem.id}/draft`).set('If-Match', '"1"').send({}).expect(400);
  });

  it('knows nothing of a problem that is not there', async () => {
    await lead.get('/api/problems/8f9c1b6e-0a1d-4a67-9c11-0d3a2c7b5e10').expect(404);
    await lead.get('/api/problems/nonsense').expect(400);
  });
});

describe('the list', () => {
  beforeEach(() => harness.clock.advance(1000));

  it('finds words in title, tags, statement and author, newest change first', async () => {
    const first = await save(await begin(), buildDraft({ title: 'Quokka one', tags: 'marsupials' }));
    harness.clock.advance(1000);
    const second = await save(await begin(), buildDraft({ title: 'Two', statement: 'A QUOKKA.' }));
    const find = async (search: string) =>
      ((await lead.get('/api/problems').query({ search }).expect(200)).body as { items: ProblemDetail[] }).items.map(
        (item) => item.id,
      );
    expect(await find('quokka')).toEqual([second.id, first.id]);
    expect(await find('quokka MARSUPIALS')).toEqual([first.id]);
    expect(await find('quokka lindqvist')).toEqual([second.id, first.id]);
    expect(await find('quokka 100%_')).toEqual([]);
  });

  it('filters by state, and pages', async () => {
    const retired = await save(await begin(), buildDraft({ title: 'Wombat' }));
    await setStatus(lead, retired, 'retired').expect(200);
    const { body } = await lead.get('/api/problems').query({ search: 'wombat', status: 'retired' }).expect(200);
    expect(body).toMatchObject({ total: 1, items: [{ title: 'Wombat', marks: 1, parts: 1, tags: ['splitters'] }] });
    expect((await lead.get('/api/problems').query({ search: 'wombat', page: 2 })).body).toEqual({
      items: [],
      total: 1,
    });
    await lead.get('/api/problems').query({ status: 'lost' }).expect(400);
  });
});

describe('samples', () => {
  it('draws variants with their keys and slips, the shown one among them', async () => {
    const { body } = await lead.post('/api/problems/sample').send({ draft: buildDraft(), shown: 20 }).expect(200);
    expect(body.count).toBe(39);
    expect(body.faults).toEqual([]);
    expect(body.variants).toHaveLength(5);
    const shown = body.variants.find((variant: { number: number }) => variant.number === 20);
    const { nbar, T } = shown.givens;
    expect(shown.parts[0].key.value).toBeCloseTo((1 - T.value) * nbar.value, 12);
    expect(shown.parts[0].slips[0].value).toBeCloseTo(T.value * nbar.value, 12);
    expect(T.printed).toMatch(/^0\.\d\d$/);
  });

  it('gives the values of earlier parts to later ones', async () => {
    const draft = buildDraft({ parts: [buildPart(), buildPart({ key: '2*part_a', slips: [] })] });
    const { body } = await lead.post('/api/problems/sample').send({ draft }).expect(200);
    for (const { parts } of body.variants) expect(parts[1].key.value).toBeCloseTo(2 * parts[0].key.value, 12);
  });

  it('names the place of a wrong expression, and evaluates the rest', async () => {
    const draft = buildDraft({
      title: '',
      parts: [buildPart({ key: 'nbar*(1 - ' }), buildPart({ key: 'nbar + lambda' })],
    });
    const { body } = await lead.post('/api/problems/sample').send({ draft }).expect(200);
    const [first, second] = body.variants[0].parts;
    expect(first.key.fault).toMatchObject({ message: expect.any(String), position: expect.any(Number) });
    expect(second.key.fault).toMatchObject({ message: expect.stringContaining('lambda'), position: 7 });
    expect(first.slips[0].value).toBeGreaterThan(0);
    expect(body.faults.map((fault: { path: string[] }) => fault.path[0])).toContain('title');
  });

  it('rounds derived givens as they print, and computes keys with what is printed', async () => {
    const draft = buildDraft();
    draft.givens.push({
      ...draft.givens[0]!,
      name: 'R',
      kind: 'derived',
      expression: 'nbar/3',
      significantFigures: '2',
    });
    draft.parts = [buildPart({ key: 'R', slips: [] })];
    const { body } = await lead.post('/api/problems/sample').send({ draft }).expect(200);
    for (const { givens, parts } of body.variants) {
      expect(givens.R.printed).toMatch(/^\d\.\d{1,2}$/);
      expect(parts[0].key.value).toBe(Number(givens.R.printed));
    }
  });

  it('derives givens with units, printed in their own', async () => {
    const draft = buildDraft();
    const given = { ...draft.givens[0]!, kind: 'derived' as const, significantFigures: '3' };
    draft.givens.push(
      { ...given, name: 'kappa', kind: 'fixed', value: '3', unit: 'MHz' },
      { ...given, name: 'tau', expression: '1/kappa', unit: 'us' },
      { ...given, name: 'bare', expression: '2*kappa', unit: '' },
      { ...given, name: 'wrong', expression: '2*kappa', unit: 'm' },
    );
    draft.parts = [buildPart({ key: 'kappa*tau', slips: [] })];
    const { body } = await lead.post('/api/problems/sample').send({ draft }).expect(200);
    expect(body.variants[0].givens.tau).toEqual({ value: 0.333, printed: '0.333', unit: 'us' });
    expect(body.variants[0].parts[0].key.value).toBeCloseTo(0.999, 12);
    const faults = body.faults.filter((fault: { path: unknown[] }) => fault.path[0] === 'givens');
    expect(faults.map((fault: { path: unknown[] }) => fault.path[1])).toEqual([4, 5]);
    expect(faults[0].message).toContain('name the unit');
    expect(faults[1].message).toContain('which is no m');
  });

  it('names givens that are derived in a circle', async () => {
    const draft = buildDraft();
    const derived = { ...draft.givens[0]!, kind: 'derived' as const };
    draft.givens.push({ ...derived, name: 'p', expression: 'q + 1' }, { ...derived, name: 'q', expression: 'p - 1' });
    const { body } = await lead.post('/api/problems/sample').send({ draft }).expect(200);
    expect(body.faults).toContainEqual({
      path: ['givens', 2, 'expression'],
      message: 'These givens are derived from each other in a circle: p → q → p.',
    });
  });

  it('shows states in Dirac notation, formulas typeset with a value, lists as they are', async () => {
    const tolerance = { relative: '1%', absolute: '', significantFigures: '', totalVariation: '2%' };
    const variable = { name: 't', low: '0', high: '2', integers: false, symbol: '', spellings: '' };
    const turned = { ...emptySlip(), expression: 'ket(0, 1) - i*ket(1, 0)', feedback: 'x' };
    const swapped = { ...emptySlip(), expression: 'ket(1, 0) - i*ket(0, 1)', feedback: 'x' };
    const answers: Partial<DraftAnswer>[] = [
      { form: 'state', minimumFidelity: '0.99', key: '(ket(1, 0) + i*ket(0, 1))/sqrt(2)', slips: [turned, swapped] },
      { form: 'formula', variables: [variable], key: 'nbar*exp(-t)', slips: [] },
      { form: 'distribution', tolerance, key: 'photonDistribution(coherent(sqrt(nbar)), 3)', slips: [] },
    ];
    const statement = '$\\val{nbar}$, $\\val{T}$\n(a) One.\n(b) Two.\n(c) Three.';
    const draft = buildDraft({ statement, parts: answers.map((answer) => buildPart(answer)) });
    const { body } = await lead.post('/api/problems/sample').send({ draft, shown: 1 }).expect(200);
    expect(body.faults).toEqual([]);
    const [state, formula, distribution] = body.variants[0].parts.map((part: { key: unknown }) => part.key);
    expect(state).toMatchObject({ value: '0.7071i |0,1⟩ + 0.7071 |1,0⟩', method: 'number basis' });
    expect(state.typeset).toContain('|1,0\\rangle');
    expect(state).not.toHaveProperty('compared');
    // A global phase is no difference.
    const slips = body.variants[0].parts[0].slips.map((slip: { passes: boolean }) => slip.passes);
    expect(slips).toEqual([true, false]);
    // nbar = 2.0 is printed, t stays a variable.
    expect(formula.typeset).toMatch(/^\{2\.0\}\\cdot ?\\exp\\left\(- t\\right\)$/);
    expect(formula.example).toMatch(/^\d\.\d+ at t = \d\.\d+$/);
    expect(distribution.value).toHaveLength(4);
    const problem = await save(await begin('Forms'), draft);
    await revise(problem);
  });

  it('bounds how much is asked for at once', async () => {
    await lead.post('/api/problems/sample').send({ draft: buildDraft(), count: 13 }).expect(400);
  });
});

describe('revisions', () => {
  it('freeze the content, are numbered, and are listed newest first', async () => {
    const first = await revise(await save(await begin()));
    expect(first).toMatchObject({ latestRevision: { number: 1, reason: 'first' }, changed: false });
    const second = await revise(await save(first, buildDraft({ title: 'A better splitter' })), 'new title');
    expect(second.latestRevision).toMatchObject({ number: 2, author: 'Mara Lindqvist' });

    const { body } = await lead.get(`/api/problems/${first.id}/revisions`).expect(200);
    expect(body).toMatchObject({ total: 2, items: [{ number: 2, reason: 'new title' }, { number: 1 }] });
    const one = await lead.get(`/api/problems/${first.id}/revisions/1`).expect(200);
    expect(one.body.content).toMatchObject({ title: 'A splitter', givens: [{ kind: 'uniform', low: 2 }, {}] });
    await lead.get(`/api/problems/${first.id}/revisions/3`).expect(404);
    const entries = harness.db.select().from(record).where(eq(record.thingId, first.id)).all();
    expect(entries.map((entry) => entry.action)).toEqual(['problem begun', 'revision made', 'revision made']);
  });

  it('are refused while a field is wrong, by path; the draft stays', async () => {
    const draft = buildDraft({ statement: '(a) One.', parts: [{ ...buildPart(), criteria: [] }] });
    const problem = await save(await begin(), draft);
    const { body } = await lead
      .post(`/api/problems/${problem.id}/revisions`)
      .set('If-Match', '"2"')
      .send({ reason: 'try' })
      .expect(400);
    expect(body).toMatchObject({ type: '/errors/invalid-input', fields: [{ path: ['parts', 0, 'criteria'] }] });
    expect(harness.db.select().from(revisions).where(eq(revisions.problemId, problem.id)).all()).toEqual([]);
    expect(rowOf(problem)?.draft).toEqual(draft);
  });

  it('are refused while a key has no value on some variant, with the character', async () => {
    // 0.35 − T is 0 for one of the three transmittances.
    const problem = await save(await begin(), buildDraft({ parts: [buildPart({ key: 'nbar/(T - 0.35)' })] }));
    const attempt = () =>
      lead.post(`/api/problems/${problem.id}/revisions`).set('If-Match', '"2"').send({ reason: 'try' });
    const { body } = await attempt().expect(400);
    expect(body.fields).toMatchObject([{ path: ['parts', 0, 'answer', 'key'] }]);
    expect(body.fields[0].message).toContain('T = 0.35');

    const unknown = await save(problem, buildDraft({ parts: [buildPart({ key: 'nbar*kappa' })] }));
    const second = await lead
      .post(`/api/problems/${unknown.id}/revisions`)
      .set('If-Match', '"3"')
      .send({ reason: 'try' })
      .expect(400);
    expect(second.body.fields).toMatchObject([{ path: ['parts', 0, 'answer', 'key'], position: 5 }]);
  });

  it('are refused without a reason, without news, and on a stale version', async () => {
    const problem = await revise(await save(await begin()));
    const path = `/api/problems/${problem.id}/revisions`;
    const none = await lead
      .post(path)
      .set('If-Match', `"${String(problem.version)}"`)
      .send({ reason: ' ' })
      .expect(400);
    expect(none.body.fields).toMatchObject([{ path: ['reason'] }]);
    await lead
      .post(path)
      .set('If-Match', `"${String(problem.version)}"`)
      .send({ reason: 'again' })
      .expect(409);
    await lead.post(path).set('If-Match', '"1"').send({ reason: 'again' }).expect(412);
    await lead.post(path).send({ reason: 'again' }).expect(428);
  });
});

describe('the state of a problem', () => {
  it('goes from draft over review to ready and back, with entries', async () => {
    const problem = await revise(await save(await begin()));
    const review = (await setStatus(lead, problem, 'in review').expect(200)).body as ProblemDetail;
    const decision = { revision: 1, kind: 'signed off' };
    await colleague.post(`/api/problems/${problem.id}/decisions`).send(decision).expect(201);
    const ready = (await setStatus(colleague, review, 'ready').expect(200)).body as ProblemDetail;
    expect(ready).toMatchObject({ status: 'ready', nextStatuses: ['in review', 'retired'] });
    const retired = (await setStatus(lead, ready, 'retired').expect(200)).body as ProblemDetail;
    await lead
      .put(`/api/problems/${problem.id}/draft`)
      .set('If-Match', `"${String(retired.version)}"`)
      .send(buildDraft())
      .expect(409);
    await setStatus(lead, retired, 'ready').expect(200);
    const entries = harness.db.select().from(record).where(eq(record.thingId, problem.id)).all();
    expect(entries.slice(2).map((entry) => [entry.before, entry.after])).toEqual([
      ['draft', 'in review'],
      [null, null],
      ['in review', 'ready'],
      ['ready', 'retired'],
      ['retired', 'ready'],
    ]);
  });

  it('needs a revision, and an allowed step', async () => {
    const problem = await save(await begin());
    const { body } = await setStatus(lead, problem, 'ready').expect(409);
    expect(body.detail).toContain('Save a revision first');
    const review = (await setStatus(lead, await revise(problem), 'in review').expect(200)).body as ProblemDetail;
    await setStatus(colleague, review, 'draft').expect(409);
    expect(rowOf(problem)?.status).toBe('in review');
  });

  it('cannot be ready while a key of the latest revision fails', async () => {
    const problem = await revise(await save(await begin()));
    const [row] = harness.db.select().from(revisions).where(eq(revisions.problemId, problem.id)).all();
    const content = structuredClone(row!.content);
    Object.assign(content.parts[0]!.answer, { key: 'nbar/(T - T)' });
    harness.db
      .insert(revisions)
      .values({ ...row!, id: crypto.randomUUID(), number: 2, content })
      .run();
    const { body } = await setStatus(lead, problem, 'ready').expect(409);
    expect(body).toMatchObject({ type: '/errors/conflict', fields: [{ path: ['parts', 0, 'answer', 'key'] }] });
    expect(rowOf(problem)?.status).toBe('draft');
  });
});

describe('copies and files', () => {
  it('begin a problem of one’s own', async () => {
    const problem = (await setStatus(lead, await revise(await save(await begin())), 'in review').expect(200))
      .body as ProblemDetail;
    const { body } = await colleague.post(`/api/problems/${problem.id}/copies`).expect(201);
    expect(body).toMatchObject({ title: 'A splitter (copy)', status: 'draft', mine: true, latestRevision: null });
    expect(body.id).not.toBe(problem.id);
  });

  it('write a problem and read it again', async () => {
    const problem = await save(await begin());
    const { body } = await lead.get(`/api/problems/${problem.id}/file`).expect(200);
    expect(body.name).toBe('a-splitter.md');
    const read = await lead.post('/api/problems/import').send({ text: body.text }).expect(201);
    expect(read.body).toMatchObject({ title: 'A splitter', status: 'draft' });
    expect((await lead.get(`/api/problems/${String(read.body.id)}/file`)).body.text).toBe(body.text);
  });

  it('say what is wrong with a file, and with a draft that is none yet', async () => {
    const { body } = await lead.post('/api/problems/import').send({ text: 'nonsense' }).expect(400);
    expect(body.fields).toMatchObject([{ path: ['text'] }]);
    const problem = await begin();
    await lead.get(`/api/problems/${problem.id}/file`).expect(409);
  });
});

describe('the key language', () => {
  it('is described for those who write keys, with examples that were run', async () => {
    const { body } = await lead.get('/api/key-language').expect(200);
    const find = (name: string) => body.functions.find((each: { name: string }) => each.name === name);
    expect(find('lose')).toMatchObject({
      makes: 'state',
      group: 'Operations',
      arguments: [{ name: 'state' }, { name: 'eta', domain: '0 to 1' }],
    });
    expect(find('photonProbability').example).toMatchObject({
      expression: 'photonProbability(coherent(2), 3)',
      // e^{−4} 4³/3!
      value: expect.closeTo((Math.exp(-4) * 64) / 6, 14) as number,
      agreesTo: expect.any(Number) as number,
    });
    expect(find('noon').example.typeset).toContain('\\rangle');
    expect(find('sqrt')).toMatchObject({ makes: 'arithmetic' });
    expect(body.functions.filter((each: { example: unknown }) => each.example === null)).toEqual([]);
    const { body: plain } = await lead.get('/api/key-language').query({ examples: 'left out' }).expect(200);
    expect(plain.functions).toHaveLength(body.functions.length);
    expect(plain.functions[0]).toMatchObject({ name: 'vacuum', example: null });
    expect(body.constants).toContainEqual({ name: 'boltzmann', value: 1.380649e-23, unit: 'J K^-1' });
  });
});

describe('pictures of keys', () => {
  const picture = (who: typeof lead, change: object = {}) =>
    who.post('/api/key-picture').send({
      expression: 'photonProbability(lose(coherent(sqrt(nbar)), T), 1)',
      givens: { nbar: { value: 4, printed: '4.0' }, T: { value: 0.5, printed: '0.50' } },
      convention: defaultConvention,
      ...change,
    });

  it('show the state in a key', async () => {
    const { body } = await picture(lead).expect(200);
    expect(body.why).toBe('');
    expect(body.picture).toMatchObject({ modes: 1, asked: 1, mean: expect.closeTo(2, 10) as number });
    expect(body.picture.wigner.values).toHaveLength(body.picture.wigner.points ** 2);
    expect(body.picture.path).toBeNull();
  });

  it('use the values of earlier parts, with their units', async () => {
    const expression = 'meanPhotons(damp(coherent(2), part_a, 1 s))';
    const { body } = await picture(lead, { expression, earlier: { part_a: '2 s^-1' } }).expect(200);
    expect(body.picture.mean).toBeCloseTo(4 * Math.exp(-2), 10);
    expect(body.picture.path.passages).toEqual(['damp']);
  });

  it('say why there is none', async () => {
    const { body } = await picture(lead, { expression: 'nbar*T' }).expect(200);
    expect(body).toEqual({ picture: null, why: 'No state of light is asked here.' });
    await picture(lead, { expression: '' }).expect(400);
  });

  it('are for those who write and review keys', async () => {
    await picture(student).expect(403);
  });
});
