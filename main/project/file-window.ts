import { createHash } from 'node:crypto';
import { sameBytes, sha256 } from './chain.ts';
import { NONCE_BYTES, TAG_BYTES, type PayloadCipher } from './cipher.ts';
import { FRAME_MAGIC, HEAD_BYTES, decodeHead, type FrameHead } from './frame.ts';
import { readWhole, type Handle, type Storage } from './storage.ts';

const WINDOW_BYTES = 1024 * 1024;

/** Looks at a file through a buffer of 1 MiB, however long the file and its frames are. */
export class FileWindow {
  readonly size: number;
  readonly #storage: Storage;
  readonly #handle: Handle;
  readonly #buffer: Buffer;
  #start = 0;
  #filled = 0;

  constructor(storage: Storage, handle: Handle, size: number) {
    this.#storage = storage;
    this.#handle = handle;
    this.size = size;
    this.#buffer = Buffer.allocUnsafe(Math.min(WINDOW_BYTES, size));
  }

  /**
   * Up to `length` bytes from `offset`, fewer at the end of the file; `length` is at most 1 MiB. The
   * bytes are good until the next call. Throws what the storage throws.
   */
  bytes(offset: number, length: number): Buffer {
    if (length > WINDOW_BYTES) throw new Error(`FileWindow.bytes: length is ${length}, over 1 MiB`);
    const end = Math.min(offset + length, this.size);
    if (offset >= end) return this.#buffer.subarray(0, 0);
    if (offset < this.#start || end > this.#start + this.#filled) {
      this.#start = offset;
      const want = Math.min(WINDOW_BYTES, this.size - offset);
      this.#filled = readWhole(this.#storage, this.#handle, this.#buffer.subarray(0, want), offset);
    }
    const from = offset - this.#start;
    return this.#buffer.subarray(from, Math.min(from + (end - offset), this.#filled));
  }

  head(offset: number): FrameHead | null {
    return decodeHead(this.bytes(offset, HEAD_BYTES));
  }

  /** SHA-256(salt, bytes of the file): the commitment to a payload as it stands. */
  commitment(salt: Uint8Array, offset: number, length: number): Uint8Array {
    if (length < WINDOW_BYTES) return sha256(salt, this.bytes(offset, length));
    const hash = createHash('sha256').update(salt);
    for (let done = 0; done < length;) {
      const piece = this.bytes(offset + done, Math.min(WINDOW_BYTES, length - done));
      if (piece.length === 0) break;
      hash.update(piece);
      done += piece.length;
    }
    return hash.digest();
  }

  /** A copy of a payload. */
  copy(offset: number, length: number): Uint8Array<ArrayBuffer> {
    const whole = new Uint8Array(length);
    if (length > WINDOW_BYTES) {
      const read = readWhole(this.#storage, this.#handle, whole, offset);
      return whole.subarray(0, read);
    }
    whole.set(this.bytes(offset, length));
    return whole;
  }

  /** The first whole head at or after `from` whose payload ends within the file. */
  findHead(from: number): { readonly offset: number; readonly head: FrameHead } | null {
    let offset = from;
    while (offset + HEAD_BYTES <= this.size) {
      const piece = this.#loadedFrom(offset);
      if (piece.length < HEAD_BYTES) return null;
      const at = piece.indexOf(FRAME_MAGIC);
      if (at < 0) {
        // The magic may lie across the end of this piece.
        offset += piece.length - FRAME_MAGIC.length + 1;
        continue;
      }
      const head = this.head(offset + at);
      if (head !== null && offset + at + HEAD_BYTES + head.length <= this.size) {
        return { offset: offset + at, head };
      }
      offset += at + 1;
    }
    return null;
  }

  /** All that is in the buffer from `offset` on; a head's worth at least, unless the file ends. */
  #loadedFrom(offset: number): Buffer {
    this.bytes(offset, HEAD_BYTES);
    return this.#buffer.subarray(offset - this.#start, this.#filled);
  }

  /** Whether the drive never got to write the end: its last sector's bytes, and 16 or more, are zero. */
  endsUnwritten(): boolean {
    if (this.size === 0) return false;
    const sector = Math.floor((this.size - 1) / 512) * 512;
    const start = Math.max(0, Math.min(sector, this.size - 16));
    return this.bytes(start, this.size - start).every((byte) => byte === 0);
  }
}

/**
 * Whether a payload is what its head commits to, looked at piece by piece; in a locked study also
 * whether somebody with the key wrote it. Throws what the storage throws.
 */
export function holdsContent(
  window: FileWindow,
  offset: number,
  head: FrameHead,
  cipher: PayloadCipher | null,
): boolean {
  if (!head.encrypted) {
    return sameBytes(window.commitment(head.salt, offset, head.length), head.commitment);
  }
  const opened = cipher?.opening(head, Buffer.from(window.bytes(offset, NONCE_BYTES))) ?? null;
  if (opened === null) return false;
  const end = head.length - TAG_BYTES;
  const hash = createHash('sha256');
  for (let done = NONCE_BYTES; done < end;) {
    const piece = window.bytes(offset + done, Math.min(WINDOW_BYTES, end - done));
    if (piece.length === 0) return false;
    // The salt comes first in what is encrypted, as it does in the commitment.
    hash.update(opened.update(piece));
    done += piece.length;
  }
  const holds = opened.holds(window.bytes(offset + end, TAG_BYTES));
  return holds && sameBytes(hash.digest(), head.commitment);
}
