import { parentPort, workerData } from 'node:worker_threads';
import { runTask } from '../../engine/evidence/index.ts';
import type { EvidenceAsked, EvidenceMessage, EvidenceWorkerData } from './run-evidence.ts';

const { material, stop } = workerData as EvidenceWorkerData;
const stopped = new Int32Array(stop);

const post = (message: EvidenceMessage): void => parentPort?.postMessage(message);

parentPort?.on('message', ({ number, task }: EvidenceAsked) => {
  let shown = 0;
  const result = runTask(material, task, (fraction) => {
    // Hundreds of sweeps a second would bury whoever listens.
    if (fraction >= shown + 0.1) {
      shown = fraction;
      post({ kind: 'progress', number, fraction });
    }
    return Atomics.load(stopped, 0) === 0;
  });
  post({ kind: 'done', number, result });
});
