import { readFile, stat } from 'node:fs/promises';
import { mostFileMegabytes, readNote, readSource } from '../formats/index.ts';
import { codeOf } from '../gather/find-files.ts';
import { hashOf } from '../ids.ts';
import type { ReadJob, ReadOutcome } from './run-read.ts';

/** Reads one file, here and now. What cannot be read is a value with a code, as everywhere. */
export async function readOne({ file, as }: Omit<ReadJob, 'id'>): Promise<ReadOutcome> {
  let bytes: Uint8Array;
  try {
    if ('bytes' in file) bytes = file.bytes;
    else {
      const { size } = await stat(file.path);
      if (size > mostFileMegabytes * 1_000_000) {
        const megabytes = Math.ceil(size / 1_000_000);
        return { ok: false, code: 'too large', megabytes, limit: mostFileMegabytes };
      }
      bytes = await readFile(file.path);
    }
  } catch (error) {
    return { ok: false, code: codeOf(error) };
  }
  const read = await (as === 'note' ? readNote : readSource)(bytes, file.name);
  return read.ok ? { ...read, hash: hashOf(bytes) } : read;
}
