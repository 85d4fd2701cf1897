import type { Act, StudyFile } from './project/index.ts';

/** Where a study's records are kept; the study file is one. */
export interface Store {
  /** The number that the next record will get. */
  readonly nextSequence: number;
  readonly readOnly: boolean;
  appendAll(acts: readonly Act[]): ReturnType<StudyFile['appendAll']>;
  readBlob(sequence: number): Uint8Array;
}

/**
 * Keeps records in memory until they are flushed, so that a command that is refused half-way has
 * written nothing. Without a base the study lives in memory alone.
 */
export class BufferedStore implements Store {
  readonly #base: Store | null;
  readonly #acts: { sequence: number; blobs: readonly Uint8Array[]; edit: unknown }[] = [];
  readonly #blobs = new Map<number, Uint8Array>();
  #next: number;

  constructor(base: Store | null) {
    this.#base = base;
    this.#next = base?.nextSequence ?? 1;
  }

  get nextSequence(): number {
    return this.#next;
  }

  get readOnly(): boolean {
    return this.#base?.readOnly ?? false;
  }

  appendAll(acts: readonly Act[]): ReturnType<Store['appendAll']> {
    const sequences = acts.map(({ blobs = [], edit }) => {
      const own = blobs.map((bytes) => {
        this.#blobs.set(this.#next, bytes);
        return this.#next++;
      });
      const sequence = this.#next++;
      this.#acts.push({ sequence, blobs, edit: edit(own, sequence) });
      return sequence;
    });
    return { ok: true, value: sequences };
  }

  readBlob(sequence: number): Uint8Array {
    const own = this.#blobs.get(sequence);
    if (own !== undefined) return own;
    if (this.#base === null) throw new Error(`BufferedStore.readBlob: no blob ${sequence}`);
    return this.#base.readBlob(sequence);
  }

  /** Everything kept back, in order, each edit with its number. */
  get kept(): readonly {
    readonly sequence: number;
    readonly blobs: readonly Uint8Array[];
    readonly edit: unknown;
  }[] {
    return this.#acts;
  }

  /** Hands everything kept back to `target`, whose numbering must go on from the same number. */
  flush(target: Store): ReturnType<Store['appendAll']> {
    const result = target.appendAll(
      this.#acts.map(({ blobs, edit }) => ({ blobs, edit: () => edit })),
    );
    if (result.ok) this.#acts.length = 0;
    return result;
  }
}
