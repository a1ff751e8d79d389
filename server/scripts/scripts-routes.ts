import { largestUpload, scriptsRoutes } from '@shared/scripts';
import { membershipFor, type SignedIn } from '../access/policy';
import type { Context } from '../context';
import { receiveBody } from '../files/receive-body';
import { sendFile } from '../files/send-file';
import { notFound } from '../http/errors';
import type { Serve } from '../http/serve';
import { demandSet } from '../sets/set-queries';
import { scriptOf, type ScriptRow } from './begin-script';
import { checkSubmission } from './check-submission';
import { openSheet } from './open-sheet';
import { presentReceipt } from './present-receipt';
import { demandOpened, listSheets, presentSheet } from './present-sheet';
import { saveAnswer } from './save-answer';
import { submitSheet } from './submit-sheet';
import { addPage, readablePage, removePage, restorePage } from './worked-pages';

/** Adds the routes of sheets: answering, worked pages, handing in, receipts. */
export function addScriptsRoutes(serve: Serve, context: Context): void {
  const { db, clock, files, log } = context;

  function membershipIn(user: SignedIn, setId: string): string {
    return membershipFor(user, 'answer a sheet', demandSet(db, setId).set.courseId).id;
  }

  function ownScript(user: SignedIn, setId: string, what: string): ScriptRow {
    const script = scriptOf(db, setId, membershipIn(user, setId));
    if (!script) throw notFound(what);
    return script;
  }

  serve(scriptsRoutes.sheets, ({ user, params }) => {
    const { id } = membershipFor(user, 'answer a sheet', params.courseId);
    const items = listSheets(db, params.courseId, id, clock.now());
    return { items, total: items.length, now: clock.now() };
  });

  serve(scriptsRoutes.sheet, async ({ user, params }) => {
    const membershipId = membershipIn(user, params.setId);
    demandOpened(db, params.setId);
    const script = await openSheet(context, params.setId, membershipId);
    return presentSheet(db, params.setId, script, clock.now());
  });

  serve(scriptsRoutes.saveAnswer, ({ user, params, body, version, idempotencyKey }) =>
    saveAnswer(db, user, { answerId: params.answerId, text: body.text, version, idempotencyKey, now: clock.now() }),
  );

  serve(scriptsRoutes.addPage, async ({ user, params, request, idempotencyKey }) => {
    const page = await addPage(
      context,
      user,
      params.answerId,
      () => receiveBody(request, largestUpload),
      idempotencyKey,
    );
    // A repeated page was not read from the request.
    request.resume();
    return page;
  });

  serve(scriptsRoutes.removePage, ({ user, params }) => {
    removePage(context, user, params.pageId);
    return {};
  });

  serve(scriptsRoutes.restorePage, ({ user, params }) => restorePage(context, user, params.pageId));

  serve(scriptsRoutes.page, async ({ user, params, response }) => {
    await sendFile(files, response, readablePage(db, user, params.pageId, clock.now()));
  });

  serve(scriptsRoutes.submitSheet, ({ user, params, idempotencyKey }) => {
    const script = ownScript(user, params.setId, 'sheet');
    const submission = submitSheet(db, script, { idempotencyKey, now: clock.now() });
    // The receipt does not wait for the checks, and says nothing of them; at closing they are made where they are missing.
    void checkSubmission(context, submission.id).catch((error: unknown) => {
      log.error({ submissionId: submission.id, error: String(error) }, 'a check broke off');
    });
    return presentReceipt(db, script, clock.now());
  });

  serve(scriptsRoutes.receipt, ({ user, params }) =>
    presentReceipt(db, ownScript(user, params.setId, 'receipt'), clock.now()),
  );
}
