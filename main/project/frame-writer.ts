import { encodeHead, type FrameHead } from './frame.ts';
import { writeWhole, type Handle, type Storage } from './storage.ts';

const PIECE_BYTES = 1024 * 1024;

/** Writes one after the other from a position on, gathering small pieces into one write of 1 MiB. */
export class FrameWriter {
  readonly #storage: Storage;
  readonly #handle: Handle;
  #position: number;
  #waiting: Uint8Array[] = [];
  #waitingBytes = 0;

  constructor(storage: Storage, handle: Handle, position: number) {
    this.#storage = storage;
    this.#handle = handle;
    this.#position = position;
  }

  /** Where the next byte will stand. */
  get position(): number {
    return this.#position + this.#waitingBytes;
  }

  /** `bytes` must stay as they are until `flush`. Throws what the storage throws. */
  add(bytes: Uint8Array): void {
    if (bytes.length === 0) return;
    this.#waiting.push(bytes);
    this.#waitingBytes += bytes.length;
    if (this.#waitingBytes >= PIECE_BYTES) this.flush();
  }

  frame(head: FrameHead, payload: Uint8Array): void {
    this.add(encodeHead(head));
    this.add(payload);
  }

  flush(): void {
    const pieces = this.#waiting;
    this.#waiting = [];
    this.#waitingBytes = 0;
    const [only] = pieces;
    if (only === undefined) return;
    const bytes = pieces.length === 1 ? only : Buffer.concat(pieces);
    writeWhole(this.#storage, this.#handle, bytes, this.#position);
    this.#position += bytes.length;
  }
}
