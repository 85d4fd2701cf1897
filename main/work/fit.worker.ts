import { parentPort, workerData } from 'node:worker_threads';
import {
  finishPool,
  fitModel,
  poolSize,
  prepareFit,
  type ModelFit,
  type Run,
  type Watcher,
} from '../../engine/model/index.ts';
import { beginFit, packFit, type FitBegun } from '../../engine/themes/index.ts';
import { makeRuns, sharedCounts, type SharedPool } from './pool.ts';
import type { FitMessage, FitWorkerData, PoolMessage } from './run-fit.ts';

const { job, stop, helpers, always } = workerData as FitWorkerData;
const stopped = new Int32Array(stop);

const post = (message: FitMessage): void => parentPort?.postMessage(message);

const watcher: Watcher = {
  progress: (point, fraction) => {
    post({ kind: 'progress', run: 0, runs: 1, point, fraction });
    return Atomics.load(stopped, 0) === 0;
  },
};
const begun = beginFit(job, watcher);
if (!begun.ok) post({ kind: 'done', result: begun });
else {
  const fit = await modelOf(begun);
  post({ kind: 'done', result: packFit(begun, fit) });
}

/** In one go, or as a pool of runs that other workers take their share of. */
async function modelOf({ words, priors, start }: FitBegun): Promise<ModelFit> {
  const runs = poolSize(priors, start, job.model);
  const pays = always || isLarge(words.counts.indices.length);
  const others = pays ? Math.min(helpers, runs - 1) : 0;
  if (others < 1 || start.kind !== 'fresh') {
    return fitModel(words.counts, priors, start, job.model, watcher);
  }
  const counts = sharedCounts(words.counts);
  const next = new SharedArrayBuffer(4);
  const pool: SharedPool = { counts, priors, start, settings: job.model, runs, next, stop };
  const made: Run[] = [];
  const othersDone = new Promise<void>((resolve) => {
    let left = others;
    parentPort?.on('message', (message: Exclude<PoolMessage, { kind: 'progress' }>) => {
      if (message.kind === 'helper done') left--;
      else made[message.number] = message.run;
      if (left === 0) resolve();
    });
  });
  post({ kind: 'pool', pool, helpers: others });
  const prepared = prepareFit(counts, priors);
  makeRuns(prepared, pool, post, (number, run) => {
    made[number] = run;
  });
  await othersDone;
  parentPort?.removeAllListeners('message');
  return finishPool(prepared, start, job.model, Object.values(made));
}

/**
 * Another worker takes a tenth of a second to begin: no help with a fit of half a second. The result
 * does not depend on it.
 */
function isLarge(entries: number): boolean {
  const sweeps = job.model.schedule.reduce((all, stage) => all + stage.sweeps, 0);
  return entries * job.themes.length * sweeps * job.model.runs > 2e8;
}
