import type { Queryable } from '@drizzle/client';
import { letters } from '@drizzle/schema';
import { newId } from '../http/new-id';

/** The kinds of letter. The first two carry a secret link, which is made when the letter leaves. */
export const letterKinds = [
  'invitation',
  'password reset',
  'receipt',
  'released',
  'allowance',
  'query answered',
] as const;
export type LetterKind = (typeof letterKinds)[number];

/** A letter to be sent. `{link}` in the text of the secret kinds stands for the link. */
export interface Letter {
  readonly kind: LetterKind;
  readonly userId: string;
  readonly subject: string;
  readonly text: string;
  /** When it is written. */
  readonly now: number;
  /** Not to leave before; at once where absent. */
  readonly dueAt?: number;
}

/** Queues a letter, in the transaction of what it tells of. */
export function queueLetter(tx: Queryable, letter: Letter): string {
  const id = newId();
  tx.insert(letters)
    .values({
      id,
      kind: letter.kind,
      userId: letter.userId,
      subject: letter.subject,
      text: letter.text,
      createdAt: letter.now,
      dueAt: letter.dueAt ?? letter.now,
    })
    .run();
  return id;
}

/** A letter as HTML: its paragraphs, escaped, with addresses as links. */
export function letterAsHtml(text: string): string {
  const escaped = text.replace(
    /[&<>"]/g,
    (sign) => ({ '&': '&amp;', '<': '&lt;', '>': '&gt;', '"': '&quot;' })[sign] ?? sign,
  );
  return escaped
    .split(/\n{2,}/)
    .map((paragraph) =>
      paragraph.replace(/\n/g, '<br>').replace(/https?:\/\/[^\s<]+/g, (link) => `<a href="${link}">${link}</a>`),
    )
    .map((paragraph) => `<p>${paragraph}</p>`)
    .join('\n');
}
