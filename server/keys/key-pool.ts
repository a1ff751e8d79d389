import { availableParallelism } from 'node:os';
import { MessageChannel } from 'node:worker_threads';
import { Piscina } from 'piscina';
import type { KeyOutcome, KeyRequest } from './key-task';
import { longestEvaluation as longest, tooLong } from './limits';
import { workerFile } from './worker-file';

/** A batch may take as long as one runaway key and this much for each of the others. */
const forEach = 10;
const batchSize = 64;
/** Memory of one evaluation in MiB; what lists and matrices take is estimated before. */
const memory = 512;

/** Evaluates expressions in workers; a key that runs away costs its worker, and no other key. */
export interface KeyPool {
  /** @returns one outcome for each request, in order; an author's mistake never throws */
  evaluateMany(requests: readonly KeyRequest[]): Promise<readonly KeyOutcome[]>;
  close(): Promise<void>;
}

const tooLarge: KeyOutcome = {
  fault: { message: 'This key needs more memory than it may have; use smaller numbers.' },
};

/** Makes a pool of workers; they start when they are first needed. */
export function createKeyPool({ size = availableParallelism() }: { readonly size?: number }): KeyPool {
  let starting: Promise<Piscina> | undefined;
  let closed = false;

  const pool = (): Promise<Piscina> =>
    (starting ??= workerFile('key-worker', import.meta.url).then(
      (filename) =>
        new Piscina({
          filename,
          minThreads: 1,
          maxThreads: size,
          idleTimeout: 60_000,
          resourceLimits: { maxOldGenerationSizeMb: memory },
        }),
    ));

  async function run(batch: readonly KeyRequest[], limit: number): Promise<readonly KeyOutcome[] | 'long' | 'large'> {
    const workers = await pool();
    const stop = new AbortController();
    let timer: NodeJS.Timeout | undefined;
    // The time counts from when a worker takes the batch, not while it waits in the queue.
    const channel = new MessageChannel();
    channel.port1.on('message', () => {
      timer ??= setTimeout(() => {
        stop.abort();
      }, limit);
    });
    try {
      return (await workers.run(
        { batch, begun: channel.port2 },
        { signal: stop.signal, transferList: [channel.port2] },
      )) as readonly KeyOutcome[];
    } catch (error) {
      if (stop.signal.aborted) return 'long';
      if (error instanceof Error && 'code' in error && error.code === 'ERR_WORKER_OUT_OF_MEMORY') return 'large';
      throw error;
    } finally {
      clearTimeout(timer);
      channel.port1.close();
    }
  }

  async function evaluateBatch(batch: readonly KeyRequest[]): Promise<readonly KeyOutcome[]> {
    const outcome = await run(batch, longest + forEach * (batch.length - 1));
    if (outcome !== 'long' && outcome !== 'large') return outcome;
    if (batch.length === 1) return [outcome === 'long' ? tooLong : tooLarge];
    // One of them ran away: halve until it is alone, so that the others get their values.
    const half = Math.ceil(batch.length / 2);
    const [first, second] = await Promise.all([evaluateBatch(batch.slice(0, half)), evaluateBatch(batch.slice(half))]);
    return [...first, ...second];
  }

  return {
    async evaluateMany(requests) {
      if (closed) throw new Error('The pool of keys is closed.');
      const batches: (readonly KeyRequest[])[] = [];
      for (let at = 0; at < requests.length; at += batchSize) batches.push(requests.slice(at, at + batchSize));
      return (await Promise.all(batches.map(evaluateBatch))).flat();
    },
    async close() {
      closed = true;
      await (await starting)?.destroy();
    },
  };
}
