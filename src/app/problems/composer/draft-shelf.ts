import { Injectable } from '@angular/core';
import * as z from 'zod';
import { problemDraft, type ProblemDraft } from '@shared/problem-draft';

const shelved = z.object({ version: z.number().int(), draft: problemDraft });
export type Shelved = z.infer<typeof shelved>;

/** Keeps in this browser what the server has not yet acknowledged, so that a lost connection or tab loses nothing. */
@Injectable({ providedIn: 'root' })
export class DraftShelf {
  /** @param version the version that was being changed */
  put(problemId: string, version: number, draft: ProblemDraft): void {
    try {
      localStorage.setItem(this.name(problemId), JSON.stringify({ version, draft }));
    } catch {
      // A browser may refuse storage, or have none left; the page itself still holds the draft.
    }
  }

  take(problemId: string): Shelved | null {
    const parsed = shelved.safeParse(this.read(problemId));
    return parsed.success ? parsed.data : null;
  }

  clear(problemId: string): void {
    try {
      localStorage.removeItem(this.name(problemId));
    } catch {
      // As above.
    }
  }

  private read(problemId: string): unknown {
    try {
      return JSON.parse(localStorage.getItem(this.name(problemId)) ?? 'null');
    } catch {
      return null;
    }
  }

  private name(problemId: string): string {
    return `halfsilver.draft.${problemId}`;
  }
}
