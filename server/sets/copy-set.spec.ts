import { eq } from 'drizzle-orm';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { allowances, scripts, sets, variants } from '@drizzle/schema';
import type { Sheet } from '@shared/scripts';
import type { SetDetail } from '@shared/sets';
import { instantAt, movedByWeeks, wallClockOf } from '@shared/times';
import { newId } from '../http/new-id';
import { buildCourse, buildOpenSet, buildProblem, hour } from '../scripts/testing/build-set';
import { createHarness, type Harness } from '../testing/harness';

describe('weeks by the clock on the wall', () => {
  it.each([
    ['2026-11-27T18:00', 22, '2027-04-30T18:00', 'Europe/Vienna'],
    ['2026-03-27T18:00', 1, '2026-04-03T18:00', 'Europe/Vienna'],
    ['2026-10-24T02:30', 1, '2026-10-31T02:30', 'Europe/Vienna'],
    ['2026-10-30T09:15', 1, '2026-11-06T09:15', 'America/New_York'],
    ['2026-11-27T18:00', 1, '2026-12-04T18:00', 'Asia/Kolkata'],
  ])('%s and %i weeks is %s in %s', (from, weeks, to, zone) => {
    expect(wallClockOf(movedByWeeks(instantAt(from, zone), weeks, zone), zone)).toBe(to);
  });
});

let harness: Harness;
beforeEach(() => {
  harness = createHarness();
});
afterEach(() => harness.close());

describe('a copy of a set', () => {
  it('is a draft with the same problems and settings, its dates moved, and nobody’s work', async () => {
    const now = harness.clock.now();
    const lateRule = { percent: 10, of: 'awarded', per: 'started day', until: now + 72 * hour } as const;
    const { setId, lead, student, problem } = await buildOpenSet(harness, { coverText: 'Read it.', lateRule });
    await (await harness.agent(student)).get(`/api/sets/${setId}/sheet`).expect(200);
    harness.db
      .insert(allowances)
      .values({ id: newId(), setId, membershipId: student.membershipId, reason: 'r', byId: lead.id, createdAt: now })
      .run();
    const client = await harness.agent(lead);
    const copy = (await client.post(`/api/sets/${setId}/copies`).send({ weeks: 22 }).expect(201)).body as SetDetail;
    const moved = (at: number) => movedByWeeks(at, 22, 'Europe/Vienna');
    expect(copy).toMatchObject({
      number: 2,
      title: 'Counting',
      coverText: 'Read it.',
      stage: 'draft',
      closesAt: moved(now + 48 * hour),
      lateRule: { ...lateRule, until: moved(now + 72 * hour) },
      problems: [{ problemId: problem.problemId, revisionId: problem.revisionId }],
      counts: { opened: 0 },
    });
    // Past the change of the clock the span is an hour short of whole weeks.
    expect((copy.closesAt ?? 0) - (now + 48 * hour)).toBe(22 * 7 * 24 * hour - hour);
    const seeds = harness.db.select({ seed: sets.seed }).from(sets).all();
    expect(new Set(seeds.map((row) => row.seed)).size).toBe(2);
    expect(harness.db.select().from(scripts).where(eq(scripts.setId, copy.id)).all()).toEqual([]);
    expect(harness.db.select().from(allowances).where(eq(allowances.setId, copy.id)).all()).toEqual([]);
  });

  it('is for leads, by whole weeks', async () => {
    const { setId, lead, student, course } = await buildOpenSet(harness);
    const marker = harness.makeMember(course.id, 'marker');
    for (const person of [student, marker, harness.makePerson()])
      await (await harness.agent(person)).post(`/api/sets/${setId}/copies`).send({ weeks: 1 }).expect(403);
    await (await harness.agent(null)).post(`/api/sets/${setId}/copies`).send({ weeks: 1 }).expect(401);
    const client = await harness.agent(lead);
    for (const weeks of [0, 1.5, -3, 'x'])
      expect((await client.post(`/api/sets/${setId}/copies`).send({ weeks }).expect(400)).body).toMatchObject({
        fields: [{ path: ['weeks'] }],
      });
    await client.post(`/api/sets/${newId()}/copies`).send({ weeks: 1 }).expect(404);
    expect(harness.db.select().from(sets).all()).toHaveLength(1);
  });
});

describe('a preview as a student', () => {
  it('has that student’s own numbers, and none of their answers', async () => {
    const { setId, lead, student, other, course } = await buildOpenSet(harness);
    const marker = harness.makeMember(course.id, 'marker');
    const own = (await (await harness.agent(student)).get(`/api/sets/${setId}/sheet`).expect(200)).body as Sheet;
    const answerId = own.problems[0]?.parts[0]?.answerId ?? '';
    await (
      await harness.agent(student)
    )
      .put(`/api/answers/${answerId}/text`)
      .set('If-Match', '0')
      .set('Idempotency-Key', newId())
      .send({ text: 'planted-answer' })
      .expect(200);
    const client = await harness.agent(lead);
    const look = async (membershipId: string) => client.get(`/api/sets/${setId}/students/${membershipId}/sheet`);
    const seen = (await look(student.membershipId)).body as Sheet & { student: string };
    expect(seen).toMatchObject({ student: 'Sol Reed', closesAt: own.closesAt, submission: null });
    expect(seen.problems[0]?.givens).toEqual(own.problems[0]?.givens);
    expect(JSON.stringify(seen)).not.toContain('planted-answer');
    expect(((await look(other.membershipId)).body as Sheet).problems[0]?.givens).not.toEqual(own.problems[0]?.givens);
    expect((await look(newId())).status).toBe(404);
    for (const person of [student, marker, harness.makePerson()])
      await (await harness.agent(person)).get(`/api/sets/${setId}/students/${student.membershipId}/sheet`).expect(403);
  });

  it('is there before the set opens, and stores nothing', async () => {
    const { course, lead, student } = buildCourse(harness);
    const problem = buildProblem(harness, lead.id);
    const client = await harness.agent(lead);
    const set = (
      await client
        .post(`/api/courses/${course.id}/sets`)
        .send({ title: 'Soon', problems: [{ problemId: problem.problemId, revisionId: problem.revisionId }] })
        .expect(201)
    ).body as SetDetail;
    const path = `/api/sets/${set.id}/students/${student.membershipId}/sheet`;
    const first = (await client.get(path).expect(200)).body as Sheet;
    const second = (await client.get(path).expect(200)).body as Sheet;
    expect(first.problems[0]?.givens).toEqual(second.problems[0]?.givens);
    expect(harness.db.select().from(variants).all()).toEqual([]);
  });
});
