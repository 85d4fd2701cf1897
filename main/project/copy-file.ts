import { failureOf, success, type Result } from './failure.ts';
import { FileWindow } from './file-window.ts';
import { nodeStorage } from './node-storage.ts';
import { closeQuietly, type Handle, type Storage } from './storage.ts';
import { place, writeBeside } from './write-beside.ts';

const PIECE_BYTES = 1024 * 1024;

/**
 * Copies a file byte for byte to a new name, where it is whole or not at all; for a study that is
 * open nowhere, such as a backup, locked or not. Its size in bytes. Failures are those of reading and
 * writing, and 'already there'.
 */
export async function copyFile(
  from: string,
  to: string,
  { storage = nodeStorage }: { readonly storage?: Storage } = {},
): Promise<Result<number>> {
  let handle: Handle;
  try {
    handle = storage.open(from, 'read');
  } catch (error) {
    return failureOf(error, from, 'cannot read');
  }
  try {
    const { size, mode } = storage.stat(handle);
    const fill = copyInto(storage, handle, size);
    const written = writeBeside(storage, to, false, fill, mode);
    if (!written.ok) return written;
    const placed = await place(storage, written.value, to);
    return placed.ok ? success(size) : placed;
  } catch (error) {
    return failureOf(error, from, 'cannot read');
  } finally {
    closeQuietly(storage, handle);
  }
}

/** Writes the first `size` bytes of an open file; throws where it is shorter. */
function copyInto(storage: Storage, handle: Handle, size: number) {
  return (target: { add: (bytes: Uint8Array) => void; flush: () => void }): void => {
    const window = new FileWindow(storage, handle, size);
    for (let done = 0; done < size;) {
      const piece = window.bytes(done, PIECE_BYTES);
      if (piece.length === 0) throw Object.assign(new Error('cut short'), { code: 'EIO' });
      target.add(piece);
      target.flush();
      done += piece.length;
    }
  };
}
