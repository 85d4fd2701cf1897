import { parentPort, workerData } from 'node:worker_threads';
import { prepareFit } from '../../engine/model/index.ts';
import { makeRuns, type SharedPool } from './pool.ts';
import type { PoolMessage } from './run-fit.ts';

const pool = workerData as SharedPool;

const post = (message: PoolMessage, transfer: ArrayBuffer[] = []): void =>
  parentPort?.postMessage(message, transfer);

makeRuns(prepareFit(pool.counts, pool.priors), pool, post, (number, run) => {
  post({ kind: 'run', number, run }, [
    run.phi.buffer as ArrayBuffer,
    run.sizes.buffer as ArrayBuffer,
  ]);
});
post({ kind: 'helper done' });
