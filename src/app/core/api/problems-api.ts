import { Injectable, inject } from '@angular/core';
import { keyLanguageRoute } from '@shared/key-language';
import { keyPictureRoute } from '@shared/key-picture';
import type { ProblemDraft } from '@shared/problem-draft';
import { problemRoutes } from '@shared/problem-routes';
import type { ProblemStatus } from '@shared/problems';
import type * as z from 'zod';
import { ApiClient } from './api-client';

/** The bank: problems, their drafts and revisions. */
@Injectable({ providedIn: 'root' })
export class ProblemsApi {
  private readonly api = inject(ApiClient);

  problems(query: { search: string; status?: ProblemStatus | undefined; page: number }) {
    return this.api.call(problemRoutes.problems, { query });
  }

  beginProblem(courseId: string, title: string) {
    return this.api.call(problemRoutes.beginProblem, { body: { courseId, title } });
  }

  importProblem(text: string) {
    return this.api.call(problemRoutes.importProblem, { body: { text } });
  }

  sampleProblem(body: { draft: ProblemDraft; count?: number; shown?: number | undefined; seed?: string }) {
    return this.api.call(problemRoutes.sampleProblem, { body });
  }

  problem(problemId: string) {
    return this.api.call(problemRoutes.problem, { params: { problemId } });
  }

  saveDraft(problemId: string, version: number, draft: ProblemDraft) {
    return this.api.call(problemRoutes.saveDraft, { params: { problemId }, version, body: draft });
  }

  makeRevision(problemId: string, version: number, reason: string) {
    return this.api.call(problemRoutes.makeRevision, { params: { problemId }, version, body: { reason } });
  }

  revisions(problemId: string) {
    return this.api.call(problemRoutes.revisions, { params: { problemId } });
  }

  revision(problemId: string, number: number) {
    return this.api.call(problemRoutes.revision, { params: { problemId, number } });
  }

  setStatus(problemId: string, version: number, status: ProblemStatus) {
    return this.api.call(problemRoutes.setProblemStatus, { params: { problemId }, version, body: { status } });
  }

  copyProblem(problemId: string) {
    return this.api.call(problemRoutes.copyProblem, { params: { problemId } });
  }

  problemFile(problemId: string) {
    return this.api.call(problemRoutes.problemFile, { params: { problemId } });
  }

  keyLanguage(examples: 'run' | 'left out') {
    return this.api.call(keyLanguageRoute, { query: { examples } });
  }

  keyPicture(body: z.input<(typeof keyPictureRoute)['body']>) {
    return this.api.call(keyPictureRoute, { body });
  }
}
