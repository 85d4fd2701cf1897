import * as path from 'node:path';
import { failureOf, success, type Result, type StudyFileFailure } from './failure.ts';
import { decodeHead, HEAD_BYTES } from './frame.ts';
import { decodeHeader, MOST_HEADER_BYTES } from './header.ts';
import { hex } from './chain.ts';
import { nameBeside } from './name-beside.ts';
import { nodeStorage } from './node-storage.ts';
import { closeQuietly, readWhole, removeQuietly, type Storage } from './storage.ts';
import type { StudyFile } from './study-file.ts';

/**
 * Backups are whole copies of a study in a folder of their own, called "NAME backup NUMBER DATE". The
 * number alone says which is newer: a clock may have been set back. The study's id in the header says
 * whose they are, so that those of a study that was given another name are found as well. They are
 * as locked as the study was when they were made.
 */
export interface Backup {
  readonly path: string;
  /** What the study's file was called, without its ending; cut short where it is very long. */
  readonly study: string;
  /** Whether the study's file is called so now. */
  readonly sameName: boolean;
  readonly number: number;
  /** ISO 8601 in UTC, by the clock of the machine that made it. */
  readonly at: string;
  /** In bytes. */
  readonly size: number;
}

/** Where backups of a study are kept, and how many. */
export interface BackupPlaces {
  /** Where new ones go; made where its own folder is there. */
  readonly folder: string;
  /** 0 makes none. */
  readonly keep: number;
  /** Other folders in which earlier ones may lie. */
  readonly earlier: readonly string[];
}

/** What became of backups that had to go. */
export interface BackupsGone {
  readonly removed: readonly Backup[];
  /** One for each that is still there, with its path, and for each folder that can't be read. */
  readonly left: readonly StudyFileFailure[];
}

export interface BackupsRewritten extends BackupsGone {
  /** The one that stands in their place; null where none is kept, or it could not be made. */
  readonly made: Backup | null;
  /** Why it could not be made. */
  readonly failed: StudyFileFailure | null;
}

export interface BackupOptions {
  /** ISO 8601 in UTC. */
  readonly now?: () => string;
  readonly storage?: Storage;
}

const ending = '.understory';
const named = /^(.+) backup (\d{1,9}) (\d{4}-\d\d-\d\d) (\d\d)\.(\d\d)\.(\d\d)\.understory$/su;
// Names may have 255 bytes on most drives; the rest of a backup's name needs about 50.
const MOST_STEM_BYTES = 190;

/** The folder for backups unless a person says otherwise. */
export function backupFolderBeside(studyPath: string): string {
  return path.join(path.dirname(studyPath), 'Understory backups');
}

/** All backups of a study in these places, newest first. Folders that are not there hold none. */
export function listBackups(
  { path: studyPath, studyId }: Pick<StudyFile, 'path' | 'studyId'>,
  places: BackupPlaces,
  { storage = nodeStorage }: BackupOptions = {},
): Backup[] {
  return find(studyPath, studyId, places, storage).found;
}

/**
 * Makes a backup of an open study and removes the oldest beyond those that are kept. Null where none
 * is needed: the newest says all that the study does, or none is kept. The failures are those of
 * `StudyFile.backUp`.
 */
export function makeBackup(
  file: StudyFile,
  places: BackupPlaces,
  { now = clock, storage = nodeStorage }: BackupOptions = {},
): Result<Backup | null> {
  if (places.keep < 1) return success(null);
  const stem = stemOf(file.path);
  const own = find(file.path, file.studyId, places, storage).found.filter(
    ({ sameName }) => sameName,
  );
  const [newest] = own;
  if (newest !== undefined && saysTheSame(newest, file, storage)) return success(null);
  const made = make(file, stem, (newest?.number ?? 0) + 1, places, now(), storage);
  if (!made.ok) return made;
  for (const old of own.slice(places.keep - 1)) removeQuietly(storage, old.path);
  return made;
}

/**
 * For whoever has just written the study anew so that something in it is gone, or has another lock:
 * one backup of the study as it is now takes the place of all earlier ones. They go even where the
 * new one can't be made.
 */
export function rewriteBackups(
  file: StudyFile,
  places: BackupPlaces,
  options: BackupOptions = {},
): BackupsRewritten {
  const { now = clock, storage = nodeStorage } = options;
  const { found, unread } = find(file.path, file.studyId, places, storage);
  const stem = stemOf(file.path);
  const number = Math.max(0, ...found.map((one) => one.number)) + 1;
  const result =
    places.keep < 1 || found.length === 0
      ? success(null)
      : make(file, stem, number, places, now(), storage);
  const gone = remove(file.path, found, places, storage);
  return {
    removed: gone.removed,
    left: [...unread, ...gone.left],
    made: result.ok ? result.value : null,
    failed: result.ok ? null : result,
  };
}

/** Removes all backups of a study. */
export function removeBackups(
  { path: studyPath, studyId }: Pick<StudyFile, 'path' | 'studyId'>,
  places: BackupPlaces,
  { storage = nodeStorage }: BackupOptions = {},
): BackupsGone {
  const { found, unread } = find(studyPath, studyId, places, storage);
  const gone = remove(studyPath, found, places, storage);
  return { removed: gone.removed, left: [...unread, ...gone.left] };
}

