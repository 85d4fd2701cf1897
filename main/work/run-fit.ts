import { Worker } from 'node:worker_threads';
import type { TracePoint } from '../../engine/model/index.ts';
import type { FitDone, FitJob, FitRefused } from '../../engine/themes/index.ts';
import { workerPath } from './find-worker.ts';

export interface FitWorkerData {
  readonly job: FitJob;
  /** One Int32: anything but 0 asks the fit to stop where it is. */
  readonly stop: SharedArrayBuffer;
}

export type FitMessage =
  | { readonly kind: 'progress'; readonly point: TracePoint; readonly fraction: number }
  | { readonly kind: 'done'; readonly result: FitDone | FitRefused };

export interface FitOptions {
  readonly onProgress?: (point: TracePoint, fraction: number) => void;
  /** Stops the fit where it is; it still gives a result, marked as stopped by a person. */
  readonly signal?: AbortSignal;
}

/** Fits in a worker, so that the window and the terminal stay alive. */
export function runFit(
  job: FitJob,
  { onProgress, signal }: FitOptions = {},
): Promise<FitDone | FitRefused> {
  return new Promise((resolve, reject) => {
    const stop = new SharedArrayBuffer(4);
    const workerData: FitWorkerData = { job, stop };
    const worker = new Worker(workerPath('fit.worker'), { workerData });
    const ask = (): void => {
      Atomics.store(new Int32Array(stop), 0, 1);
    };
    if (signal?.aborted === true) ask();
    signal?.addEventListener('abort', ask, { once: true });
    const end = (): void => {
      signal?.removeEventListener('abort', ask);
      void worker.terminate();
    };
    worker.on('message', (message: FitMessage) => {
      if (message.kind === 'progress') onProgress?.(message.point, message.fraction);
      else {
        end();
        resolve(message.result);
      }
    });
    worker.on('error', (error) => {
      end();
      reject(error);
    });
    // After a result this changes nothing: the promise is settled.
    worker.on('exit', (code) => {
      end();
      reject(new Error(`runFit: the worker ended with code ${code} before it had a result`));
    });
  });
}
