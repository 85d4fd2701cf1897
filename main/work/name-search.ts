import { Worker } from 'node:worker_threads';
import type { IdentifierGroup, SearchedText } from '../../engine/text/index.ts';
import { workerPath } from './find-worker.ts';

/** What the worker is asked: texts that it does not have yet, and all of them in their order. */
export interface SearchRequest {
  /** Whose texts these are. */
  readonly study: number;
  readonly number: number;
  readonly changed: readonly SearchedText[];
  readonly order: readonly string[];
}

interface SearchReply {
  readonly number: number;
  readonly groups: readonly IdentifierGroup[];
}

/** What a study that was closed leaves behind: nothing. */
export interface ForgetRequest {
  readonly forget: number;
}

/** A text to be searched, and what it depends on: searched anew only when that changes. */
export interface TextToSearch {
  readonly id: string;
  readonly version: string;
  readonly text: () => SearchedText;
}

let shared: Worker | null = null;
let searches = 0;
let requests = 0;

interface Waiting {
  readonly resolve: (groups: readonly IdentifierGroup[]) => void;
  readonly reject: (fault: Error) => void;
}

const waiting = new Map<number, Waiting>();
/** Goes up when a worker ended: what was sent to it is gone. */
let generation = 0;

/** One worker for every study: it takes a moment to learn the names. */
function worker(): Worker {
  if (shared !== null) return shared;
  const started = new Worker(workerPath('search.worker'));
  shared = started;
  started.on('message', ({ number, groups }: SearchReply) => {
    waiting.get(number)?.resolve(groups);
    waiting.delete(number);
  });
  const end = (fault: Error): void => {
    if (shared !== started) return;
    shared = null;
    generation++;
    for (const { reject } of waiting.values()) reject(fault);
    waiting.clear();
  };
  started.on('error', end);
  started.on('exit', () => end(new Error('NameSearch: the worker ended before it had a result')));
  // A search that nobody waits for keeps no program open. After the listeners: one that is added
  // later holds the program again.
  started.unref();
  return started;
}

/**
 * Searches the texts of a study for what could tell who somebody is, in a worker that keeps what it
 * has read until `close`: a million words take seconds the first time.
 */
export class NameSearch {
  readonly #study = ++searches;
  #generation = -1;
  readonly #sent = new Map<string, string>();

  groups(texts: readonly TextToSearch[]): Promise<readonly IdentifierGroup[]> {
    const running = worker();
    if (this.#generation !== generation) this.#sent.clear();
    this.#generation = generation;
    const changed = texts.filter(({ id, version }) => this.#sent.get(id) !== version);
    this.#sent.clear();
    for (const { id, version } of texts) this.#sent.set(id, version);
    const number = ++requests;
    return new Promise((resolve, reject) => {
      waiting.set(number, { resolve, reject });
      const request: SearchRequest = {
        study: this.#study,
        number,
        changed: changed.map(({ text }) => text()),
        order: texts.map(({ id }) => id),
      };
      running.postMessage(request);
    });
  }

  /** Lets go of the texts; a search that waits is answered still. */
  close(): void {
    this.#sent.clear();
    const request: ForgetRequest = { forget: this.#study };
    shared?.postMessage(request);
  }
}
