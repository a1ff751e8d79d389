import * as z from 'zod';
import type { BenchAnswer } from '@shared/marking';
import type { Criterion } from '@shared/problems';

const draft = z.object({
  awarded: z.array(z.string()),
  remark: z.string(),
  /** Why a mark is changed that is not one's own. */
  reason: z.string(),
  /** One save, however often it is tried. */
  key: z.string(),
});

/** What a marker has put down for an answer and not saved yet. */
export type BenchDraft = Readonly<z.infer<typeof draft>>;

/** The draft that an answer begins with: the mark that stands, or what the check proposes. */
export function firstDraft(answer: BenchAnswer): BenchDraft {
  const { standing } = answer;
  return {
    awarded: standing
      ? standing.criteria.filter((each) => each.awarded).map((each) => each.criterionId)
      : answer.proposed,
    remark: standing?.remark ?? '',
    reason: '',
    key: crypto.randomUUID(),
  };
}

/** The marks of the criteria that are awarded. */
export function totalOf(awarded: readonly string[], scheme: readonly Criterion[]): number {
  const total = scheme.filter((each) => awarded.includes(each.id)).reduce((sum, each) => sum + each.marks, 0);
  return Math.round(total * 1e6) / 1e6;
}

const place = (answerId: string) => `halfsilver bench ${answerId}`;

/** Keeps a draft in this window, so that neither a lost hold nor a reload loses it. */
export function keepDraft(answerId: string, kept: BenchDraft): void {
  sessionStorage.setItem(place(answerId), JSON.stringify(kept));
}

/** A draft that was kept; null where there is none. */
export function keptDraft(answerId: string): BenchDraft | null {
  const text = sessionStorage.getItem(place(answerId));
  if (text === null) return null;
  const parsed = draft.safeParse(JSON.parse(text));
  return parsed.success ? parsed.data : null;
}

/** Forgets a draft that was saved or given up. */
export function dropDraft(answerId: string): void {
  sessionStorage.removeItem(place(answerId));
}
