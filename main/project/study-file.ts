import * as path from 'node:path';
import { hex, SALT_BYTES, sameBytes } from './chain.ts';
import { causeOf, failure, failureOf, StudyFileFault, success } from './failure.ts';
import type { Result, StudyFileFailure } from './failure.ts';
import { FileWindow } from './file-window.ts';
import {
  decodeHead,
  encodeHead,
  HEAD_BYTES,
  headFor,
  holdsItsCommitment,
  removedHead,
} from './frame.ts';
import { MOST_EDIT_BYTES, MOST_PAYLOAD_BYTES, type FrameHead, type Kind } from './frame.ts';
import { LOCKED_EXTRA_BYTES, type PayloadCipher } from './cipher.ts';
import { cipherOf, keyFor, type FileKey } from './file-key.ts';
import { FrameWriter } from './frame-writer.ts';
import { encodeHeader, type Header } from './header.ts';
import { nameBeside } from './name-beside.ts';
import type { OwnerNote } from './owner-note.ts';
import type { DerivationWork } from './password.ts';
import { scan, type Damage, type Scan, type StudyRecord } from './scan.ts';
import { nextSeal, noSeal, readSeal, type Erasing, type SealAct, type SealBody } from './seal.ts';
import { closeQuietly, readWhole, removeQuietly, sameFile } from './storage.ts';
import type { FileState, Handle, Storage } from './storage.ts';
import { place, putInPlace, writeBeside } from './write-beside.ts';
import { takeWritersLock, type LockPlace, type WritersLock } from './writers-lock.ts';

/** One decision on its way to the file: what it refers to, then itself. */
export interface Act {
  readonly blobs?: readonly Uint8Array[];
  /**
   * The edit, as anything JSON can say. It is told the sequence numbers of its blobs, in order, and
   * its own.
   */
  readonly edit: (blobSequences: readonly number[], sequence: number) => unknown;
}

export type ReadOnlyBecause =
  /** It was opened so. */
  | 'asked'
  /** An fsync failed: what was written last may or may not be on the drive. */
  | 'not certain'
  /** A write failed and could not be taken back. */
  | 'not undone';

/** What `openStudyFile` hands to the class; no business of anyone else's. */
export interface OpenParts {
  readonly path: string;
  readonly storage: Storage;
  readonly handle: Handle;
  readonly header: Header;
  readonly cipher: PayloadCipher | null;
  readonly records: StudyRecord[];
  readonly end: number;
  readonly head: Uint8Array;
  readonly leftOver: number;
  readonly lock: WritersLock | null;
  readonly note: OwnerNote | null;
  readonly randomBytes: (size: number) => Uint8Array;
  readonly onKnock: () => void;
  readonly lockPlace: LockPlace;
  readonly work: DerivationWork | undefined;
}

/** A record on its way to the file. */
interface NewFrame {
  readonly head: FrameHead;
  readonly payload: Uint8Array;
}

/** Of a plain study too, so that it can be locked. */
const MOST_BODY_BYTES = MOST_PAYLOAD_BYTES - LOCKED_EXTRA_BYTES;
const TAIL_BYTES = 64 * 1024;
const COPY_BYTES = 1024 * 1024;

/**
 * An open study file: an append-only list of records, each an edit or a blob that an edit refers to.
 * The file's format is in FORMAT.md. Its owner closes it.
 */
export class StudyFile {
  /** With links followed. */
  readonly path: string;
  readonly studyId: string;
  /**
   * Bytes at the end that an interrupted write had left: taken away on opening for writing, passed
   * over on opening read-only. 0 as a rule.
   */
  readonly leftOver: number;
  readonly #storage: Storage;
  readonly #randomBytes: (size: number) => Uint8Array;
  readonly #onKnock: () => void;
  readonly #lockPlace: LockPlace;
  readonly #note: OwnerNote | null;
  readonly #work: DerivationWork | undefined;
  #header: Header;
  #cipher: PayloadCipher | null;
  #records: StudyRecord[];
  #handle: Handle | null;
  #lock: WritersLock | null;
  #size: number;
  #link: Uint8Array;
  /** The file's last bytes as we know them: of the last frame, or of the header. */
  #tail: Uint8Array;
  #readOnlyBecause: ReadOnlyBecause | null;
  #compacting = false;
  /** The newest seal; null until it was looked for. */
  #seal: SealBody | null = null;

