import { deflateSync } from 'node:zlib';
import { createHash } from 'node:crypto';
import { PDFDocument, PDFName, PDFString } from 'pdf-lib';
import sharp from 'sharp';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { answers, marks, pages } from '@drizzle/schema';
import type { Sheet, SheetPage } from '@shared/scripts';
import { newId } from '../http/new-id';
import { checkClosedSet } from '../sets/close-set';
import { moveStage } from '../sets/move-stage';
import { presentSet } from '../sets/set-queries';
import { createHarness, type Harness } from '../testing/harness';
import { buildOpenSet, hour } from './testing/build-set';

let harness: Harness;
beforeEach(() => {
  harness = createHarness();
});
afterEach(() => harness.close());

type Client = Awaited<ReturnType<Harness['agent']>>;

const picture = (width = 60, height = 40) => sharp({ create: { width, height, channels: 3, background: '#f4f1e8' } });

async function pdf(pageCount = 2, change: (document: PDFDocument) => void = () => undefined): Promise<Buffer> {
  const document = await PDFDocument.create();
  for (let page = 0; page < pageCount; page += 1) document.addPage([100, 140]);
  document.setAuthor('Sol Reed');
  change(document);
  return Buffer.from(await document.save({ useObjectStreams: false }));
}

/** An open set with the answers of its student: `c` takes pages. */
async function openSheet() {
  const around = await buildOpenSet(harness);
  const client = await harness.agent(around.student);
  const sheet = (await client.get(`/api/sets/${around.setId}/sheet`).expect(200)).body as Sheet;
  const answerOf = (label: string) =>
    sheet.problems.flatMap((problem) => problem.parts).find((part) => part.label === label)?.answerId ?? '';
  return { ...around, client, answerOf };
}

const add = (client: Client, answerId: string, file: Buffer, key = newId()) =>
  client
    .post(`/api/answers/${answerId}/pages`)
    .set('Idempotency-Key', key)
    .set('Content-Type', 'application/octet-stream')
    .send(file);

const fetchFile = (client: Client, id: string) =>
  client
    .get(`/api/pages/${id}`)
    .buffer(true)
    .parse((response, done) => {
      const pieces: Buffer[] = [];
      response.on('data', (piece: Buffer) => pieces.push(piece));
      response.on('end', () => {
        done(null, Buffer.concat(pieces));
      });
    });

