import { createHash } from 'node:crypto';
import * as fs from 'node:fs';
import { tmpdir } from 'node:os';
import * as path from 'node:path';
import { afterEach } from 'vitest';
import {
  createStudyFile,
  nodeStorage,
  openStudyFile,
  type OpenOptions,
  type Result,
  type Storage,
  type StudyFile,
} from '../../../main/project/index.ts';

/**
 * Node's storage without the waiting for the drive, for tests that open hundreds of files and ask
 * nothing about a loss of power.
 */
export const quickStorage: Storage = { ...nodeStorage, sync: () => {}, syncFolder: () => {} };

const folders: string[] = [];
const open = new Set<StudyFile>();

afterEach(() => {
  for (const file of open) file.close();
  open.clear();
  for (const folder of folders.splice(0)) fs.rmSync(folder, { recursive: true, force: true });
});

/** A new folder that goes away after the test. */
export function newFolder(): string {
  const folder = fs.mkdtempSync(path.join(tmpdir(), 'understory-test-'));
  folders.push(folder);
  return folder;
}

export function newPath(name = 'a.understory'): string {
  return path.join(newFolder(), name);
}

/** The value of a result that must be one. */
export function valueOf<T>(result: Result<T>): T {
  if (!result.ok) throw new Error(`failed: ${JSON.stringify(result)}`);
  return result.value;
}

/** Salts that repeat from run to run, all different within one. */
export function countedSalts(start = 0): (size: number) => Uint8Array {
  let count = start;
  return (size) => {
    const text = `salt ${count++}`;
    return Uint8Array.from(createHash('sha256').update(text).digest().subarray(0, size));
  };
}

export async function create(filePath: string, options: OpenOptions = {}): Promise<StudyFile> {
  const file = valueOf(
    await createStudyFile(
      filePath,
      { studyId: 'a study of ours' },
      { randomBytes: countedSalts(), ...options },
    ),
  );
  open.add(file);
  return file;
}

export async function reopen(filePath: string, options: OpenOptions = {}): Promise<StudyFile> {
  const file = valueOf(await openStudyFile(filePath, options));
  open.add(file);
  return file;
}

export interface SampleEdit {
  readonly type: string;
  readonly blobs: readonly number[];
}

/** Appends `count` edits; every other one brings two blobs, one of them with bytes of any value. */
export function appendSamples(file: StudyFile, count: number): void {
  for (let index = 0; index < count; index++) {
    const label = `${file.nextSequence}`;
    const blobs =
      index % 2 === 0 ? [] : [Buffer.from(`words of ${label}`), Uint8Array.from([0, 255, 10, 0])];
    valueOf(file.append(blobs, (numbers) => ({ type: `edit ${label}`, blobs: numbers })));
  }
}

/** All that a reader can see: each record's kind and content. */
export function contents(file: StudyFile): string[] {
  return file.records.map(({ sequence, kind, removed }) => {
    if (removed) return `${sequence} ${kind} removed`;
    if (kind === 'edit') return `${sequence} edit ${JSON.stringify(file.readEdit(sequence))}`;
    if (kind === 'blob')
      return `${sequence} blob ${Buffer.from(file.readBlob(sequence)).toString('hex')}`;
    return `${sequence} ${kind}`;
  });
}

/** Contents of a file opened read-only, or the code with which it was refused. */
export async function look(filePath: string): Promise<string[] | string> {
  const result = await openStudyFile(filePath, { readOnly: true });
  if (!result.ok) return result.code;
  const seen = contents(result.value);
  result.value.close();
  return seen;
}

export function sha256Of(filePath: string): string {
  return createHash('sha256').update(fs.readFileSync(filePath)).digest('hex');
}