  constructor(parts: OpenParts) {
    this.path = parts.path;
    this.studyId = parts.header.studyId;
    this.leftOver = parts.leftOver;
    this.#storage = parts.storage;
    this.#randomBytes = parts.randomBytes;
    this.#onKnock = parts.onKnock;
    this.#lockPlace = parts.lockPlace;
    this.#work = parts.work;
    this.#header = parts.header;
    this.#cipher = parts.cipher;
    this.#records = parts.records;
    this.#handle = parts.handle;
    this.#lock = parts.lock;
    this.#note = parts.note;
    this.#size = parts.end;
    this.#link = parts.head;
    this.#readOnlyBecause = parts.lock === null ? 'asked' : null;
    this.#tail = this.#readTail();
  }

  /** In the order of their sequence numbers, which begin at 1 and have no gaps. */
  get records(): readonly StudyRecord[] {
    return this.#records;
  }

  /** The number that the next record will get; an edit's comes after those of its blobs. */
  get nextSequence(): number {
    return this.#records.length + 1;
  }

  /** The chain's hash after the last record, in hexadecimal. */
  get head(): string {
    return hex(this.#link);
  }

  /** In bytes, up to the end of the last record. */
  get size(): number {
    return this.#size;
  }

  /** Whether it has a password. */
  get locked(): boolean {
    return this.#header.locked;
  }

  get readOnly(): boolean {
    return this.#readOnlyBecause !== null;
  }

  get readOnlyBecause(): ReadOnlyBecause | null {
    return this.#readOnlyBecause;
  }

  /**
   * All edits in order, read as they are asked for. One whose content was removed is what a seal put
   * in its place, or left out.
   * Throws StudyFileFault where a record can't be read any more as it was on opening.
   */
  *edits(): Generator<{ readonly sequence: number; readonly json: unknown }> {
    const window = new FileWindow(this.#storage, this.#openHandle('edits'), this.#size);
    for (let index = 0; index < this.#records.length; index++) {
      const record = this.#records[index];
      if (record?.kind !== 'edit') continue;
      const { sequence, removed } = record;
      if (!removed) yield { sequence, json: this.#parse(record, this.#body(record, window)) };
      else if (Object.hasOwn(this.#sealed.instead, sequence)) {
        yield { sequence, json: this.#sealed.instead[sequence] };
      }
    }
  }

  /** What was erased from the file, in order. Throws as `edits` does. */
  get erased(): readonly SealAct[] {
    return this.#sealed.acts;
  }

  /** The chain's hash after each record, in order. Throws as `edits` does. */
  *chain(): Generator<{ readonly sequence: number; readonly hash: string }> {
    const window = new FileWindow(this.#storage, this.#openHandle('chain'), this.#size);
    for (const record of this.#records) {
      const { link } = this.#headAt(record, window.bytes(record.offset, HEAD_BYTES));
      yield { sequence: record.sequence, hash: hex(link) };
    }
  }

  /** Reads every byte again, as opening did; null where all is still as it was written. */
  async check(onProgress?: (fraction: number) => void): Promise<Damage | null> {
    const handle = this.#openHandle('check');
    const { size } = this.#storage.stat(handle);
    const window = new FileWindow(this.#storage, handle, size);
    const found = await scan(window, this.#header, this.#cipher, onProgress);
    if (found.damage !== null || hex(found.head) === this.head) return found.damage;
    const { sequence, offset } = this.#records[found.records.length - 1] ?? {
      sequence: 0,
      offset: 0,
    };
    return { sequence, offset, reason: 'chain' };
  }

  /** One edit. Throws as `edits` does, and an Error where there is no such edit. */
  readEdit(sequence: number): unknown {
    const record = this.#record('readEdit', sequence, 'edit');
    return this.#parse(record, this.#body(record));
  }

  /**
   * The bytes of a blob, checked against its commitment. Throws StudyFileFault where it can't be read
   * any more as it was on opening, and an Error where there is no such blob, or it was removed: ask
   * `records`.
   */
  readBlob(sequence: number): Uint8Array {
    const record = this.#record('readBlob', sequence, 'blob');
    return this.#body(record);
  }

  /**
   * Writes an edit and the blobs that it refers to, in one act: blobs first, the edit last, one fsync.
   * The edit's sequence number once it is on the drive. See `appendAll` for failures.
   */
  append(blobs: readonly Uint8Array[], edit: Act['edit']): Result<number> {
    const result = this.appendAll([{ blobs, edit }]);
    return result.ok ? success(result.value[0] ?? 0) : result;
  }

  /**
   * Several edits with one fsync; their sequence numbers. All or none, as long as the process lives;
   * a machine that loses its power in the middle may keep the first few whole.
   *
   * Failures: 'read only', 'changed underneath' and 'too large' before anything is written; 'no
   * space', 'not allowed' and 'cannot write' after which the file is as it was and may be tried
   * again; 'not certain', after which the study is read-only. Throws when an edit is no JSON, when
   * `edit` throws, and on a closed study; nothing is written then.
   */
  appendAll(acts: readonly Act[]): Result<number[]> {
    const handle = this.#openHandle('appendAll');
    if (this.#compacting) throw new Error('StudyFile.appendAll: must wait for compact');
    if (this.readOnly) return failure('read only', this.path);
    const prepared = this.#prepare(acts);
    if (!prepared.ok) return prepared;
    const { frames, edits } = prepared.value;
    if (frames.length === 0) return success([]);
    const changed = this.#changedUnderneath(handle);
    if (changed !== null) return changed;

    const records: StudyRecord[] = [];
    const writer = new FrameWriter(this.#storage, handle, this.#size);
    try {
      for (const { head, payload } of frames) {
        const { kind, sequence, length } = head;
        records.push({ sequence, kind, offset: writer.position, length, removed: false });
        writer.frame(head, payload);
      }
      writer.flush();
    } catch (error) {
      return this.#takeBack(handle, failureOf(error, this.path, 'cannot write'));
    }
    try {
      this.#storage.sync(handle);
    } catch (error) {
      // The system may have thrown the unwritten pages away and call the next fsync a success.
      this.#readOnlyBecause = 'not certain';
      return failure('not certain', this.path, causeOf(error, this.path));
    }
    for (const record of records) this.#records.push(record);
    this.#size = writer.position;
    const last = frames[frames.length - 1];
    if (last !== undefined) {
      this.#link = last.head.link;
      this.#tail = lastBytes(encodeHead(last.head), last.payload);
    }
    return success(edits);
  }

  /**
   * Copies the study as it stands to another place, which may then be opened as a study of its own
   * with the same id and chain. 'already there' unless told to replace. Its size in bytes.
   */
  async saveCopy(
    to: string,
    { replace = false }: { readonly replace?: boolean } = {},
  ): Promise<Result<number>> {
    const handle = this.#openHandle('saveCopy');
    // A copy of the study in its own place would take it from under us.
    if (replace && this.#isOurs(to, handle)) return failure('already there', to);
    const written = writeBeside(this.#storage, to, replace, (target) => {
      const window = new FileWindow(this.#storage, handle, this.#size);
      for (let done = 0; done < this.#size;) {
        const piece = window.bytes(done, COPY_BYTES);
        if (piece.length === 0) throw Object.assign(new Error('cut short'), { code: 'EIO' });
        target.add(piece);
        target.flush();
        done += piece.length;
      }
    });
    if (!written.ok) return written;
    const placed = await place(this.#storage, written.value, to);
    return placed.ok ? success(this.#size) : placed;
  }

  /**
   * Copies the study as it stands to a new name, each record checked on the way and the whole on the
   * drive before it bears that name. In one go, so that nothing is written in between; `passing` is
   * what it is called until it is whole. Its size in bytes; failures are those of writing, 'already
   * there' and 'damaged'.
   */
  backUp(to: string, passing: string): Result<number> {
    const handle = this.#openHandle('backUp');
    if (this.#compacting) throw new Error('StudyFile.backUp: must wait for compact');
    const storage = this.#storage;
    try {
      const { mode } = storage.stat(handle);
      const fill = (target: FrameWriter): void => {
        const window = new FileWindow(storage, handle, this.#size);
        target.add(window.copy(0, this.#header.length));
        for (const record of this.#records) {
          // Throws where it is no longer what was written: no backup is better than a rotten one.
          if (!record.removed) this.#content(record, window);
          target.add(window.copy(record.offset, HEAD_BYTES + record.length));
        }
      };
      const written = writeBeside(storage, to, false, fill, mode, passing);
      if (!written.ok) return written;
      storage.rename(passing, to);
      storage.syncFolder(path.dirname(to));
      return success(this.#size);
    } catch (error) {
      removeQuietly(storage, passing);
      return failureOf(error, to, 'cannot write');
    }
  }

  /** Whether the file is being written anew, while which it can be neither written nor copied. */
  get compacting(): boolean {
    return this.#compacting;
  }

  /**
   * Writes the file anew without the content of the records named, and puts it in place of the old
   * one. The records stay with their commitments, so numbers and head are what they were. Sizes in
   * bytes. Where it fails the old file stays, and the study stays open on it.
   */
  async compact(
    unused: Iterable<number>,
  ): Promise<Result<{ readonly before: number; readonly after: number }>> {
    const gone = new Set(unused);
    for (const sequence of gone) {
      if (this.#records[sequence - 1] === undefined) {
        throw new Error(`StudyFile.compact: unused holds ${sequence}, must be a record's number`);
      }
    }
    return this.#anew('compact', gone, () => this.#ownKey());
  }

  /**
   * Erases for good: `acts` and a seal that says what went are added, and the file is written anew
   * without the content of the records that go, all in one. Numbers and chain of what was there stay.
   * The sequence numbers of the edits. Failures: as of `compact`, and 'too large'; where it fails the
   * file is as it was.
   */
  async erase(acts: readonly Act[], erasing: Erasing): Promise<Result<readonly number[]>> {
    const gone = new Set(erasing.gone);
    for (const sequence of gone) {
      if (this.#records[sequence - 1] === undefined) {
        throw new Error(`StudyFile.erase: gone holds ${sequence}, must be a record's number`);
      }
    }
    // All that the earlier seals hold is in the new one.
    for (const { kind, sequence } of this.#records) if (kind === 'seal') gone.add(sequence);
    const prepared = this.#prepare(acts, (sequence) => nextSeal(this.#sealed, sequence, erasing));
    if (!prepared.ok) return prepared;
    const { frames, edits } = prepared.value;
    const written = await this.#anew('erase', gone, () => this.#ownKey(), frames);
    this.#seal = null;
    return written.ok ? success(edits) : written;
  }

  /**
   * Sets, changes or (null) removes the password: writes the file anew under a new data key, and puts
   * it in place of the old one, as `compact` does. Numbers, chain and head stay. Sizes in bytes.
   * Failures: as of `compact`; 'password too short', 'password too long', 'asks too much'.
   *
   * @param password 8 to 1,024 characters; without it nobody can open the study again
   */
  async setPassword(
    password: string | null,
  ): Promise<Result<{ readonly before: number; readonly after: number }>> {
    return this.#anew('setPassword', new Set(), () => keyFor(password, this.path, this.#work));
  }

  /** Whether this is the study's password; false where it has none. Takes as long as opening. */
  async isPassword(password: string): Promise<boolean> {
    return this.locked && (await cipherOf(this.#header, password, this.path)).ok;
  }

  async #anew(
    asker: string,
    gone: ReadonlySet<number>,
    keyFor: () => Promise<Result<FileKey>>,
    added: readonly NewFrame[] = [],
  ): Promise<Result<{ readonly before: number; readonly after: number }>> {
    const handle = this.#openHandle(asker);
    if (this.readOnly) return failure('read only', this.path);
    if (this.#compacting) throw new Error(`StudyFile.${asker}: must wait for the other compact`);
    const changed = this.#changedUnderneath(handle);
    if (changed !== null) return changed;
    this.#compacting = true;
    try {
      const key = await keyFor();
      return key.ok ? await this.#compact(handle, gone, key.value, added) : key;
    } finally {
      this.#compacting = false;
    }
  }

  /**
   * After `close`; and where `compact` had to close the file to replace it and could not open it again.
   */
  get closed(): boolean {
    return this.#handle === null;
  }

  /** Gives up the lock and takes the owner note away. Closing twice does nothing. */
  close(): void {
    const handle = this.#handle;
    if (handle === null) return;
    if (this.#compacting) throw new Error('StudyFile.close: must wait for compact');
    this.#handle = null;
    this.#note?.remove();
    closeQuietly(this.#storage, handle);
    this.#lock?.release();
  }

  async #compact(
    handle: Handle,
    gone: ReadonlySet<number>,
    key: FileKey,
    added: readonly NewFrame[],
  ): Promise<Result<{ before: number; after: number }>> {
    const before = this.#size;
    const storage = this.#storage;
    const { studyId } = this;
    const { cipher, keyRegion } = key;
    const locked = cipher !== null;
    const start = encodeHeader(studyId, locked, keyRegion);
    const header: Header = { studyId, locked, keyRegion, length: start.length };
    let beside: string;
    let next: Handle;
    let identity: FileState;
    try {
      const { mode } = storage.stat(handle);
      const fill = (target: FrameWriter): void => {
        target.add(start);
        this.#writeWithout(gone, handle, cipher, target);
        for (const { head, payload } of added) target.frame(head, payload);
      };
      const written = writeBeside(storage, this.path, true, fill, mode);
      if (!written.ok) return written;
      beside = written.value;
      next = storage.open(beside, 'write');
    } catch (error) {
      removeQuietly(storage, nameBeside(this.path, 'new'));
      return failureOf(error, this.path, 'cannot write');
    }
    const giveUp = (why: StudyFileFailure): StudyFileFailure => {
      closeQuietly(storage, next);
      removeQuietly(storage, beside);
      return why;
    };

    // Read back before it takes the place of the only other one.
    let fresh: Scan;
    try {
      identity = storage.stat(next);
      fresh = await scan(new FileWindow(storage, next, identity.size), header, cipher);
    } catch (error) {
      return giveUp(failureOf(error, this.path, 'cannot write'));
    }
    const whole = fresh.damage === null && fresh.end === identity.size;
    const link = added[added.length - 1]?.head.link ?? this.#link;
    if (!whole || !sameBytes(fresh.head, link)) {
      return giveUp(failure('cannot write', this.path));
    }
    // The lock goes by the file's identity, so the new file needs its own before it can be found.
    const taken = await takeWritersLock(identity, this.#onKnock, this.#lockPlace);
    if (!taken.ok) return giveUp(failure('cannot lock', this.path));

    const closeFirst = storage.mustCloseToReplace;
    if (closeFirst) {
      closeQuietly(storage, next);
      closeQuietly(storage, handle);
      this.#handle = null;
    }
    let unsynced: unknown;
    try {
      unsynced = await putInPlace(storage, beside, this.path);
    } catch (error) {
      taken.lock.release();
      removeQuietly(storage, beside);
      if (closeFirst) this.#reopen();
      else closeQuietly(storage, next);
      return failureOf(error, this.path, 'cannot write');
    }
    this.#lock?.release();
    this.#lock = taken.lock;
    this.#header = header;
    this.#cipher = cipher;
    this.#records = fresh.records;
    this.#size = fresh.end;
    this.#link = link;
    if (closeFirst) {
      const notOpen = this.#reopen();
      if (notOpen !== null) return notOpen;
    } else {
      closeQuietly(storage, handle);
      this.#handle = next;
    }
    if (unsynced !== null) {
      this.#readOnlyBecause = 'not certain';
      return failure('not certain', this.path, causeOf(unsynced, this.path));
    }
    // The last frame may be another only in what was removed of it.
    try {
      this.#tail = this.#readTail();
    } catch (error) {
      this.#readOnlyBecause = 'not certain';
      return failure('not certain', this.path, causeOf(error, this.path));
    }
    return success({ before, after: this.#size });
  }

  #writeWithout(
    gone: ReadonlySet<number>,
    from: Handle,
    cipher: PayloadCipher | null,
    target: FrameWriter,
  ): void {
    const window = new FileWindow(this.#storage, from, this.#size);
    for (const record of this.#records) {
      const head = this.#headAt(record, window.bytes(record.offset, HEAD_BYTES));
      if (record.removed || gone.has(record.sequence)) {
        target.frame(removedHead(head), new Uint8Array(0));
        continue;
      }
      const { salt, body } = this.#content(record, window);
      const plain = { ...head, encrypted: false, length: body.length, salt };
      if (cipher === null) {
        target.frame(plain, body);
      } else {
        const locked = cipher.lock(plain, body);
        target.frame(locked.head, locked.payload);
      }
    }
  }

  /** On failure the study is closed: the file is whole, but not in our hands. */
  #reopen(): StudyFileFailure | null {
    try {
      this.#handle = this.#storage.open(this.path, 'write');
      return null;
    } catch (error) {
      this.#note?.remove();
      this.#lock?.release();
      return failureOf(error, this.path, 'cannot write');
    }
  }

  async #ownKey(): Promise<Result<FileKey>> {
    return success({ cipher: this.#cipher, keyRegion: this.#header.keyRegion });
  }

  get #sealed(): SealBody {
    if (this.#seal !== null) return this.#seal;
    const record = this.#records.findLast(({ kind, removed }) => kind === 'seal' && !removed);
    const seal = record === undefined ? noSeal : readSeal(this.#parse(record, this.#body(record)));
    if (seal === null) throw this.#rotten(record as StudyRecord, 'content');
    this.#seal = seal;
    return seal;
  }

  #prepare(
    acts: readonly Act[],
    seal?: (sequence: number) => SealBody,
  ): Result<{ frames: NewFrame[]; edits: number[] }> {
    const frames: NewFrame[] = [];
    const edits: number[] = [];
    let link = this.#link;
    const add = (kind: Kind, body: Uint8Array): number => {
      const sequence = this.nextSequence + frames.length;
      const salt = this.#randomBytes(SALT_BYTES);
      if (salt.length !== SALT_BYTES) {
        throw new Error(
          `StudyFile: randomBytes gave ${salt.length} bytes, must give ${SALT_BYTES}`,
        );
      }
      const head = headFor(kind, sequence, salt, body, link);
      link = head.link;
      frames.push(this.#cipher?.lock(head, body) ?? { head, payload: body });
      return sequence;
    };
    for (const { blobs = [], edit } of acts) {
      if (blobs.some((blob) => blob.length > MOST_BODY_BYTES)) {
        return failure('too large', this.path);
      }
      const blobSequences = blobs.map((blob) => add('blob', blob));
      const own = this.nextSequence + frames.length;
      const json: string | undefined = JSON.stringify(edit(blobSequences, own));
      if (json === undefined) {
        throw new Error('StudyFile.append: edit gave nothing, must give what JSON can say');
      }
      const body = Buffer.from(json, 'utf8');
      if (body.length > MOST_EDIT_BYTES) return failure('too large', this.path);
      edits.push(add('edit', body));
    }
    if (seal !== undefined) {
      const body = Buffer.from(JSON.stringify(seal(this.nextSequence + frames.length)), 'utf8');
      if (body.length > MOST_BODY_BYTES) return failure('too large', this.path);
      add('seal', body);
    }
    return success({ frames, edits });
  }

  /** Whether the file is still the one that we know, at its name and at its end. */
  #changedUnderneath(handle: Handle): StudyFileFailure | null {
    const changed = (how: NonNullable<StudyFileFailure['how']>) =>
      failure('changed underneath', this.path, { how });
    if (this.#lock?.held() === false) return changed('lock');
    try {
      const ours = this.#storage.stat(handle);
      if (!sameFile(ours, this.#storage.statPath(this.path))) return changed('replaced');
      if (ours.size !== this.#size) return changed('size');
      return sameBytes(this.#readTail(), this.#tail) ? null : changed('content');
    } catch (error) {
      const why = failureOf(error, this.path, 'cannot read');
      return why.code === 'not found' ? changed('missing') : why;
    }
  }

  #isOurs(other: string, handle: Handle): boolean {
    try {
      return sameFile(this.#storage.statPath(other), this.#storage.stat(handle));
    } catch {
      return false;
    }
  }

  #readTail(): Uint8Array {
    const handle = this.#openHandle('readTail');
    const start = this.#records[this.#records.length - 1]?.offset ?? 0;
    const bytes = new Uint8Array(Math.min(TAIL_BYTES, this.#size - start));
    const read = readWhole(this.#storage, handle, bytes, this.#size - bytes.length);
    return bytes.subarray(0, read);
  }

  #takeBack(handle: Handle, why: StudyFileFailure): StudyFileFailure {
    try {
      this.#storage.truncate(handle, this.#size);
      // Else a loss of power could bring back whole edits that were reported as failed.
      this.#storage.sync(handle);
    } catch {
      this.#readOnlyBecause = 'not undone';
    }
    return why;
  }

  #body(record: StudyRecord, window?: FileWindow): Uint8Array {
    return this.#content(record, window).body;
  }

  /** Of a kept record, checked. */
  #content(record: StudyRecord, window?: FileWindow): { salt: Uint8Array; body: Uint8Array } {
    try {
      const frame = window?.copy(record.offset, HEAD_BYTES + record.length) ?? this.#frame(record);
      const head = this.#headAt(record, frame);
      const payload = frame.subarray(HEAD_BYTES);
      const { salt } = head;
      if (head.encrypted) {
        const content = this.#cipher?.unlock(head, payload) ?? null;
        if (content !== null) return content;
      } else if (this.#cipher === null && holdsItsCommitment(frame)) {
        return { salt, body: payload };
      }
      throw this.#rotten(record, 'content');
    } catch (error) {
      if (error instanceof StudyFileFault) throw error;
      throw new StudyFileFault(failureOf(error, this.path, 'cannot read'));
    }
  }

  #frame(record: StudyRecord): Uint8Array<ArrayBuffer> {
    const frame = new Uint8Array(HEAD_BYTES + record.length);
    const read = readWhole(this.#storage, this.#openHandle('read'), frame, record.offset);
    return frame.subarray(0, read);
  }

  #headAt(record: StudyRecord, bytes: Uint8Array): FrameHead {
    const head = decodeHead(bytes);
    if (head?.sequence !== record.sequence || head.length !== record.length) {
      throw this.#rotten(record, 'head');
    }
    return head;
  }

  #parse(record: StudyRecord, body: Uint8Array): unknown {
    try {
      return JSON.parse(new TextDecoder('utf-8', { fatal: true }).decode(body));
    } catch {
      throw this.#rotten(record, 'content');
    }
  }

  #rotten(record: StudyRecord, reason: 'head' | 'content'): StudyFileFault {
    const { offset, sequence } = record;
    return new StudyFileFault(failure('damaged', this.path, { offset, sequence, reason }));
  }

  #record(asker: string, sequence: number, kind: Kind): StudyRecord {
    const record = this.#records[sequence - 1];
    if (record?.kind !== kind || record.removed) {
      throw new Error(`StudyFile.${asker}: sequence is ${sequence}, must be of a kept ${kind}`);
    }
    return record;
  }

  #openHandle(asker: string): Handle {
    if (this.#handle === null) throw new Error(`StudyFile.${asker}: the study is closed`);
    return this.#handle;
  }
}

/** The end of a frame, as `StudyFile` compares it before each append; a copy. */
function lastBytes(head: Uint8Array, body: Uint8Array): Uint8Array {
  const end = body.subarray(Math.max(0, body.length - TAIL_BYTES));
  return Uint8Array.from(Buffer.concat([head, end]).subarray(-TAIL_BYTES));
}
