import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { letters, record, sessions, tokens, users } from '@drizzle/schema';
import { createHarness, type Harness } from '../testing/harness';
import { firstAdministratorLink } from './accounts-routes';
import { isCommonPassword } from './common-passwords';
import { hashPassword, hashSecret } from './secrets';
import { makeToken } from './tokens';

const password = 'seven quiet photons';

describe('accounts', () => {
  let harness: Harness;
  let passwordHash: string;

  beforeAll(async () => {
    harness = createHarness();
    passwordHash = await hashPassword(password);
  });
  afterAll(() => harness.close());

  it('sign in with e-mail and password, and out again', async () => {
    const person = harness.makePerson({ passwordHash });
    const client = await harness.agent(null);
    const entered = await client.post('/api/session').send({ email: person.email.toUpperCase(), password });
    expect(entered.status).toBe(201);
    expect(entered.body.person).toMatchObject({ id: person.id, name: person.name });
    const cookie = String(entered.headers['set-cookie']);
    expect(cookie).toMatch(/HttpOnly/);
    expect(cookie).toMatch(/SameSite=Lax/);
    const secret = /halfsilver=([^;]+)/.exec(cookie)?.[1] ?? '';
    const rows = harness.db.select().from(sessions).where(eq(sessions.userId, person.id)).all();
    expect(rows.map((row) => row.id)).toEqual([hashSecret(secret)]);

    expect((await client.delete('/api/session')).status).toBe(204);
    expect((await client.get('/api/session')).body.session).toBeNull();
    expect(harness.db.select().from(sessions).where(eq(sessions.userId, person.id)).all()).toEqual([]);
  });

  it('say the same of a wrong password and of an unknown address', async () => {
    const person = harness.makePerson({ passwordHash });
    const client = await harness.agent(null);
    const wrong = await client.post('/api/session').send({ email: person.email, password: 'something else' });
    const unknown = await client.post('/api/session').send({ email: 'nobody@northmere.example', password });
    for (const answer of [wrong, unknown]) {
      expect(answer.status).toBe(401);
      expect(answer.headers['content-type']).toMatch(/application\/problem\+json/);
      expect(answer.body.type).toBe('/errors/not-signed-in');
    }
    expect(wrong.body.detail).toBe(unknown.body.detail);
  });

  it('name the field that is wrong', async () => {
    const client = await harness.agent(null);
    const answer = await client.post('/api/session').send({ email: 'nobody', password: '' });
    expect(answer.status).toBe(400);
    expect(answer.body.fields.map((field: { path: string[] }) => field.path[0])).toEqual(['email', 'password']);
  });

  it('stop guesses at one account, and let a new password end the lock only after its time', async () => {
    const person = harness.makePerson({ passwordHash });
    const client = await harness.agent(null);
    for (let guess = 0; guess < 8; guess += 1)
      await client.post('/api/session').send({ email: person.email, password: `guess number ${String(guess)}` });
    const locked = await client.post('/api/session').send({ email: person.email, password });
    expect(locked.status).toBe(429);
    expect(Number(locked.headers['retry-after'])).toBeGreaterThan(0);
    harness.clock.advance(16 * 60_000);
    expect((await client.post('/api/session').send({ email: person.email, password })).status).toBe(201);
  });

  it('stop guesses that come at the same moment, and keep the lock', async () => {
    const person = harness.makePerson({ passwordHash });
    const client = await harness.agent(null);
    const guesses = Array.from({ length: 20 }, (_, guess) =>
      client.post('/api/session').send({ email: person.email, password: `guess number ${String(guess)}` }),
    );
    const answered = (await Promise.all(guesses)).map(({ status }) => status);
    expect(answered.filter((status) => status === 401)).toHaveLength(8);
    expect(answered.filter((status) => status === 429)).toHaveLength(12);
    expect((await client.post('/api/session').send({ email: person.email, password })).status).toBe(429);
  });

  it('send a link for a forgotten password without telling whether there is an account, and keep no secret', async () => {
    const person = harness.makePerson({ passwordHash });
    const client = await harness.agent(null);
    expect((await client.post('/api/password-resets').send({ email: 'nobody@northmere.example' })).status).toBe(204);
    expect((await client.post('/api/password-resets').send({ email: person.email })).status).toBe(204);
    const written = harness.db.select().from(letters).where(eq(letters.userId, person.id)).all();
    expect(written).toHaveLength(1);
    expect(written[0]?.text).toContain('{link}');
    expect(harness.db.select().from(tokens).where(eq(tokens.userId, person.id)).all()).toEqual([]);
  });

  it('set a password by a link once, within its time, and end every other session', async () => {
    const person = harness.makePerson({ passwordHash });
    const elsewhere = await harness.agent(person);
    const { secret } = makeToken(harness.db, 'password reset', person.id, harness.clock.now());
    const client = await harness.agent(null);
    const read = await client.post('/api/tokens/read').send({ token: secret });
    expect(read.body).toMatchObject({ kind: 'password reset', email: person.email });
    const short = await client.post('/api/tokens/use').send({ token: secret, password: 'short' });
    expect(short.status).toBe(400);
    const common = await client.post('/api/tokens/use').send({ token: secret, password: 'passwordpassword' });
    expect(common.body.fields[0]).toMatchObject({ path: ['password'] });
    const used = await client.post('/api/tokens/use').send({ token: secret, password: 'a wholly new phrase' });
    expect(used.status).toBe(201);
    expect((await elsewhere.get('/api/session')).body.session).toBeNull();
    expect((await client.post('/api/tokens/use').send({ token: secret, password })).status).toBe(410);

    const late = makeToken(harness.db, 'password reset', person.id, harness.clock.now());
    harness.clock.advance(3_600_001);
    expect((await client.post('/api/tokens/read').send({ token: late.secret })).status).toBe(410);
  });

  it('make the first administrator by a link that works once', async () => {
    const empty = createHarness();
    const link = firstAdministratorLink(empty.context) ?? '';
    const token = link.split('#')[1];
    const client = await empty.agent(null);
    const nameless = await client.post('/api/tokens/use').send({ token, password });
    expect(nameless.body.fields[0].path).toEqual(['name']);
    const made = await client
      .post('/api/tokens/use')
      .send({ token, password, name: 'Ada Quist', email: 'a.quist@northmere.example' });
    expect(made.body.person).toMatchObject({ name: 'Ada Quist', isAdministrator: true });
    expect(firstAdministratorLink(empty.context)).toBeNull();
    await empty.close();
  });

  it('show accounts and outbox to administrators only, and enter each reading', async () => {
    const administrator = harness.makePerson({ isAdministrator: true });
    const other = await harness.agent(harness.makePerson());
    expect((await other.get('/api/accounts')).status).toBe(403);
    expect((await other.get('/api/letters')).status).toBe(403);
    expect((await (await harness.agent(null)).get('/api/letters')).status).toBe(401);
    const client = await harness.agent(administrator);
    const outbox = await client.get('/api/letters');
    expect(outbox.status).toBe(200);
    expect(JSON.stringify(outbox.body)).not.toContain('{link}');
    const entries = harness.db.select().from(record).where(eq(record.actorId, administrator.id)).all();
    expect(entries.map((entry) => entry.action)).toContain('outbox read');
  });

  it('change a password only for who knows the present one', async () => {
    const person = harness.makePerson({ passwordHash });
    const client = await harness.agent(person);
    const wrong = await client
      .put('/api/account/password')
      .send({ current: 'no idea at all', password: 'an entirely new one' });
    expect(wrong.body.fields[0].path).toEqual(['current']);
    const right = await client
      .put('/api/account/password')
      .send({ current: password, password: 'an entirely new one' });
    expect(right.status).toBe(204);
    expect(harness.db.select().from(users).where(eq(users.id, person.id)).get()?.passwordHash).not.toBe(passwordHash);
    expect((await client.get('/api/session')).body.session).not.toBeNull();
  });

  it('refuse unsafe requests from other sites', async () => {
    const client = await harness.agent(harness.makePerson());
    const foreign = await client.delete('/api/session').set('Origin', 'https://elsewhere.example');
    expect(foreign.status).toBe(403);
    expect((await client.get('/api/session')).body.session).not.toBeNull();
    const own = await client.delete('/api/session').set('Origin', harness.context.config.origin);
    expect(own.status).toBe(204);
  });
});

describe('isCommonPassword', () => {
  it.each(['passwordpassword', 'aaaaaaaaaaaaaaa', '123123123123123', 'Password2024!!!', '123456789987654321'])(
    '%s is one',
    (each) => {
      expect(isCommonPassword(each)).toBe(true);
    },
  );
  it.each(['seven quiet photons', 'correct lens battery', 'mirror, half silvered'])('%s is none', (each) => {
    expect(isCommonPassword(each)).toBe(false);
  });
});
