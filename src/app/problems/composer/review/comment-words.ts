import { moveLine, placeOfLine } from '@shared/comment-place';
import type { ProblemDraft } from '@shared/problem-draft';
import { partLabel } from '@shared/problems';
import type { CommentAnchor, ProblemComment } from '@shared/review';

/** Where a comment stands on the page. */
export interface CommentPlace {
  /** In words, for example `line 3` or `(b) key`. */
  readonly words: string;
  /** The line of the statement, from 1; null where it is about something else. */
  readonly line: number | null;
  /** The tab of the part that it is about. */
  readonly tab: string | null;
  /** What has become of it since, in a sentence; empty where nothing has. */
  readonly change: string;
}

/**
 * Where a comment stands in a draft as it is typed.
 *
 * @param saved the statement that line numbers are of
 */
export function placeOfComment(anchor: CommentAnchor, saved: string, draft: ProblemDraft): CommentPlace {
  if (anchor.kind === 'problem') return { words: 'the problem', line: null, tab: null, change: '' };
  if (anchor.kind === 'line') {
    const moved = moveLine(saved, draft.statement, anchor.line);
    const { line, hasChanged } = placeOfLine(draft.statement, { ...anchor, line: moved });
    const change = hasChanged ? 'The line has changed since.' : '';
    return { words: `line ${String(line)}`, line, tab: null, change };
  }
  const index = draft.parts.findIndex(({ id }) => id === anchor.partId);
  const part = draft.parts[index];
  if (!part) return { words: 'a part', line: null, tab: null, change: 'The part is gone since.' };
  const label = partLabel(index);
  const place = { line: null, tab: label, change: '' };
  if (anchor.kind === 'part') return { ...place, words: `(${label})` };
  if (anchor.kind === 'key') return { ...place, words: `(${label}) key` };
  const criterion = part.criteria.find(({ id }) => id === anchor.criterionId);
  return criterion
    ? { ...place, words: `(${label}) ${criterion.name}` }
    : { ...place, words: `(${label}) criterion`, change: 'The criterion is gone since.' };
}

/** The initials of a name: first letters of its first and last word. */
export function initialsOf(name: string): string {
  const names = name.trim().split(/\s+/);
  const letters = names.length < 2 ? (names[0] ?? '').slice(0, 2) : `${names[0] ?? ''} ${names.at(-1) ?? ''}`;
  return letters
    .split(' ')
    .map((each) => (names.length < 2 ? each : each.charAt(0)))
    .join('')
    .toUpperCase();
}

/** A line of the statement that somebody has commented on. */
export interface NotedLine {
  readonly line: number;
  readonly initials: string;
  /** Whether its comment is the one that is looked at. */
  readonly isShown: boolean;
}

/** The lines that open comments stand at, each once, with the initials of those who wrote them. */
export function notedLines(
  comments: readonly { readonly comment: ProblemComment; readonly place: CommentPlace }[],
  shownId: string | null,
): readonly NotedLine[] {
  const lines = new Map<number, NotedLine>();
  for (const { comment, place } of comments) {
    if (comment.settled || place.line === null) continue;
    const before = lines.get(place.line);
    const names = new Set([...(before?.initials.split(' ') ?? []), initialsOf(comment.by.name)]);
    const isShown = before?.isShown === true || comment.id === shownId;
    lines.set(place.line, { line: place.line, initials: [...names].join(' '), isShown });
  }
  return [...lines.values()].sort((a, b) => a.line - b.line);
}
