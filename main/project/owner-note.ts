import { randomBytes } from 'node:crypto';
import type { Owner } from './failure.ts';
import { nameBeside } from './name-beside.ts';
import { readWhole, removeQuietly, writeWhole, type Storage } from './storage.ts';

/**
 * The note that says who has a study open, for other machines on a shared drive, which the writer's
 * lock does not reach. It is advice: a machine that lost its power leaves it behind. A file beside
 * the study and not a frame in it, so that opening and closing leave the study byte for byte as it
 * was; it goes away on closing.
 */
export interface OwnerNote {
  remove(): void;
}

const MOST_NOTE_BYTES = 4096;

export function readOwnerNote(storage: Storage, studyPath: string): Owner | null {
  const text = readNote(storage, studyPath);
  if (text === null) return null;
  try {
    const { host, name, since } = JSON.parse(text) as Record<string, unknown>;
    if (typeof host !== 'string' || typeof name !== 'string' || typeof since !== 'string') {
      return null;
    }
    return { host, name, since };
  } catch {
    return null;
  }
}

/**
 * Puts the note there in place of any other. Null where it can't be written: a folder may allow
 * writing to the study and no new file, and advice is no reason to refuse.
 */
export function leaveOwnerNote(
  storage: Storage,
  studyPath: string,
  owner: Owner,
): OwnerNote | null {
  const notePath = nameBeside(studyPath, 'open');
  const text = `${JSON.stringify({ ...owner, token: randomBytes(8).toString('hex') })}\n`;
  try {
    removeQuietly(storage, notePath);
    const handle = storage.open(notePath, 'create', 0o644);
    try {
      writeWhole(storage, handle, Buffer.from(text, 'utf8'), 0);
    } finally {
      storage.close(handle);
    }
  } catch {
    return null;
  }
  return {
    remove() {
      // Another machine may have gone ahead despite ours: its note is not ours to take away.
      if (readNote(storage, studyPath) === text) removeQuietly(storage, notePath);
    },
  };
}

function readNote(storage: Storage, studyPath: string): string | null {
  try {
    const handle = storage.open(nameBeside(studyPath, 'open'), 'read');
    try {
      const bytes = Buffer.alloc(MOST_NOTE_BYTES);
      return bytes.toString('utf8', 0, readWhole(storage, handle, bytes, 0));
    } finally {
      storage.close(handle);
    }
  } catch {
    return null;
  }
}
