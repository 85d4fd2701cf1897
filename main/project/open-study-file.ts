import { randomBytes } from 'node:crypto';
import { hostname, userInfo } from 'node:os';
import * as path from 'node:path';
import { causeOf, failure, failureOf, success } from './failure.ts';
import type { Result, StudyFileFailure } from './failure.ts';
import { FileWindow } from './file-window.ts';
import { chainStart } from './chain.ts';
import type { PayloadCipher } from './cipher.ts';
import { cipherOf, keyFor } from './file-key.ts';
import { decodeHeader, encodeHeader, MOST_HEADER_BYTES, type Header } from './header.ts';
import { nameBeside } from './name-beside.ts';
import { nodeStorage } from './node-storage.ts';
import { leaveOwnerNote, readOwnerNote, type OwnerNote } from './owner-note.ts';
import type { DerivationWork } from './password.ts';
import { scan, type Scan } from './scan.ts';
import { closeQuietly, removeQuietly, sameFile, writeWhole } from './storage.ts';
import type { FileIdentity, Handle, Storage } from './storage.ts';
import { StudyFile } from './study-file.ts';
import { knock, takeWritersLock, usualLockPlace } from './writers-lock.ts';
import type { LockPlace, WritersLock } from './writers-lock.ts';

export interface StudyFileOptions {
  /** Called when somebody else on this machine asks this window to come forward. */
  readonly onSecondOpen?: () => void;
  /** Who the note beside the file names; this machine and its user unless told. Null: no note. */
  readonly owner?: { readonly host: string; readonly name: string } | null;
  /** Where salts come from: the system's generator unless told, for runs that must repeat. */
  readonly randomBytes?: (size: number) => Uint8Array;
  readonly storage?: Storage;
  readonly lockPlace?: LockPlace;
  /** How dear a key is made when a password is set; the usual unless told, for tests. */
  readonly work?: DerivationWork;
}

export interface OpenOptions extends StudyFileOptions {
  /** Of a locked study; an unlocked one opens whatever is given. */
  readonly password?: string | undefined;
  /** Takes no lock, leaves no note, changes no byte. */
  readonly readOnly?: boolean;
  /** Open although a note says that another machine has the study open. */
  readonly despiteNote?: boolean;
  /** Share of the file that was looked at, 0 to 1. */
  readonly onProgress?: (fraction: number) => void;
}

/**
 * A new study of no records, open for writing and already on the drive. Failures: 'already there',
 * 'not found' (its folder), 'not allowed', 'name too long', 'no space', 'cannot write', 'cannot
 * lock', 'not certain'; with a password 'password too short', 'password too long' and 'asks too much'
 * (this machine has not the memory). Nothing stays of the file where it fails.
 *
 * @param studyId 1 to 255 bytes of UTF-8; the same in every copy of the study, and readable in a
 *   locked one
 * @param password 8 to 1,024 characters; without it nobody can open the study again
 */
export async function createStudyFile(
  filePath: string,
  { studyId, password }: { readonly studyId: string; readonly password?: string | undefined },
  options: StudyFileOptions = {},
): Promise<Result<StudyFile>> {
  const storage = options.storage ?? nodeStorage;
  const key = await keyFor(password ?? null, filePath, options.work);
  if (!key.ok) return key;
  const { cipher, keyRegion } = key.value;
  const bytes = encodeHeader(studyId, cipher !== null, keyRegion);
  let handle: Handle;
  try {
    handle = storage.open(filePath, 'create');
  } catch (error) {
    return failureOf(error, filePath, 'cannot write');
  }
  let held: Held | null = null;
  const giveUp = (why: StudyFileFailure): StudyFileFailure => {
    closeQuietly(storage, handle);
    // While it is ours alone: nobody can lock a file that has no header yet.
    removeQuietly(storage, filePath);
    held?.lock.release();
    return why;
  };
  try {
    const real = storage.resolve(filePath);
    const taken = await hold(real, storage.stat(handle), options, storage);
    if (!taken.ok) return giveUp(taken);
    held = taken.value;
    writeWhole(storage, handle, bytes, 0);
    try {
      storage.sync(handle);
      storage.syncFolder(path.dirname(real));
    } catch (error) {
      return giveUp(failure('not certain', filePath, causeOf(error, filePath)));
    }
    const header = { studyId, locked: cipher !== null, keyRegion, length: bytes.length };
    const found = { records: [], end: bytes.length, head: chainStart(studyId), damage: null };
    return assemble(real, storage, handle, header, cipher, found, 0, held, options);
  } catch (error) {
    return giveUp(failureOf(error, filePath, 'cannot write'));
  }
}

/**
 * Opens a study and checks every byte of it. Failures: 'not found', 'not allowed', 'cannot read',
 * 'not a study', 'empty', 'newer version', 'damaged' (with offset, sequence and reason; see
 * `recoverStudyFile`); 'locked' without a password, 'wrong password', 'asks too much'; and for writing also 'open elsewhere', 'noted elsewhere', 'cannot lock',
 * 'changed underneath' and 'not certain'.
 *
 * For writing, what an interrupted write left at the end is taken away first.
 */
