import type { MessagePort } from 'node:worker_threads';
import { KeyEvaluator, type KeyOutcome, type KeyRequest } from './key-task';

const evaluator = new KeyEvaluator();

/** A batch of expressions, and where to say that it has been begun. */
interface Task {
  readonly batch: readonly KeyRequest[];
  readonly begun: MessagePort;
}

/** What a worker of the pool does: evaluates a batch of expressions. */
export default function evaluateBatch({ batch, begun }: Task): KeyOutcome[] {
  begun.postMessage(null);
  return batch.map((request) => evaluator.evaluate(request));
}
