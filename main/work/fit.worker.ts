import { parentPort, workerData } from 'node:worker_threads';
import { fitStudy } from '../../engine/themes/index.ts';
import type { FitMessage, FitWorkerData } from './run-fit.ts';

const { job, stop } = workerData as FitWorkerData;
const stopped = new Int32Array(stop);

const post = (message: FitMessage, transfer: ArrayBuffer[] = []): void =>
  parentPort?.postMessage(message, transfer);

const result = fitStudy(job, {
  progress: (point, fraction) => {
    post({ kind: 'progress', point, fraction });
    return Atomics.load(stopped, 0) === 0;
  },
});
post({ kind: 'done', result });
