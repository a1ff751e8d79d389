import type * as z from 'zod';
import type { Context } from '../context';

/** What runs a job is told about it. */
export interface JobAtWork<Input> {
  readonly jobId: string;
  readonly input: Input;
  /** Who started it. */
  readonly startedById: string;
  /**
   * Says how far it is; ends the job with {@link JobCancelled} where somebody cancelled it. Between two calls as little as
   * a second should pass.
   */
  readonly progress: (done: number, total: number) => void;
}

/** A kind of long work. Running it twice must come to the same as running it once: after a restart it begins anew. */
export interface JobKind<Input = unknown> {
  /** As it is named in its row and on pages. */
  readonly kind: string;
  readonly input: z.ZodType<Input>;
  /** Writes what it comes to in one transaction at the end, so that it is done whole or not at all. */
  run(context: Context, work: JobAtWork<Input>): Promise<void>;
}

/** Thrown by `progress` where the job was cancelled. */
export class JobCancelled extends Error {}

/** A failure that is meant for the person who started the job. */
export class JobFailure extends Error {}

const known = new Map<string, (context: Context, work: JobAtWork<unknown>) => Promise<void>>();

/** Makes a kind of work known, under its name. */
export function defineJob<Input>(kind: JobKind<Input>): JobKind<Input> {
  known.set(kind.kind, (context, work) => kind.run(context, { ...work, input: kind.input.parse(work.input) }));
  return kind;
}

/** What runs a kind of work; undefined for one that this program does not know. */
export function runnerOf(kind: string) {
  return known.get(kind);
}
