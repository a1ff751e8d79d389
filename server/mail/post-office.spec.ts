import { eq } from 'drizzle-orm';
import { simpleParser, type ParsedMail } from 'mailparser';
import { SMTPServer } from 'smtp-server';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { letters, tokens } from '@drizzle/schema';
import { linkWith, makeToken, type TokenKind } from '../accounts/tokens';
import { createHarness, type Harness } from '../testing/harness';
import { invite, sendReset } from './invitations';
import { letterAsHtml, queueLetter } from './letters';
import { sendDueLetters, smtpTransport, type Transport } from './post-office';

describe('the post office', () => {
  let harness: Harness;
  let server: SMTPServer;
  let transport: Transport;
  const received: ParsedMail[] = [];

  beforeAll(async () => {
    harness = createHarness();
    server = new SMTPServer({
      disabledCommands: ['AUTH', 'STARTTLS'],
      onData: (stream, _session, done) => {
        void simpleParser(stream).then((mail) => {
          received.push(mail);
          done();
        }, done);
      },
    });
    await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
    const address = server.server.address();
    const port = typeof address === 'object' ? (address?.port ?? 0) : 0;
    transport = smtpTransport(`smtp://127.0.0.1:${String(port)}`, 'Halfsilver <halfsilver@northmere.example>');
  });
  afterAll(async () => {
    await new Promise<void>((resolve) => {
      server.close(resolve);
    });
    await harness.close();
  });

  function makeLink(kind: string, userId: string): string {
    const { secret } = makeToken(harness.db, kind as TokenKind, userId, harness.clock.now());
    return linkWith(harness.context.config.origin, secret);
  }

  it('makes a secret link when the letter leaves, and only then', async () => {
    const person = harness.makePerson({ name: 'Noor Fairlie' });
    invite(harness.db, person, 'Light and its quanta', harness.clock.now());
    expect(harness.db.select().from(tokens).where(eq(tokens.userId, person.id)).all()).toEqual([]);
    expect(await sendDueLetters(harness.context, transport, makeLink)).toBe(1);
    const mail = received.at(-1);
    expect(mail?.subject).toBe('Your place in Light and its quanta');
    const secret = /welcome#(\S+)/.exec(mail?.text ?? '')?.[1] ?? '';
    expect(mail?.html).toContain(`<a href="${linkWith(harness.context.config.origin, secret)}">`);
    const read = await (await harness.agent(null)).post('/api/tokens/read').send({ token: secret });
    expect(read.body).toMatchObject({ kind: 'invitation', name: 'Noor Fairlie' });
    const kept = harness.db.select().from(letters).where(eq(letters.userId, person.id)).get();
    expect(kept?.sentAt).toBe(harness.clock.now());
    expect(kept?.text).not.toContain(secret);
  });

  it('makes no link where there is no mail server', async () => {
    const person = harness.makePerson();
    sendReset(harness.db, person, harness.clock.now());
    expect(await sendDueLetters(harness.context, null, makeLink)).toBe(1);
    expect(harness.db.select().from(tokens).where(eq(tokens.userId, person.id)).all()).toEqual([]);
  });

  it('waits until a letter is due, and leaves out what was taken back', async () => {
    const person = harness.makePerson();
    const now = harness.clock.now();
    const letter = { kind: 'released' as const, userId: person.id, subject: 'Marks', text: 'They are ready.', now };
    queueLetter(harness.db, { ...letter, dueAt: now + 600_000 });
    const cancelled = queueLetter(harness.db, letter);
    harness.db.update(letters).set({ cancelledAt: now }).where(eq(letters.id, cancelled)).run();
    expect(await sendDueLetters(harness.context, transport, makeLink)).toBe(0);
    harness.clock.advance(600_000);
    expect(await sendDueLetters(harness.context, transport, makeLink)).toBe(1);
  });

  it('tries again later when the mail server fails, and says why', async () => {
    const person = harness.makePerson();
    sendReset(harness.db, person, harness.clock.now());
    const broken: Transport = () => Promise.reject(new Error('no route to the mail server'));
    expect(await sendDueLetters(harness.context, broken, makeLink)).toBe(0);
    const row = harness.db.select().from(letters).where(eq(letters.userId, person.id)).get();
    expect(row).toMatchObject({ sentAt: null, attempts: 1, lastError: 'no route to the mail server' });
    expect(await sendDueLetters(harness.context, transport, makeLink)).toBe(0);
    harness.clock.advance(31_000);
    expect(await sendDueLetters(harness.context, transport, makeLink)).toBe(1);
  });
});

it('letters as HTML let nothing through but their own links', () => {
  expect(letterAsHtml('Dear <b>A</b>,\n\nsee https://x.example/a?b=1&c=2 now')).toBe(
    '<p>Dear &lt;b&gt;A&lt;/b&gt;,</p>\n<p>see <a href="https://x.example/a?b=1&amp;c=2">https://x.example/a?b=1&amp;c=2</a> now</p>',
  );
});
