import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { checks, variants } from '@drizzle/schema';
import type { Sheet } from '@shared/scripts';
import { createHarness, type Harness } from '../testing/harness';
import { buildContent, buildOpenSet, buildPart } from './testing/build-set';

let harness: Harness;
beforeEach(() => {
  harness = createHarness();
});
afterEach(() => harness.close());

const derived = (name: string, expression: string) => ({
  kind: 'derived' as const,
  name,
  symbol: 'm_j',
  spellings: [],
  expression,
  significantFigures: 3,
});

/** A part whose key is an estimate from the student's own counts; a second list stays on the server. */
const content = buildContent({
  statement: 'A counter behind light of $\\val{nbar}$ photons gave $\\val{counts}$.\n\n(a) Estimate $g^{(2)}(0)$.',
  givens: [
    { kind: 'fixed', name: 'nbar', symbol: '\\bar n', spellings: [], value: 4 },
    derived('counts', 'sampleCounts(thermal(nbar), 200, 0.6, 0.02)'),
    derived('secret', 'sampleCounts(thermal(nbar), 31)'),
  ],
  parts: [buildPart({ answer: { form: 'number', key: 'g2(counts) + 0*mean(secret)', tolerance: { relative: 0.02 } } })],
});

describe('a part with data of the student’s own', () => {
  it('shows each student their own counts, the same again, and no list that the statement does not name', async () => {
    const { setId, student, other } = await buildOpenSet(harness, { content });
    const read = async (person: typeof student) =>
      (await (await harness.agent(person)).get(`/api/sets/${setId}/sheet`).expect(200)).body as Sheet;
    const [mine, theirs] = [await read(student), await read(other)];
    const [data, ...more] = mine.problems[0]?.data ?? [];
    expect(more).toEqual([]);
    expect(data).toMatchObject({ name: 'counts', symbol: 'm_j' });
    expect(data?.counts).toHaveLength(200);
    expect(mine.problems[0]?.givens['counts']).toEqual({ printed: '200', unit: 'counts' });
    expect((await read(student)).problems[0]?.data[0]?.counts).toEqual(data?.counts);
    // Nothing else differs between them: the data are drawn for each, not for each value of the givens.
    expect(theirs.problems[0]?.data[0]?.counts).not.toEqual(data?.counts);
    expect(JSON.stringify(mine)).not.toContain('secret');
    const stored = harness.db.select().from(variants).all();
    expect(stored.every(({ givens }) => givens['secret']?.counts?.length === 31)).toBe(true);
  });

  it('checks the answer against an estimate from those counts', async () => {
    const { setId, student } = await buildOpenSet(harness, { content });
    const client = await harness.agent(student);
    const sheet = (await client.get(`/api/sets/${setId}/sheet`).expect(200)).body as Sheet;
    const counts = sheet.problems[0]?.data[0]?.counts ?? [];
    const mean = counts.reduce((sum, each) => sum + each, 0) / counts.length;
    const own = counts.reduce((sum, each) => sum + each * (each - 1), 0) / counts.length / mean ** 2;
    const answerId = sheet.problems[0]?.parts[0]?.answerId ?? '';
    await client
      .put(`/api/answers/${answerId}/text`)
      .set('If-Match', '"0"')
      .set('Idempotency-Key', 'data-driven-save')
      .send({ text: own.toPrecision(4) })
      .expect(200);
    await client
      .post(`/api/sets/${setId}/submissions`)
      .set('Idempotency-Key', 'data-driven-submit')
      .send({})
      .expect(201);
    // The receipt does not wait for the check.
    const verdictNow = () => harness.db.select().from(checks).get()?.result.verdict;
    await expect.poll(verdictNow, { timeout: 5000 }).toBe('right');
  });
});
