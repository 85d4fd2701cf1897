import * as path from 'node:path';
import { causeOf, failure, failureOf, StudyFileFault, success, type Result } from './failure.ts';
import { FrameWriter } from './frame-writer.ts';
import { nameBeside } from './name-beside.ts';
import { removeQuietly, type Storage } from './storage.ts';

// Windows refuses to replace a file that a virus scanner or a sync client has open for a moment.
const PASSING = ['EPERM', 'EACCES', 'EBUSY'];
const PAUSES_MILLISECONDS = [10, 30, 100, 300, 1000];

/**
 * Gives a finished, synced and closed file its name, in place of whatever bore it, and makes that
 * lasting. Throws the storage's error of the rename; an error of the folder's sync is returned, for
 * by then the new file is in place.
 */
export async function putInPlace(storage: Storage, from: string, to: string): Promise<unknown> {
  const pauses = process.platform === 'win32' ? PAUSES_MILLISECONDS : [];
  for (let attempt = 0; ; attempt++) {
    try {
      storage.rename(from, to);
      break;
    } catch (error) {
      const pause = pauses[attempt];
      if (pause === undefined || !PASSING.includes((error as { code?: string }).code ?? '')) {
        throw error;
      }
      await new Promise((resolve) => setTimeout(resolve, pause));
    }
  }
  try {
    storage.syncFolder(path.dirname(to));
    return null;
  } catch (error) {
    return error;
  }
}

/**
 * Writes and syncs a new file beside `to`, under a name of its own; that name. Nothing stays of it
 * where it fails.
 */
export function writeBeside(
  storage: Storage,
  to: string,
  replace: boolean,
  fill: (writer: FrameWriter) => void,
  mode?: number,
  beside = nameBeside(to, 'new'),
): Result<string> {
  try {
    if (!replace && isThere(storage, to)) return failure('already there', to);
    removeQuietly(storage, beside);
    const handle = storage.open(beside, 'create', mode);
    try {
      const writer = new FrameWriter(storage, handle, 0);
      fill(writer);
      writer.flush();
      storage.sync(handle);
    } finally {
      storage.close(handle);
    }
    return success(beside);
  } catch (error) {
    removeQuietly(storage, beside);
    if (error instanceof StudyFileFault) return error.failure;
    return failureOf(error, to, 'cannot write');
  }
}

/** Gives what `writeBeside` wrote its name; takes it away again where that fails. */
export async function place(storage: Storage, beside: string, to: string): Promise<Result<null>> {
  try {
    const unsynced = await putInPlace(storage, beside, to);
    if (unsynced === null) return success(null);
    return failure('not certain', to, causeOf(unsynced, to));
  } catch (error) {
    removeQuietly(storage, beside);
    return failureOf(error, to, 'cannot write');
  }
}

function isThere(storage: Storage, filePath: string): boolean {
  try {
    storage.statPath(filePath);
    return true;
  } catch (error) {
    if ((error as { code?: string }).code === 'ENOENT') return false;
    throw error;
  }
}
