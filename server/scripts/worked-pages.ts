import { createHash } from 'node:crypto';
import { and, eq } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import { answers, memberships, pages, piles, revisions, scripts, setProblems, sets } from '@drizzle/schema';
import { partLabel } from '@shared/problems';
import { mostPages, type SheetPage } from '@shared/scripts';
import { can, type SignedIn } from '../access/policy';
import type { Context } from '../context';
import type { SentFile } from '../files/send-file';
import { workedPageFile } from '../files/worked-page-file';
import { conflict, notFound } from '../http/errors';
import { newId } from '../http/new-id';
import { marksAreGiven } from '../marking/find-pile';
import { recordLook } from '../record/record-look';
import { isReleased, isReleasedTo } from '../results/find-set';
import { demandOpen, ownAnswer, ownPage, type OwnAnswer } from './own-answer';
import { pagesOf, type PageRow } from './saved-answers';

/**
 * Adds a worked page: the file is on the disk before its row, so that no row ever names a file that is not there. The same
 * key twice is one page.
 *
 * @param receive brings the file; called only where one more is taken
 * @throws RequestError 404; 409 after closing, or where the part takes no page or no more; 413; 415
 */
export async function addPage(
  context: Context,
  person: SignedIn,
  answerId: string,
  receive: () => Promise<Buffer>,
  idempotencyKey: string,
): Promise<SheetPage> {
  const { db, clock, files } = context;
  const look = (): PageRow | undefined => {
    const own = ownAnswer(db, person, answerId);
    const done = pageOfKey(db, answerId, idempotencyKey);
    if (done) return done;
    demandOpen(db, own, clock.now());
    demandRoom(db, own, 1);
    return undefined;
  };
  const before = look();
  if (before) return presentPage(before);
  const file = await workedPageFile(await receive());
  const storageKey = await files.keep(file.bytes);
  try {
    const row = db.transaction(
      (tx) => {
        const own = ownAnswer(tx, person, answerId);
        const done = pageOfKey(tx, answerId, idempotencyKey);
        if (done) return done;
        demandOpen(tx, own, clock.now());
        demandRoom(tx, own, file.pageCount);
        const added: PageRow = {
          id: newId(),
          answerId,
          storageKey,
          sha256: createHash('sha256').update(file.bytes).digest('hex'),
          mediaType: file.mediaType,
          bytes: file.bytes.byteLength,
          pageCount: file.pageCount,
          addedAt: clock.now(),
          removedAt: null,
          idempotencyKey,
        };
        tx.insert(pages).values(added).run();
        return added;
      },
      { behavior: 'immediate' },
    );
    if (row.storageKey !== storageKey) await files.drop(storageKey);
    return presentPage(row);
  } catch (error) {
    await files.drop(storageKey);
    throw error;
  }
}

/** Takes a page off the sheet; its file stays, since what was handed in may name it. @throws RequestError 404, 409 after closing */
export function removePage(context: Context, person: SignedIn, pageId: string): void {
  const { db, clock } = context;
  db.transaction(
    (tx) => {
      const own = ownPage(tx, person, pageId);
      demandOpen(tx, own, clock.now());
      if (own.page.removedAt === null)
        tx.update(pages).set({ removedAt: clock.now() }).where(eq(pages.id, pageId)).run();
    },
    { behavior: 'immediate' },
  );
}

/** Puts a removed page back. @throws RequestError 404, 409 after closing or where there is no room any more */
export function restorePage(context: Context, person: SignedIn, pageId: string): SheetPage {
  const { db, clock } = context;
  return db.transaction(
    (tx) => {
      const own = ownPage(tx, person, pageId);
      demandOpen(tx, own, clock.now());
      if (own.page.removedAt !== null) {
        demandRoom(tx, own, own.page.pageCount);
        tx.update(pages).set({ removedAt: null }).where(eq(pages.id, pageId)).run();
      }
      return presentPage(own.page);
    },
    { behavior: 'immediate' },
  );
}

function pageOfKey(tx: Queryable, answerId: string, idempotencyKey: string): PageRow | undefined {
  return tx
    .select()
    .from(pages)
    .where(and(eq(pages.answerId, answerId), eq(pages.idempotencyKey, idempotencyKey)))
    .get();
}

function demandRoom(tx: Queryable, { answer }: Pick<OwnAnswer, 'answer'>, coming: number): void {
  if (!placeOf(tx, answer.id)?.part.workedPage) throw conflict('This part takes no worked page.');
  const there = pagesOf(tx, answer.id).reduce((sum, page) => sum + page.pageCount, 0);
  if (there + coming > mostPages)
    throw conflict(
      `A part takes at most ${String(mostPages)} pages, and ${String(there)} ${there === 1 ? 'is' : 'are'} here. Take one off first.`,
    );
}

/** Where an answer belongs: problem and part. */
function placeOf(tx: Queryable, answerId: string) {
  const row = tx
    .select({ pile: piles, setProblem: setProblems, content: revisions.content })
    .from(answers)
    .innerJoin(piles, eq(piles.id, answers.pileId))
    .innerJoin(setProblems, eq(setProblems.id, piles.setProblemId))
    .innerJoin(revisions, eq(revisions.id, setProblems.revisionId))
    .where(eq(answers.id, answerId))
    .get();
  const index = row?.content.parts.findIndex((part) => part.id === row.pile.partId) ?? -1;
  const part = row?.content.parts[index];
  return row && part && { position: row.setProblem.position, part, label: partLabel(index) };
}

/**
 * The file of a page, for the student whose it is, and for those who mark the course once it was handed in. Its name carries
 * the script's code, never a student's name. Once marks are out, that somebody of the team looks is recorded.
 *
 * @throws RequestError 404 for everybody else
 */
export function readablePage(tx: Queryable, person: SignedIn, pageId: string, now: number): SentFile {
  const row = tx
    .select({ page: pages, answer: answers, script: scripts, set: sets, userId: memberships.userId })
    .from(pages)
    .innerJoin(answers, eq(answers.id, pages.answerId))
    .innerJoin(scripts, eq(scripts.id, answers.scriptId))
    .innerJoin(sets, eq(sets.id, scripts.setId))
    .innerJoin(memberships, eq(memberships.id, scripts.membershipId))
    .where(eq(pages.id, pageId))
    .get();
  if (!row) throw notFound('page');
  const { page, answer, script, set, userId } = row;
  const own = userId === person.id && person.memberships.has(set.courseId);
  const handedIn = answer.state !== null && (marksAreGiven(set.stage) || isReleased(set.stage));
  if (!own && !(handedIn && can(person, 'read piles', set.courseId))) throw notFound('page');
  if (!own && isReleasedTo(set, script)) recordLook(tx, { set, script }, person, now);
  const place = placeOf(tx, answer.id);
  const ending = page.mediaType === 'application/pdf' ? 'pdf' : page.mediaType.replace('image/', '');
  return {
    storageKey: page.storageKey,
    mediaType: page.mediaType,
    bytes: page.bytes,
    fileName: `${script.code}-${String(place?.position ?? 0)}${place?.label ?? ''}.${ending}`,
  };
}

/** A page as its student sees it. */
export function presentPage(row: PageRow): SheetPage {
  const { id, mediaType, bytes, pageCount, addedAt } = row;
  return { id, mediaType, bytes, pageCount, addedAt, path: `/pages/${id}` };
}
