import { and, eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { courses, letters, memberships, record, users } from '@drizzle/schema';
import { createHarness, type Harness } from '../testing/harness';

const newCourse = { title: 'Light and its quanta', term: 'autumn term', timeZone: 'Europe/Vienna' };

describe('courses', () => {
  let harness: Harness;

  beforeAll(() => {
    harness = createHarness();
  });
  afterAll(() => harness.close());

  async function courseWithLead() {
    const course = harness.makeCourse();
    const lead = harness.makeMember(course.id, 'lead', { name: 'Signe Aldous' });
    return { course, lead, client: await harness.agent(lead), path: `/api/courses/${course.id}` };
  }

  it('are created by an administrator, who becomes the first lead', async () => {
    const administrator = harness.makePerson({ isAdministrator: true, name: 'Ada Quist' });
    const client = await harness.agent(administrator);
    const made = await client.post('/api/courses').send(newCourse);
    expect(made.status).toBe(201);
    expect(made.headers['etag']).toBe('"1"');
    expect(made.body.convention.vacuumVariance).toBe(0.5);
    const place = harness.db.select().from(memberships).where(eq(memberships.courseId, made.body.id)).get();
    expect(place).toMatchObject({ userId: administrator.id, role: 'lead', initials: 'AQ', hue: 1 });
    const student = harness.makeMember(made.body.id, 'student');
    expect((await (await harness.agent(student)).post('/api/courses').send(newCourse)).status).toBe(403);
  });

  it('name an unknown time zone', async () => {
    const client = await harness.agent(harness.makePerson({ isAdministrator: true }));
    const answer = await client.post('/api/courses').send({ ...newCourse, timeZone: 'Northmere/Quay' });
    expect(answer.status).toBe(400);
    expect(answer.body.fields).toEqual([expect.objectContaining({ path: ['timeZone'] })]);
  });

  it('are changed only at the version that was seen', async () => {
    const { client, course, path } = await courseWithLead();
    const body = { ...newCourse, title: 'Quanta of light' };
    expect((await client.put(path).send(body)).status).toBe(428);
    const first = await client.put(path).set('If-Match', '"1"').send(body);
    expect(first.body).toMatchObject({ title: 'Quanta of light', version: 2 });
    const second = await client
      .put(path)
      .set('If-Match', '"1"')
      .send({ ...body, title: 'Late' });
    expect(second.status).toBe(412);
    expect(second.body.current).toMatchObject({ title: 'Quanta of light', version: 2 });
    expect(harness.db.select().from(courses).where(eq(courses.id, course.id)).get()?.title).toBe('Quanta of light');
  });

  it('are unknown to people of other courses', async () => {
    const { path } = await courseWithLead();
    const stranger = await harness.agent(harness.makeMember(harness.makeCourse().id, 'lead'));
    expect((await stranger.get(path)).status).toBe(404);
    expect((await stranger.get(`${path}/people`)).status).toBe(403);
    expect((await stranger.get('/api/courses/not-an-id')).status).toBe(400);
  });

  it('take people one by one, with an invitation for who has no account', async () => {
    const { client, course, path } = await courseWithLead();
    const added = await client
      .post(`${path}/people`)
      .send({ name: 'Tamsin Oduya', email: 'T.Oduya@northmere.example', role: 'marker' });
    expect(added.status).toBe(201);
    expect(added.body).toMatchObject({
      email: 't.oduya@northmere.example',
      initials: 'TO',
      hue: 2,
      hasPassword: false,
    });
    const letter = harness.db.select().from(letters).where(eq(letters.userId, added.body.userId)).get();
    expect(letter?.kind).toBe('invitation');
    const again = await client
      .post(`${path}/people`)
      .send({ name: 'T', email: 't.oduya@northmere.example', role: 'student' });
    expect(again.status).toBe(409);
    const entries = harness.db.select().from(record).where(eq(record.courseId, course.id)).all();
    expect(entries.map((entry) => entry.action)).toContain('person added');
  });

  it('keep at least one lead', async () => {
    const { client, lead, path } = await courseWithLead();
    expect((await client.delete(`${path}/people/${lead.membershipId}`)).status).toBe(409);
    expect((await client.patch(`${path}/people/${lead.membershipId}`).send({ role: 'student' })).status).toBe(409);
  });

  it('take somebody out and back, and change roles', async () => {
    const { client, course, path } = await courseWithLead();
    const marker = harness.makeMember(course.id, 'marker');
    const member = `${path}/people/${marker.membershipId}`;
    expect((await client.delete(member)).status).toBe(204);
    expect((await (await harness.agent(marker)).get(path)).status).toBe(404);
    expect((await client.post(`${member}/return`)).body.role).toBe('marker');
    expect((await client.patch(member).send({ role: 'student' })).body).toMatchObject({ role: 'student', hue: null });
  });

  it('preview a file, name every bad row, and import nothing of it', async () => {
    const { client, course, lead, path } = await courseWithLead();
    const csv = [
      'Name;E-mail;Role',
      'Noor Fairlie;n.fairlie@northmere.example;',
      `Signe Aldous;${lead.email};lead`,
      ';nobody@northmere.example;student',
      'Iwo Brand;not an address;marker',
      'Mei Arden;m.arden@northmere.example;professor',
      'Noor Again;n.fairlie@northmere.example;student',
      '"Voss, Anselm";a.voss@northmere.example;marker',
    ].join('\r\n');
    const preview = await client.post(`${path}/roster/preview`).send({ csv });
    expect(preview.status).toBe(200);
    expect(preview.body).toMatchObject({ good: 3, wrong: 4 });
    const outcomes = preview.body.rows.map((row: { line: number; outcome: string }) => [row.line, row.outcome]);
    expect(outcomes).toEqual([
      [2, 'new person'],
      [3, 'already here'],
      [4, 'wrong'],
      [5, 'wrong'],
      [6, 'wrong'],
      [7, 'wrong'],
      [8, 'new person'],
    ]);
    expect(preview.body.rows[4].problems[0]).toContain('“professor” is no role');
    const refused = await client.post(`${path}/roster`).send({ csv });
    expect(refused.status).toBe(400);
    expect(refused.body.fields).toHaveLength(4);
    expect(harness.db.select().from(memberships).where(eq(memberships.courseId, course.id)).all()).toHaveLength(1);
  });

  it('import a file without mistakes', async () => {
    const { client, course, path } = await courseWithLead();
    const known = harness.makePerson({ name: 'Mei Arden' });
    const csv = `name,email,role\nNoor Fairlie,noor@northmere.example,student\nMei Arden,${known.email},marker\n`;
    const done = await client.post(`${path}/roster`).send({ csv });
    expect(done.body).toEqual({ added: 2, invited: 1, unchanged: 0 });
    const noor = harness.db.select().from(users).where(eq(users.email, 'noor@northmere.example')).get();
    const place = harness.db
      .select()
      .from(memberships)
      .where(and(eq(memberships.courseId, course.id), eq(memberships.userId, noor?.id ?? '')))
      .get();
    expect(place?.role).toBe('student');
  });

  it.each([
    ['', /empty/],
    ['full name,role\nA,student', /“email” is missing/],
    ['name,email\n"A,b@c.example', /cannot be read/],
  ])('say what is wrong with a file as a whole', async (csv, message) => {
    const { client, path } = await courseWithLead();
    const answer = await client.post(`${path}/roster/preview`).send({ csv });
    expect(answer.status).toBe(400);
    expect(answer.body.fields[0].message).toMatch(message);
  });

  it('hand a link over where no mail server is set up', async () => {
    const { client, path } = await courseWithLead();
    const added = await client
      .post(`${path}/people`)
      .send({ name: 'Ola Ny', email: 'o.ny@northmere.example', role: 'student' });
    const answer = await client.post(`${path}/people/${String(added.body.membershipId)}/invitation`);
    expect(answer.body.link).toMatch(/\/welcome#.{20,}/);
  });

  it('hand no link over that would open another course, or the installation', async () => {
    const { client, path } = await courseWithLead();
    const invite = async (email: string) => {
      const added = await client.post(`${path}/people`).send({ name: 'Ola Ny', email, role: 'student' });
      return client.post(`${path}/people/${String(added.body.membershipId)}/invitation`);
    };
    const elsewhere = harness.makeMember(harness.makeCourse().id, 'lead', { passwordHash: null });
    const administrator = harness.makePerson({ passwordHash: null, isAdministrator: true });
    for (const { email } of [elsewhere, administrator]) {
      const refused = await invite(email);
      expect(refused.status).toBe(403);
      expect(refused.body.detail).toMatch(/administrator/i);
      expect(JSON.stringify(refused.body)).not.toContain('/welcome#');
    }
  });
});
