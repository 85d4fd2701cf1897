import { rename, rm, writeFile } from 'node:fs/promises';
import type { StudyFileCode, StudyFileFailure } from '../project/index.ts';

const codes: Readonly<Record<string, StudyFileCode>> = {
  EEXIST: 'already there',
  ENOTDIR: 'already there',
  ENOENT: 'not found',
  EACCES: 'not allowed',
  EPERM: 'not allowed',
  EROFS: 'not allowed',
  ENAMETOOLONG: 'name too long',
  ENOSPC: 'no space',
  EDQUOT: 'no space',
};

/** Why a folder could not be made or a file not written. Errors without a system code are bugs. */
export function folderFailure(error: unknown, path: string): StudyFileFailure {
  const cause = (error as { readonly code?: unknown } | null)?.code;
  if (typeof cause !== 'string') throw error;
  return { ok: false, code: codes[cause] ?? 'cannot write', path, cause };
}

/** One file, whole or not at all; it takes the place of one of the same name. */
export async function writeWholeFile(
  path: string,
  bytes: Uint8Array,
): Promise<StudyFileFailure | null> {
  const beside = `${path}.writing-${process.pid}`;
  try {
    await writeFile(beside, bytes, { flag: 'wx' });
    await rename(beside, path);
    return null;
  } catch (error) {
    await rm(beside, { force: true });
    return folderFailure(error, path);
  }
}