function make(
  file: StudyFile,
  stem: string,
  number: number,
  { folder }: BackupPlaces,
  at: string,
  storage: Storage,
): Result<Backup> {
  const seconds = at.slice(0, 19);
  const date = seconds.replace('T', ' ').replaceAll(':', '.');
  const to = path.join(folder, `${stem} backup ${number} ${date}${ending}`);
  try {
    const { mode } = storage.statPath(path.dirname(folder));
    storage.makeFolder(folder, mode);
  } catch (error) {
    return failureOf(error, folder, 'cannot write');
  }
  const written = file.backUp(to, passingName(file.path, folder));
  if (!written.ok) return written;
  return success({
    path: to,
    study: stem,
    sameName: true,
    number,
    at: `${seconds}.000Z`,
    size: written.value,
  });
}

function remove(
  studyPath: string,
  backups: readonly Backup[],
  places: BackupPlaces,
  storage: Storage,
): BackupsGone {
  const removed: Backup[] = [];
  const left: StudyFileFailure[] = [];
  for (const backup of backups) {
    try {
      storage.remove(backup.path);
      removed.push(backup);
    } catch (error) {
      const why = failureOf(error, backup.path, 'cannot write');
      if (why.code === 'not found') removed.push(backup);
      else left.push(why);
    }
  }
  for (const folder of foldersOf(studyPath, places)) {
    // What a killed process left of one.
    removeQuietly(storage, passingName(studyPath, folder));
    try {
      if (removed.some((one) => path.dirname(one.path) === folder)) storage.syncFolder(folder);
    } catch (error) {
      left.push(failureOf(error, folder, 'cannot write'));
    }
  }
  return { removed, left };
}

function find(
  studyPath: string,
  studyId: string,
  places: BackupPlaces,
  storage: Storage,
): { readonly found: Backup[]; readonly unread: StudyFileFailure[] } {
  const found: Backup[] = [];
  const unread: StudyFileFailure[] = [];
  for (const folder of foldersOf(studyPath, places)) {
    let names: readonly string[];
    try {
      names = storage.list(folder);
    } catch (error) {
      const why = failureOf(error, folder, 'cannot read');
      if (why.code !== 'not found') unread.push(why);
      continue;
    }
    for (const name of names) {
      const backup = asBackup(folder, name, studyPath, studyId, storage);
      if (backup !== null) found.push(backup);
    }
  }
  found.sort((a, b) => b.number - a.number || (a.at < b.at ? 1 : -1));
  return { found, unread };
}

/** Null for what is no backup of this study. */
function asBackup(
  folder: string,
  name: string,
  studyPath: string,
  studyId: string,
  storage: Storage,
): Backup | null {
  const match = named.exec(name);
  if (match === null) return null;
  const [, study = '', number, day, hours, minutes, seconds] = match;
  const at = `${day}T${hours}:${minutes}:${seconds}.000Z`;
  const filePath = path.join(folder, name);
  const sameName = study === stemOf(studyPath);
  try {
    const handle = storage.open(filePath, 'read');
    try {
      const start = new Uint8Array(MOST_HEADER_BYTES);
      const decoded = decodeHeader(start.subarray(0, readWhole(storage, handle, start, 0)));
      // One that is damaged goes by its name: what has to be forgotten may be in it.
      const ours = decoded.ok ? decoded.header.studyId === studyId : sameName;
      if (!ours) return null;
      const { size } = storage.stat(handle);
      return { path: filePath, study, sameName, number: Number(number), at, size };
    } finally {
      closeQuietly(storage, handle);
    }
  } catch {
    return sameName
      ? { path: filePath, study, sameName, number: Number(number), at, size: 0 }
      : null;
  }
}

/** Whether a backup ends with the same record at the same place. */
function saysTheSame(backup: Backup, file: StudyFile, storage: Storage): boolean {
  const last = file.records[file.records.length - 1];
  if (backup.size !== file.size || last === undefined) return false;
  try {
    const handle = storage.open(backup.path, 'read');
    try {
      const bytes = new Uint8Array(HEAD_BYTES);
      const head = decodeHead(bytes.subarray(0, readWhole(storage, handle, bytes, last.offset)));
      return head !== null && hex(head.link) === file.head;
    } finally {
      closeQuietly(storage, handle);
    }
  } catch {
    return false;
  }
}

function foldersOf(studyPath: string, { folder, earlier }: BackupPlaces): string[] {
  return [...new Set([folder, backupFolderBeside(studyPath), ...earlier])];
}

function stemOf(studyPath: string): string {
  const stem = path.basename(studyPath, ending).normalize('NFC');
  let short = '';
  let bytes = 0;
  for (const character of stem) {
    bytes += Buffer.byteLength(character);
    if (bytes > MOST_STEM_BYTES) break;
    short += character;
  }
  return short;
}

function passingName(studyPath: string, folder: string): string {
  return nameBeside(path.join(folder, path.basename(studyPath)), 'backup');
}

function clock(): string {
  return new Date().toISOString();
}
