import { eq } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import { courses } from '@drizzle/schema';
import type { Convention } from '@shared/primitives';
import { keyLanguageRoute } from '@shared/key-language';
import { keyPictureRoute } from '@shared/key-picture';
import { problemRoutes as routes } from '@shared/problem-routes';
import { readDraft } from '@shared/read-draft';
import { can, demand, membershipFor, type SignedIn } from '../access/policy';
import type { Context } from '../context';
import { conventionOf } from '../courses/convention';
import { conflict, invalidField, notFound } from '../http/errors';
import type { Serve } from '../http/serve';
import { createKeyLanguage } from './key-language';
import { drawKey } from './key-picture';
import { auditForUse } from './audit-rules';
import { ProblemFileError, readProblemFile } from './problem-file';
import { writeProblemFile } from './write-problem-file';
import { latestRevision, listProblems, listRevisions, presentRevision } from './problem-queries';
import {
  beginProblem,
  copyProblem,
  createFromContent,
  demandProblem,
  makeRevision,
  readProblem,
  saveDraft,
  setProblemStatus,
} from './problem-rules';
import { demandReader } from './review-rules';
import { sampleDraft } from './sample-draft';

/** The bank: problems, their drafts and revisions. */
export function addProblemRoutes(serve: Serve, context: Context): void {
  const { db, keys, clock } = context;
  const language = createKeyLanguage(keys);
  const deed = (user: { readonly id: string }) => ({ personId: user.id, now: clock.now() });

  serve(routes.problems, ({ user, query }) => {
    demand(user, 'read problems');
    const { items, total } = listProblems(db, user.id, query);
    return { items: [...items], total };
  });

  serve(routes.beginProblem, ({ user, body }) => {
    demand(user, 'write problems');
    const convention = conventionFor(db, user, body.courseId);
    return beginProblem(db, { title: body.title, convention }, deed(user));
  });

  serve(routes.importProblem, ({ user, body }) => {
    demand(user, 'write problems');
    try {
      return createFromContent(db, readProblemFile(body.text), deed(user));
    } catch (error) {
      if (error instanceof ProblemFileError) throw invalidField(['text'], error.message);
      throw error;
    }
  });

  serve(routes.sampleProblem, async ({ user, body }) => {
    demand(user, 'review problems');
    return sampleDraft(keys, body.draft, body);
  });

  serve(routes.problem, ({ user, params }) => {
    demandReader(db, user, params.problemId);
    const problem = readProblem(db, params.problemId, user.id);
    return can(user, 'write problems') ? problem : { ...problem, nextStatuses: [] };
  });

  serve(routes.saveDraft, ({ user, params, body, version }) => {
    demand(user, 'write problems');
    return saveDraft(db, params.problemId, body, version, deed(user));
  });

  serve(routes.makeRevision, ({ user, params, body, version }) => {
    demand(user, 'write problems');
    return makeRevision(db, keys, params.problemId, { reason: body.reason, version }, deed(user));
  });

  serve(routes.revisions, ({ user, params }) => {
    demandReader(db, user, params.problemId);
    const items = listRevisions(db, params.problemId).map(presentRevision);
    return { items, total: items.length };
  });

  serve(routes.revision, ({ user, params }) => {
    demandReader(db, user, params.problemId);
    const found = listRevisions(db, params.problemId).find((revision) => revision.number === params.number);
    if (!found) throw notFound('revision');
    return presentRevision(found);
  });

  serve(routes.setProblemStatus, async ({ user, params, body, version }) => {
    demand(user, 'write problems');
    demandProblem(db, params.problemId, user.id);
    if (body.status === 'ready') await auditForUse(context, params.problemId, user.id);
    return setProblemStatus(db, params.problemId, { status: body.status, version }, deed(user));
  });

  serve(routes.copyProblem, ({ user, params }) => {
    demand(user, 'write problems');
    return copyProblem(db, params.problemId, deed(user));
  });

  serve(routes.problemFile, ({ user, params }) => {
    demand(user, 'read problems');
    const { draft } = demandProblem(db, params.problemId, user.id);
    const content = readDraft(draft).content ?? latestRevision(db, params.problemId)?.content;
    if (!content)
      throw conflict('Something in the draft is wrong and there is no revision yet, so there is no file to write.');
    return { name: fileName(content.title), text: writeProblemFile(content) };
  });

  serve(keyPictureRoute, ({ user, body }) => {
    demand(user, 'review problems');
    return drawKey(keys, body);
  });

  serve(keyLanguageRoute, ({ user, query }) => {
    demand(user, 'review problems');
    return query.examples === 'run' ? language.withExamples() : language.plain;
  });
}

/** The convention of a course that the person leads. @throws RequestError 403 where they do not, 404 where it is gone */
function conventionFor(tx: Queryable, user: SignedIn, courseId: string): Convention {
  membershipFor(user, 'change sets', courseId);
  const row = tx.select().from(courses).where(eq(courses.id, courseId)).get();
  if (!row) throw notFound('course');
  return conventionOf(row);
}

function fileName(title: string): string {
  const plain = title
    .normalize('NFKD')
    .toLowerCase()
    .replace(/[^a-z0-9]+/g, '-')
    .replace(/^-|-$/g, '');
  return `${plain || 'problem'}.md`;
}