export async function openStudyFile(
  filePath: string,
  options: OpenOptions = {},
): Promise<Result<StudyFile>> {
  const storage = options.storage ?? nodeStorage;
  const readOnly = options.readOnly ?? false;
  let real: string;
  let handle: Handle;
  try {
    real = storage.resolve(filePath);
    // Opening a pipe would wait for its other end.
    if (!storage.statPath(real).regular) return failure('not a study', filePath);
    handle = storage.open(real, readOnly ? 'read' : 'write');
  } catch (error) {
    return failureOf(error, filePath, 'cannot read');
  }

  let held: Held | null = null;
  const giveUp = (why: StudyFileFailure): StudyFileFailure => {
    closeQuietly(storage, handle);
    held?.lock.release();
    return why;
  };
  try {
    const header = readHeader(storage, handle, filePath);
    if (!header.ok) return giveUp(header);
    if (!readOnly) {
      const owner = readOwnerNote(storage, real);
      const foreign = owner !== null && owner.host !== ourselves(options).host;
      const taken = await hold(real, storage.stat(handle), options, storage);
      if (!taken.ok) return giveUp(owner === null ? taken : { ...taken, owner });
      held = taken.value;
      if (foreign && options.despiteNote !== true) {
        return giveUp(failure('noted elsewhere', filePath, { owner }));
      }
      // Between opening and locking, the writer before us may have put a new file in its place.
      if (!sameFile(storage.stat(handle), storage.statPath(real))) {
        return giveUp(failure('changed underneath', filePath, { how: 'replaced' }));
      }
    }
    // After the lock: whoever has the study open already is told so before a password is asked for.
    const unlocked = await cipherOf(header.value, options.password, filePath);
    if (!unlocked.ok) return giveUp(unlocked);
    const cipher = unlocked.value;
    const size = storage.stat(handle).size;
    const window = new FileWindow(storage, handle, size);
    const found = await scan(window, header.value, cipher, options.onProgress);
    if (found.damage !== null) return giveUp(failure('damaged', filePath, found.damage));
    if (held !== null && found.end < size) {
      try {
        storage.truncate(handle, found.end);
        storage.sync(handle);
      } catch (error) {
        return giveUp(failure('not certain', filePath, causeOf(error, filePath)));
      }
    }
    const leftOver = size - found.end;
    return assemble(real, storage, handle, header.value, cipher, found, leftOver, held, options);
  } catch (error) {
    return giveUp(failureOf(error, filePath, 'cannot read'));
  }
}

/** Asks the window that has a study open for writing to come forward; whether one answered. */
export async function bringForward(
  filePath: string,
  { storage = nodeStorage, lockPlace = usualLockPlace() }: StudyFileOptions = {},
): Promise<boolean> {
  try {
    return await knock(storage.statPath(filePath), lockPlace);
  } catch {
    return false;
  }
}

/**
 * Whether a study is locked, by its header alone; null where the file is none, or cannot be read.
 */
export function isLocked(filePath: string, storage: Storage = nodeStorage): boolean | null {
  let handle: Handle;
  try {
    if (!storage.statPath(filePath).regular) return null;
    handle = storage.open(filePath, 'read');
  } catch {
    return null;
  }
  try {
    const header = readHeader(storage, handle, filePath);
    return header.ok ? header.value.locked : null;
  } catch {
    return null;
  } finally {
    closeQuietly(storage, handle);
  }
}

function readHeader(storage: Storage, handle: Handle, filePath: string): Result<Header> {
  const window = new FileWindow(storage, handle, storage.stat(handle).size);
  const decoded = decodeHeader(window.bytes(0, MOST_HEADER_BYTES));
  if (!decoded.ok) {
    if (decoded.why !== 'damaged') return failure(decoded.why, filePath);
    return failure('damaged', filePath, { offset: 0, sequence: 0, reason: 'header' });
  }
  return success(decoded.header);
}

interface Held {
  readonly lock: WritersLock;
  readonly onKnock: () => void;
  readonly lockPlace: LockPlace;
}

async function hold(
  real: string,
  identity: FileIdentity,
  options: StudyFileOptions,
  storage: Storage,
): Promise<Result<Held>> {
  const onKnock = options.onSecondOpen ?? (() => {});
  const lockPlace = options.lockPlace ?? usualLockPlace();
  const taken = await takeWritersLock(identity, onKnock, lockPlace);
  if (!taken.ok) {
    if (taken.why === 'impossible') return failure('cannot lock', real, { cause: taken.cause });
    return failure('open elsewhere', real);
  }
  // Ours alone now, so whatever a killed writer had begun beside the study is nobody's.
  removeQuietly(storage, nameBeside(real, 'new'));
  return success({ lock: taken.lock, onKnock, lockPlace });
}

function assemble(
  real: string,
  storage: Storage,
  handle: Handle,
  header: Header,
  cipher: PayloadCipher | null,
  found: Scan,
  leftOver: number,
  held: Held | null,
  options: StudyFileOptions,
): Result<StudyFile> {
  let note: OwnerNote | null = null;
  if (held !== null && options.owner !== null) {
    note = leaveOwnerNote(storage, real, {
      ...ourselves(options),
      since: new Date().toISOString(),
    });
  }
  try {
    return success(
      new StudyFile({
        path: real,
        storage,
        handle,
        header,
        cipher,
        records: found.records,
        end: found.end,
        head: found.head,
        leftOver,
        lock: held?.lock ?? null,
        note,
        randomBytes: options.randomBytes ?? randomBytes,
        onKnock: held?.onKnock ?? (() => {}),
        lockPlace: held?.lockPlace ?? usualLockPlace(),
        work: options.work,
      }),
    );
  } catch (error) {
    note?.remove();
    throw error;
  }
}

function ourselves({ owner }: StudyFileOptions): { readonly host: string; readonly name: string } {
  if (owner) return owner;
  let name = '';
  try {
    name = userInfo().username;
  } catch {
    // A user without an entry in the system's list.
  }
  return { host: hostname(), name };
}
