import { Worker } from 'node:worker_threads';
import type { Prepared, TextSettings, TranscriptText, WordLists } from '../../engine/text/index.ts';
import { unpackWords } from '../../engine/themes/index.ts';
import { workerPath } from './find-worker.ts';

/** All that the counted words of a study are a function of. */
export interface PrepareJob {
  readonly transcripts: readonly TranscriptText[];
  readonly text: TextSettings;
  readonly lists: WordLists;
  /** Seed words, which no list and no limit leaves out. */
  readonly seeds: readonly string[];
}

/** Passages and counted words, made in a worker: a million words take seconds. */
export function runPrepare(job: PrepareJob): Promise<Prepared> {
  return new Promise((resolve, reject) => {
    const worker = new Worker(workerPath('prepare.worker'), { workerData: job });
    worker.once('message', (packed: Uint8Array) => {
      resolve(unpackWords(packed));
      void worker.terminate();
    });
    worker.once('error', reject);
    // After a result this changes nothing: the promise is settled.
    worker.once('exit', (code) => {
      reject(new Error(`runPrepare: the worker ended with code ${code} before it had a result`));
    });
  });
}