describe('a worked page', () => {
  it('is a picture: upright, and without what tells where and by whom it was taken', async () => {
    const { client, answerOf } = await openSheet();
    const upload = await picture()
      .withExif({ IFD0: { Artist: 'Sol Reed', Orientation: '6' } })
      .withMetadata({ orientation: 6 })
      .jpeg()
      .toBuffer();
    const added = (await add(client, answerOf('c'), upload).expect(201)).body as SheetPage;
    expect(added).toMatchObject({ mediaType: 'image/jpeg', pageCount: 1, path: `/pages/${added.id}` });

    const response = await fetchFile(client, added.id).expect(200);
    const kept = response.body as Buffer;
    expect(await sharp(kept).metadata()).toMatchObject({ width: 40, height: 60 });
    expect((await sharp(kept).metadata()).exif).toBeUndefined();
    expect(kept.includes('Sol Reed')).toBe(false);
    const row = harness.db.select().from(pages).get();
    expect(createHash('sha256').update(kept).digest('hex')).toBe(row?.sha256);
    expect(response.headers).toMatchObject({
      'content-type': 'image/jpeg',
      'x-content-type-options': 'nosniff',
      'content-security-policy': "sandbox; default-src 'none'",
    });
    expect(response.headers['content-disposition']).toMatch(/^inline; filename="[A-Z0-9]{4}-1c\.jpeg"$/);
  });

  it('is a PDF, without the name of its author', async () => {
    const { client, answerOf } = await openSheet();
    const added = (await add(client, answerOf('c'), await pdf(3)).expect(201)).body as SheetPage;
    expect(added).toMatchObject({ mediaType: 'application/pdf', pageCount: 3 });
    const response = await fetchFile(client, added.id).expect(200);
    expect(response.headers['content-disposition']).toMatch(/^attachment; filename="[A-Z0-9]{4}-1c\.pdf"$/);
    const kept = await PDFDocument.load(response.body as Buffer, { updateMetadata: false });
    expect([kept.getPageCount(), kept.getAuthor()]).toEqual([3, undefined]);
  });

  it.each([
    ['words', () => Promise.resolve(Buffer.from('no picture at all')), 'A worked page is a PDF, or a picture'],
    [
      'half a picture',
      async () => (await picture(600, 400).png().toBuffer()).subarray(0, 300),
      'The picture is broken',
    ],
    ['half a PDF', async () => (await pdf()).subarray(0, 200), 'The PDF is broken'],
    [
      'a PDF with a script',
      () =>
        pdf(1, (document) => {
          document.catalog.set(
            PDFName.of('OpenAction'),
            document.context.obj({ S: 'JavaScript', JS: PDFString.of('app.alert(1)') }),
          );
        }),
      'carries a script',
    ],
    [
      'a PDF behind a password',
      () =>
        pdf(1, (document) => {
          document.context.trailerInfo.Encrypt = document.context.register(
            document.context.obj({ Filter: 'Standard' }),
          );
        }),
      'protected by a password',
    ],
    ['too long a PDF', () => pdf(21), 'has 21 pages'],
    ['a small PDF that unfolds without end', unfoldingPdf, 'The PDF is broken'],
  ])('is refused as %s, with what to do', async (_, make, sentence) => {
    const { client, answerOf } = await openSheet();
    const refused = await add(client, answerOf('c'), await make()).expect(415);
    expect(refused.body).toMatchObject({ type: '/errors/wrong-media-type' });
    expect((refused.body as { detail: string }).detail).toContain(sentence);
    expect(harness.db.select().from(pages).all()).toHaveLength(0);
  });

  it('is refused above 25 MB', async () => {
    const { client, answerOf } = await openSheet();
    const refused = await add(client, answerOf('c'), Buffer.alloc(25 * 1024 * 1024 + 1)).expect(413);
    expect(refused.body).toMatchObject({ type: '/errors/too-large' });
    await add(client, answerOf('c'), Buffer.alloc(0)).expect(400);
  });

  it('is one page for one key, however often it is sent', async () => {
    const { client, answerOf } = await openSheet();
    const file = await picture().png().toBuffer();
    const key = newId();
    const first = await add(client, answerOf('c'), file, key).expect(201);
    expect((await add(client, answerOf('c'), file, key).expect(201)).body).toEqual(first.body);
    expect(harness.db.select().from(pages).all()).toHaveLength(1);
  });

  it('goes only where pages are asked for, and only as many as are taken', async () => {
    const { client, answerOf } = await openSheet();
    await add(client, answerOf('a'), await pdf()).expect(409);
    await add(client, answerOf('c'), await pdf(19)).expect(201);
    const full = await add(client, answerOf('c'), await pdf(2)).expect(409);
    expect((full.body as { detail: string }).detail).toContain('at most 20 pages, and 19 are here');
  });

  it('can be taken off and put back until closing', async () => {
    const { client, answerOf } = await openSheet();
    const { id } = (await add(client, answerOf('c'), await pdf()).expect(201)).body as SheetPage;
    await client.delete(`/api/pages/${id}`).expect(204);
    expect(harness.db.select().from(pages).get()?.removedAt).toBe(harness.clock.now());
    await client.post(`/api/pages/${id}/return`).expect(200);
    harness.clock.advance(48 * hour);
    const late = await client.delete(`/api/pages/${id}`).expect(409);
    expect((late.body as { detail: string }).detail).toContain('2 worked pages');
    await add(client, answerOf('c'), await pdf()).expect(409);
    expect(harness.db.select().from(pages).get()?.removedAt).toBeNull();
  });

  it('is its student’s alone until it is handed in, then for those who mark too', async () => {
    const { client, answerOf, other, lead, course, setId, mover } = await openSheet();
    const marker = await harness.agent(harness.makeMember(course.id, 'marker'));
    const { id } = (await add(client, answerOf('c'), await pdf()).expect(201)).body as SheetPage;
    await marker.get(`/api/pages/${id}`).expect(404);
    await (await harness.agent(lead)).get(`/api/pages/${id}`).expect(404);
    await (await harness.agent(other)).get(`/api/pages/${id}`).expect(404);
    await (await harness.agent(other)).delete(`/api/pages/${id}`).expect(404);
    await (await harness.agent(null)).get(`/api/pages/${id}`).expect(401);

    await moveStage(harness.context, setId, 'closed', mover, presentSet(harness.db, setId).version);
    await checkClosedSet(harness.context, setId);
    await fetchFile(marker, id).expect(200);
    await (await harness.agent(other)).get(`/api/pages/${id}`).expect(404);
    // An empty field beside a page is no empty answer.
    const answer = harness.db
      .select()
      .from(answers)
      .all()
      .find((row) => row.id === answerOf('c'));
    expect(answer?.state).toBe('waits');
    expect(
      harness.db
        .select()
        .from(marks)
        .all()
        .some((mark) => mark.answerId === answer?.id),
    ).toBe(false);
  });
});

/** A few kilobytes that two rounds of inflation make 400 MB of. */
function unfoldingPdf(): Promise<Buffer> {
  const once = deflateSync(Buffer.alloc(400 * 1024 * 1024), { level: 9 });
  const stream = deflateSync(once, { level: 9 });
  const head = Buffer.from(
    [
      '%PDF-1.7',
      '1 0 obj\n<< /Type /Catalog /Pages 2 0 R >>\nendobj',
      '2 0 obj\n<< /Type /Pages /Kids [] /Count 0 >>\nendobj',
      `3 0 obj\n<< /Type /ObjStm /N 1 /First 4 /Filter [/FlateDecode /FlateDecode] /Length ${String(stream.length)} >>\nstream\n`,
    ].join('\n'),
  );
  const tail = Buffer.from('\nendstream\nendobj\ntrailer\n<< /Root 1 0 R >>\n%%EOF\n');
  return Promise.resolve(Buffer.concat([head, stream, tail]));
}
