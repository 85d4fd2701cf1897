import { availableParallelism } from 'node:os';
import { Worker } from 'node:worker_threads';
import type { ReadRefusal, ReadSource } from '../formats/index.ts';
import type { MissedFile } from '../gather/find-files.ts';
import type { SourceFile } from '../gather/source-file.ts';
import { workerPath } from './find-worker.ts';

export interface ReadJob {
  readonly id: number;
  readonly file: SourceFile;
  /** A note need not hold speech. */
  readonly as: 'transcript' | 'note';
}

export type ReadOutcome =
  | (Extract<ReadSource, { readonly ok: true }> & { readonly hash: string })
  | ReadRefusal
  | { readonly ok: false; readonly code: MissedFile['code'] }
  /** Whatever it holds, no reader could make sense of it. */
  | { readonly ok: false; readonly code: 'unreadable' };

export interface ReadDone {
  readonly id: number;
  readonly read: ReadOutcome;
}

export interface ReadLimits {
  /** After so long a file is given up. */
  readonly seconds: number;
  /** So much memory one file may take. */
  readonly megabytes: number;
}

const usual: ReadLimits = { seconds: 60, megabytes: 1_500 };

/**
 * Reads files in workers: a file that takes too long, or too much memory, is given up and the others
 * go on. Results come in the order of the files. `onProgress` may throw to stop.
 */
export async function readFiles(
  files: readonly SourceFile[],
  as: ReadJob['as'],
  onProgress: (done: number, file: string) => void = () => {},
  limits: ReadLimits = usual,
): Promise<ReadOutcome[]> {
  const outcomes = new Array<ReadOutcome>(files.length);
  const lanes = Math.max(1, Math.min(4, availableParallelism() - 1, Math.ceil(files.length / 4)));
  let next = 0;
  let done = 0;
  let stopped = false;
  const work = async (): Promise<void> => {
    const reader = new Reader(limits);
    try {
      while (next < files.length && !stopped) {
        const index = next++;
        const file = files[index]!;
        onProgress(done, file.name);
        outcomes[index] = await reader.read(file, as);
        done++;
      }
    } finally {
      reader.close();
    }
  };
  try {
    await Promise.all(Array.from({ length: lanes }, work));
  } finally {
    stopped = true;
  }
  return outcomes;
}

/** One worker at a time, started when it is needed and anew where it was lost. */
class Reader {
  readonly #limits: ReadLimits;
  #worker: Worker | null = null;
  #jobs = 0;
  /** Ends the reading in hand. */
  #end: (read: ReadOutcome) => void = () => {};

  constructor(limits: ReadLimits) {
    this.#limits = limits;
  }

  read(file: SourceFile, as: ReadJob['as']): Promise<ReadOutcome> {
    const worker = (this.#worker ??= this.#start());
    const id = ++this.#jobs;
    return new Promise((resolve) => {
      const { seconds } = this.#limits;
      const timer = setTimeout(() => {
        this.#lose({ ok: false, code: 'too slow', seconds });
      }, seconds * 1000);
      this.#end = (read) => {
        clearTimeout(timer);
        this.#end = () => {};
        resolve(read);
      };
      worker.postMessage({ id, file, as } satisfies ReadJob);
    });
  }

  close(): void {
    const worker = this.#worker;
    this.#worker = null;
    void worker?.terminate();
  }

  #lose(read: ReadOutcome): void {
    this.close();
    this.#end(read);
  }

  #start(): Worker {
    const { megabytes } = this.#limits;
    // What a library says to programmers is not for the terminal of whoever reads transcripts.
    const worker = new Worker(workerPath('read.worker'), {
      resourceLimits: { maxOldGenerationSizeMb: megabytes },
      stdout: true,
      stderr: true,
    });
    const isCurrent = (): boolean => this.#worker === worker;
    worker.on('message', ({ id, read }: ReadDone) => {
      if (isCurrent() && id === this.#jobs) this.#end(read);
    });
    worker.on('error', (error: NodeJS.ErrnoException) => {
      if (!isCurrent()) return;
      const memory = error.code === 'ERR_WORKER_OUT_OF_MEMORY';
      this.#lose(
        memory
          ? { ok: false, code: 'too large', megabytes: null, limit: megabytes }
          : { ok: false, code: 'unreadable' },
      );
    });
    worker.on('exit', () => {
      if (isCurrent()) this.#lose({ ok: false, code: 'unreadable' });
    });
    return worker;
  }
}
