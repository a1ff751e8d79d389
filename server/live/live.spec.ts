import { createServer, type Server } from 'node:http';
import type { AddressInfo } from 'node:net';
import { io, type Socket } from 'socket.io-client';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { holds, problems } from '@drizzle/schema';
import { livePath, type ClientEvents, type Presence, type ServerEvents, type Watching } from '@shared/live';
import { newId } from '../http/new-id';
import { buildPile } from '../marking/testing/build-pile';
import { createHarness, type Harness } from '../testing/harness';
import { buildDraft } from '../testing/build-draft';
import { pileMarksRoom, pileRoom, problemRoom } from './rooms';

type Page = Socket<ServerEvents, ClientEvents>;

let harness: Harness;
let server: Server;
let courseId: string;
let pages: Page[];

beforeEach(async () => {
  harness = createHarness();
  courseId = harness.makeCourse().id;
  pages = [];
  server = createServer(harness.app);
  harness.context.live.attach(server, harness.context, async (cookie) => (await harness.sessions.read(cookie)).person);
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
});

afterEach(async () => {
  for (const page of pages) page.disconnect();
  harness.context.live.close();
  server.closeAllConnections();
  await new Promise((resolve) => server.close(resolve));
  await harness.close();
});

const address = () => `http://127.0.0.1:${String((server.address() as AddressInfo).port)}`;

/** A page that is open, connected or refused. */
async function open(person: { id: string } | null, headers: Record<string, string> = {}): Promise<Page> {
  const cookie = person ? ((await harness.sessions.begin(person.id)).split(';')[0] ?? '') : '';
  const page: Page = io(address(), {
    path: livePath,
    transports: ['websocket'],
    reconnection: false,
    forceNew: true,
    extraHeaders: { cookie, ...headers },
  });
  pages.push(page);
  await new Promise<void>((resolve) => {
    page.once('connect', resolve);
    page.once('connect_error', () => {
      resolve();
    });
  });
  return page;
}

const watch = (page: Page, pileId: string, benchId = newId()) =>
  new Promise<Watching>((resolve) => page.emit('watchPile', { pileId, benchId }, resolve));

const next = <Name extends keyof ServerEvents>(page: Page, event: Name) =>
  new Promise<Parameters<ServerEvents[Name]>[0]>((resolve) => {
    page.once(event, resolve as never);
  });

describe('the live connection', () => {
  it('takes nobody who is not signed in, and nobody from another site', async () => {
    expect((await open(null)).connected).toBe(false);
    const marker = harness.makeMember(courseId, 'marker');
    expect((await open(marker, { origin: 'https://elsewhere.example' })).connected).toBe(false);
    expect((await open(marker, { origin: address() })).connected).toBe(true);
  });

  it('lets the team watch a pile of their course, and nobody else', async () => {
    const { pileId, handedIn } = buildPile(harness, { courseId, values: [4] });
    expect(await watch(await open(harness.makeMember(courseId, 'marker')), pileId)).toEqual({ ok: true });
    const stranger = harness.makeMember(harness.makeCourse().id, 'lead');
    for (const person of [stranger, handedIn[0]?.student ?? null])
      expect(await watch(await open(person), pileId)).toMatchObject({ ok: false });
  });

  it('tells totals to those only who may see every mark', async () => {
    const { pileId, handedIn } = buildPile(harness, { courseId, values: [4] });
    const [marker, lead] = [
      await open(harness.makeMember(courseId, 'marker')),
      await open(harness.makeMember(courseId, 'lead')),
    ];
    await watch(marker, pileId);
    await watch(lead, pileId);
    const seen = Promise.all([next(marker, 'answerMarked'), next(lead, 'answerMarked')]);
    const fact = { pileId, sequence: 1, answerId: handedIn[0]?.answerId ?? '', version: 2, markerId: newId() };
    harness.context.live.emit([pileRoom(pileId)], 'answerMarked', { ...fact, total: null });
    harness.context.live.emit([pileMarksRoom(pileId)], 'answerMarked', { ...fact, total: 3 });
    expect((await seen).map((body) => body.total)).toEqual([null, 3]);
  });

  it('says who is there, and gives up holds at once on leaving and on sign-out', async () => {
    const { pileId } = buildPile(harness, { courseId, values: [4, 4] });
    const marker = harness.makeMember(courseId, 'marker', { name: 'Iwo Brandt' });
    const lead = await open(harness.makeMember(courseId, 'lead'));
    await watch(lead, pileId);
    const client = await harness.agent(marker);

    const benchId = newId();
    const page = await open(marker);
    const arrived = next(lead, 'presenceChanged');
    await watch(page, pileId, benchId);
    expect((await arrived).present.map((each: Presence) => each.name)).toContain('Iwo Brandt');
    await client.post(`/api/piles/${pileId}/holds`).send({ benchId }).expect(200);
    const left = next(lead, 'holdsChanged');
    page.emit('leavePile', { pileId, benchId });
    expect((await left).letGo).toHaveLength(2);
    expect(harness.db.select().from(holds).all()).toEqual([]);

    await watch(page, pileId, benchId);
    await client.post(`/api/piles/${pileId}/holds`).send({ benchId }).expect(200);
    const gone = next(page, 'disconnect' as never);
    harness.context.live.endSessions(harness.sessions.endAll(marker.id));
    await gone;
    expect(harness.db.select().from(holds).all()).toEqual([]);
  });

  it('gives up holds twenty seconds after a connection was lost', async () => {
    const { pileId } = buildPile(harness, { courseId, values: [4] });
    const marker = harness.makeMember(courseId, 'marker');
    const benchId = newId();
    const page = await open(marker);
    await watch(page, pileId, benchId);
    await (await harness.agent(marker)).post(`/api/piles/${pileId}/holds`).send({ benchId }).expect(200);
    const left = new Promise<void>((resolve) => {
      harness.context.live.onBenchLeft(() => {
        resolve();
      });
    });
    page.io.engine.close();
    await left;
    expect(harness.db.select().from(holds).get()?.expiresAt).toBe(harness.clock.now() + 20_000);
  });

  it('disconnects who does not keep to the form, and goes on', async () => {
    const page = await open(harness.makeMember(courseId, 'marker'));
    const gone = next(page, 'disconnect' as never);
    page.emit('watchPile', { pileId: 'x' } as never, () => undefined);
    await gone;
    expect((await open(harness.makeMember(courseId, 'marker'))).connected).toBe(true);
  });
});

describe('watching a problem', () => {
  it('lets in those who may read it, and tells them of its review', async () => {
    const lead = harness.makeMember(courseId, 'lead');
    const problemId = newId();
    const draft = buildDraft();
    const at = harness.clock.now();
    const row = {
      id: problemId,
      authorId: lead.id,
      status: 'in review',
      draft,
      draftSavedAt: at,
      createdAt: at,
    } as const;
    harness.db.insert(problems).values(row).run();
    const watchProblem = (page: Page) =>
      new Promise<Watching>((resolve) => page.emit('watchProblem', { problemId }, resolve));
    const [reader, stranger] = [await open(lead), await open(harness.makeMember(courseId, 'marker'))];
    expect((await watchProblem(reader)).ok).toBe(true);
    expect((await watchProblem(stranger)).ok).toBe(false);
    const told = new Promise((resolve) => reader.once('reviewChanged', resolve));
    harness.context.live.emit([problemRoom(problemId)], 'reviewChanged', { problemId });
    expect(await told).toEqual({ problemId });
  });
});
