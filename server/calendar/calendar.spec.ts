import { eq } from 'drizzle-orm';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { allowances, calendarAddresses } from '@drizzle/schema';
import { newId } from '../http/new-id';
import { buildOpenSet, hour } from '../scripts/testing/build-set';
import { createHarness, type Harness } from '../testing/harness';
import { escapedText, foldedLine, icalendar, utcOf } from './icalendar';

describe('iCalendar text', () => {
  it('writes UTC, and escapes what has a meaning', () => {
    expect(utcOf(Date.UTC(2026, 10, 24, 14, 36, 8, 123))).toBe('20261124T143608Z');
    expect(escapedText('a;b,c\\d\r\ne\u0007')).toBe('a\\;b\\,c\\\\d\\ne ');
  });

  it('folds lines at 75 octets and cuts no character', () => {
    const line = `SUMMARY:${'ψ'.repeat(40)}🙂${'n'.repeat(80)}`;
    const folded = foldedLine(line);
    for (const piece of folded.split('\r\n')) expect(Buffer.byteLength(piece)).toBeLessThanOrEqual(75);
    expect(folded.replaceAll('\r\n ', '')).toBe(line);
    expect(foldedLine('n'.repeat(75))).toBe('n'.repeat(75));
    expect(foldedLine('n'.repeat(76))).toBe(`${'n'.repeat(75)}\r\n n`);
  });

  it('ends every line by CRLF, an empty calendar too', () => {
    const text = icalendar('Mine', [], 0);
    expect(text.split('\r\n').at(-1)).toBe('');
    expect(text.replaceAll('\r\n', '')).not.toMatch(/[\r\n]/);
    expect(text).toContain('VERSION:2.0\r\n');
  });
});

describe('a calendar address', () => {
  let harness: Harness;
  beforeEach(() => {
    harness = createHarness();
  });
  afterEach(() => harness.close());

  /** Lines of a calendar, unfolded. */
  const linesOf = (text: string) => text.replaceAll('\r\n ', '').split('\r\n');

  async function addressOf(person: { id: string }) {
    const client = await harness.agent(person);
    const { body } = await client.post('/api/calendar-address').expect(201);
    return { client, path: new URL((body as { address: string }).address).pathname };
  }

  it('gives a person their own dates, those that a lead adjusted too, without signing in', async () => {
    const { setId, student, other, lead } = await buildOpenSet(harness, { title: 'Counting; quanta, twice' });
    const closesAt = harness.clock.now() + 72 * hour;
    harness.db
      .insert(allowances)
      .values({
        id: newId(),
        setId,
        membershipId: student.membershipId,
        closesAt,
        reason: 'planted-reason',
        byId: lead.id,
        createdAt: harness.clock.now(),
      })
      .run();
    const nobody = await harness.agent(null);
    const own = await addressOf(student);
    const response = await nobody.get(own.path).expect(200);
    expect(response.headers['cache-control']).toBe('private, max-age=900');
    expect(response.headers['content-type']).toBe('text/calendar; charset=utf-8');
    const lines = linesOf(response.text);
    expect(lines).toContain(`DTSTART:${utcOf(closesAt)}`);
    expect(lines).toContain('SUMMARY:Set 1 closes: Counting\\; quanta\\, twice');
    const uid = lines.find((line) => line.startsWith('UID:'));

    // The same event under the same name, wherever it is moved.
    harness.db
      .update(allowances)
      .set({ closesAt: closesAt + hour })
      .run();
    const again = linesOf((await nobody.get(own.path).expect(200)).text);
    expect(again).toContain(uid);
    expect(again).toContain(`DTSTART:${utcOf(closesAt + hour)}`);

    for (const person of [other, lead]) {
      const { text } = await nobody.get((await addressOf(person)).path).expect(200);
      expect(linesOf(text)).toContain(`DTSTART:${utcOf(harness.clock.now() + 48 * hour)}`);
      expect(text).not.toContain(utcOf(closesAt + hour));
      expect(text).not.toContain('planted-reason');
    }
  });

  it('is kept hashed, is one a person, and ends when it is revoked or made anew', async () => {
    const { student } = await buildOpenSet(harness);
    const nobody = await harness.agent(null);
    const { client, path } = await addressOf(student);
    const secret = /calendars\/(.+)\.ics$/.exec(path)?.[1] ?? '';
    expect(secret).toMatch(/^[\w-]{43}$/);
    const rows = () =>
      harness.db.select().from(calendarAddresses).where(eq(calendarAddresses.userId, student.id)).all();
    expect(JSON.stringify(rows())).not.toContain(secret);
    expect((await client.get('/api/calendar-address').expect(200)).body).toEqual({ madeAt: harness.clock.now() });

    const second = (await addressOf(student)).path;
    await nobody.get(path).expect(404);
    await nobody.get(second).expect(200);
    await client.delete('/api/calendar-address').expect(204);
    expect((await nobody.get(second).expect(404)).body).toMatchObject({ type: '/errors/not-found' });
    expect(rows().every((row) => row.revokedAt !== null)).toBe(true);
    expect((await client.get('/api/calendar-address').expect(200)).body).toEqual({ madeAt: null });
    await nobody.get('/api/calendars/guess.ics').expect(404);
    await nobody.post('/api/calendar-address').expect(401);
    await nobody.delete('/api/calendar-address').expect(401);
  });

  it('says nothing of sets that are being made, nor of a course that one has left', async () => {
    const course = harness.makeCourse();
    const student = harness.makeMember(course.id, 'student');
    const lead = await harness.agent(harness.makeMember(course.id, 'lead'));
    await lead
      .post(`/api/courses/${course.id}/sets`)
      .send({ title: 'Secret plans', closesAt: harness.clock.now() + hour })
      .expect(201);
    const nobody = await harness.agent(null);
    const { path } = await addressOf(student);
    expect((await nobody.get(path).expect(200)).text).not.toContain('VEVENT');
  });
});
