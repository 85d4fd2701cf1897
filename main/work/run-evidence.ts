import { availableParallelism } from 'node:os';
import { Worker } from 'node:worker_threads';
import type { Material, Task, TaskResult } from '../../engine/evidence/index.ts';
import { workerPath } from './find-worker.ts';

export interface EvidenceWorkerData {
  readonly material: Material;
  /** One Int32: anything but 0 asks every piece of work to stop where it is. */
  readonly stop: SharedArrayBuffer;
}

/** A piece of work for whichever worker is free. */
export interface EvidenceAsked {
  readonly number: number;
  readonly task: Task;
}

export type EvidenceMessage =
  | { readonly kind: 'progress'; readonly number: number; readonly fraction: number }
  | { readonly kind: 'done'; readonly number: number; readonly result: TaskResult | null };

export interface EvidenceOptions {
  /** How far all of it is, 0 to 1. */
  readonly onProgress?: (fraction: number) => void;
  /** Stops everything; there is no result then. */
  readonly signal?: AbortSignal;
  /** Workers side by side; as many as there are cores unless told. The results do not depend on it. */
  readonly workers?: number;
}

/** Each worker holds the study's counts and one model: more of them than this would fill memory. */
const mostWorkers = 8;

/**
 * Makes pieces of evidence side by side in workers; their results in the order of the tasks, or null
 * where it was stopped. Long tasks are begun first, so that no worker is left with one at the end.
 */
export async function runEvidence(
  material: Material,
  tasks: readonly Task[],
  { onProgress, signal, workers = availableParallelism() }: EvidenceOptions = {},
): Promise<readonly TaskResult[] | null> {
  const stop = new SharedArrayBuffer(4);
  const ask = (): void => {
    Atomics.store(new Int32Array(stop), 0, 1);
  };
  if (signal?.aborted === true) return null;
  signal?.addEventListener('abort', ask, { once: true });
  const weights = tasks.map(weightOf);
  const waiting = tasks.map((_task, number) => number).sort((a, b) => weights[b] - weights[a]);
  const fractions = new Float64Array(tasks.length);
  const all = weights.reduce((sum, weight) => sum + weight, 0);
  const report = (number: number, fraction: number): void => {
    fractions[number] = fraction;
    onProgress?.(weights.reduce((sum, weight, i) => sum + weight * fractions[i], 0) / all);
  };
  const results: (TaskResult | null)[] = tasks.map(() => null);
  const data: EvidenceWorkerData = { material, stop };
  const count = Math.max(1, Math.min(workers, mostWorkers, tasks.length));
  try {
    await Promise.all(
      Array.from({ length: count }, () =>
        serve(
          data,
          () => {
            const number = signal?.aborted === true ? undefined : waiting.shift();
            return number === undefined ? null : { number, task: tasks[number] };
          },
          report,
          results,
        ),
      ),
    );
  } catch (error) {
    ask();
    throw error;
  } finally {
    signal?.removeEventListener('abort', ask);
  }
  const made = results.filter((result) => result !== null);
  return made.length === tasks.length ? made : null;
}

/** One worker, given pieces of work until there are none. */
function serve(
  workerData: EvidenceWorkerData,
  next: () => EvidenceAsked | null,
  report: (number: number, fraction: number) => void,
  results: (TaskResult | null)[],
): Promise<void> {
  return new Promise((resolve, reject) => {
    const worker = new Worker(workerPath('evidence.worker'), { workerData });
    const go = (): void => {
      const asked = next();
      if (asked !== null) worker.postMessage(asked);
      else {
        resolve();
        void worker.terminate();
      }
    };
    worker.on('message', (message: EvidenceMessage) => {
      if (message.kind === 'progress') return report(message.number, message.fraction);
      results[message.number] = message.result;
      report(message.number, 1);
      go();
    });
    worker.on('error', (error) => {
      void worker.terminate();
      reject(error);
    });
    // After its last piece this changes nothing: the promise is settled.
    worker.on('exit', (code) => {
      reject(new Error(`runEvidence: a worker ended with code ${code} before its work was done`));
    });
    go();
  });
}

/** About how long a task takes beside others: fits times themes. */
function weightOf(task: Task): number {
  switch (task.kind) {
    case 'base':
      return 0.1;
    case 'refit':
    case 'shuffled fit':
      return 1;
    case 'number':
      return (1 + task.asked.groups.length) * (4 + task.asked.themes);
  }
}
