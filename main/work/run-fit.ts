import { availableParallelism } from 'node:os';
import { Worker } from 'node:worker_threads';
import type { Run, TracePoint } from '../../engine/model/index.ts';
import type { Prepared } from '../../engine/text/index.ts';
import type { FitDone, FitJob, FitRefused, PreviousFit } from '../../engine/themes/index.ts';
import { workerPath } from './find-worker.ts';
import type { RunProgress, SharedPool } from './pool.ts';

export interface FitWorkerData {
  readonly job: FitJob;
  /** One Int32: anything but 0 asks the fit to stop where it is. */
  readonly stop: SharedArrayBuffer;
  /** Workers that may help with a pool of runs, from 0. */
  readonly helpers: number;
  /** Whether they help with a small fit, too. */
  readonly always: boolean;
}

/** A run of the pool and its number; sent to the worker that finishes the pool. */
export interface RunMade {
  readonly kind: 'run';
  readonly number: number;
  readonly run: Run;
}

/** What a helper says. */
export type PoolMessage = RunProgress | RunMade | { readonly kind: 'helper done' };

/** What the worker that leads the fit says. */
export type FitMessage =
  | RunProgress
  | { readonly kind: 'pool'; readonly pool: SharedPool; readonly helpers: number }
  | { readonly kind: 'done'; readonly result: FitDone | FitRefused };

export interface FitOptions {
  readonly onProgress?: (point: TracePoint, fraction: number) => void;
  /** Stops the fit where it is; it still gives a result, marked as stopped by a person. */
  readonly signal?: AbortSignal;
  /**
   * Workers side by side, from 1; unless told, one for a small fit and else as many as there are
   * cores, four at most. The result does not depend on it.
   */
  readonly workers?: number;
}

/** Each worker holds the responsibilities of a whole run: more of them would fill memory. */
const mostWorkers = 4;

/**
 * Fits in workers, so that the window and the terminal stay alive: one counts the words, leads the
 * fit and packs its result; where there is a pool of runs, others take their share of it.
 */
export function runFit(
  job: FitJob,
  { onProgress, signal, workers }: FitOptions = {},
): Promise<FitDone | FitRefused> {
  return new Promise((resolve, reject) => {
    const stop = new SharedArrayBuffer(4);
    const helpers = (workers ?? Math.min(availableParallelism(), mostWorkers)) - 1;
    const workerData: FitWorkerData = {
      job: light(job),
      stop,
      helpers,
      always: workers !== undefined,
    };
    const ask = (): void => {
      Atomics.store(new Int32Array(stop), 0, 1);
    };
    if (signal?.aborted === true) ask();
    signal?.addEventListener('abort', ask, { once: true });
    const all: Worker[] = [];
    const end = (): void => {
      signal?.removeEventListener('abort', ask);
      for (const worker of all) void worker.terminate();
    };
    const fail = (error: Error): void => {
      end();
      reject(error);
    };
    const begin = <Message>(
      name: string,
      data: unknown,
      hear: (message: Message) => void,
      endsEarly: boolean,
    ): Worker => {
      const worker = new Worker(workerPath(name), { workerData: data });
      all.push(worker);
      worker.on('message', hear);
      worker.on('error', fail);
      // After the result this changes nothing: the promise is settled.
      worker.on('exit', (code) => {
        if (endsEarly && code === 0) return;
        fail(new Error(`runFit: ${name} ended with code ${code} before it had a result`));
      });
      return worker;
    };

    const fractions: number[] = [];
    const report = ({ run, runs, point, fraction }: RunProgress): void => {
      fractions[run] = fraction;
      onProgress?.(point, fractions.reduce((sum, each) => sum + each, 0) / runs);
    };
    const lead = begin<FitMessage>(
      'fit.worker',
      workerData,
      (message) => {
        if (message.kind === 'progress') report(message);
        else if (message.kind === 'done') {
          end();
          resolve(message.result);
        } else for (let n = 0; n < message.helpers; n++) help(message.pool);
      },
      false,
    );
    const help = (pool: SharedPool): void => {
      begin<PoolMessage>(
        'pool.worker',
        pool,
        (message) => {
          if (message.kind === 'progress') report(message);
          else if (message.kind === 'helper done') lead.postMessage(message);
          else {
            const { phi, sizes } = message.run;
            lead.postMessage(message, [phi.buffer as ArrayBuffer, sizes.buffer as ArrayBuffer]);
          }
        },
        true,
      );
    };
  });
}

/**
 * A job without what no fit asks of words that are counted already: where they stand in the text, and
 * how they are written. What travels to a worker is copied whole.
 */
function light(job: FitJob): FitJob {
  const known = new Map<Prepared, Prepared>();
  const without = (words: Prepared): Prepared => {
    const slim = known.get(words) ?? {
      ...words,
      passages: words.passages.map((passage) => ({ ...passage, segments: [] })),
      occurrences: { offsets: new Int32Array(), words: new Int32Array() },
      surfaces: [],
    };
    known.set(words, slim);
    return slim;
  };
  const before = (fit: PreviousFit | null): PreviousFit | null =>
    fit === null ? null : { ...fit, words: without(fit.words) };
  const { counted, previous, pinnedFrom, rowsFrom = null } = job;
  return {
    ...job,
    ...(counted === undefined ? {} : { counted: { ...counted, words: without(counted.words) } }),
    previous: before(previous),
    pinnedFrom: before(pinnedFrom),
    rowsFrom: before(rowsFrom),
  };
}
