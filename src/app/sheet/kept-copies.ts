import * as z from 'zod';

/** What was typed and is not acknowledged yet, as this browser keeps it. */
const keptCopy = z.object({
  text: z.string(),
  /** The saved version that it was typed over. */
  version: z.number().int(),
  /** Under which it is sent. */
  key: z.string(),
  /** Texts that were sent and may have been saved without our hearing of it. */
  sent: z.array(z.string()),
  at: z.number(),
});
export type KeptCopy = z.infer<typeof keptCopy>;

/**
 * Copies of what is typed on one sheet until the server has acknowledged it. They survive a closed page, a crash and a lost
 * connection. One place for each student and set, so that a shared computer mixes nothing up.
 */
export class KeptCopies {
  private readonly place: string;

  constructor(membershipId: string, setId: string) {
    this.place = `halfsilver sheet ${membershipId} ${setId}`;
  }

  /** All copies, by answer. What cannot be read counts as none. */
  all(): Readonly<Record<string, KeptCopy>> {
    try {
      const parsed = z.record(z.string(), keptCopy).safeParse(JSON.parse(localStorage.getItem(this.place) ?? '{}'));
      return parsed.success ? parsed.data : {};
    } catch {
      // Storage can be switched off, or hold what somebody else wrote.
      return {};
    }
  }

  /** @returns whether the copy is kept: storage can be full or switched off */
  keep(answerId: string, copy: KeptCopy): boolean {
    return this.write({ ...this.all(), [answerId]: copy });
  }

  forget(answerId: string): void {
    const { [answerId]: gone, ...rest } = this.all();
    if (gone) this.write(rest);
  }

  private write(copies: Readonly<Record<string, KeptCopy>>): boolean {
    try {
      if (Object.keys(copies).length === 0) localStorage.removeItem(this.place);
      else localStorage.setItem(this.place, JSON.stringify(copies));
      return true;
    } catch {
      return false;
    }
  }
}
