import { parentPort } from 'node:worker_threads';
import { readOne } from './read-one.ts';
import type { ReadJob, ReadDone } from './run-read.ts';

parentPort?.on('message', (job: ReadJob) => {
  void readOne(job).then((read) => {
    parentPort?.postMessage({ id: job.id, read } satisfies ReadDone);
  });
});
