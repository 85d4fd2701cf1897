import { mkdir, mkdtemp, rename, rm, writeFile } from 'node:fs/promises';
import { dirname, join, relative } from 'node:path';
import { Stop } from './terminal.ts';

/** Contents by their place in the folder, with "/" between the parts. */
export type Files = ReadonlyMap<string, string | Uint8Array>;

/** Files that wait in a folder of their own, on the same drive, to be moved to their places. */
export interface StagedFiles {
  readonly commit: () => Promise<void>;
  readonly discard: () => Promise<void>;
}

/**
 * Writes files beside their places in a folder, made where needed, so that a full drive or a wrong
 * folder shows before anything is decided. `commit` moves them to their places.
 */
export async function stageFiles(folder: string, files: Files): Promise<StagedFiles> {
  let waiting = '';
  const discard = async (): Promise<void> => {
    if (waiting !== '') await rm(waiting, { recursive: true, force: true });
  };
  try {
    await mkdir(folder, { recursive: true });
    waiting = await mkdtemp(join(folder, '.writing-'));
    for (const [place, content] of files) {
      const path = join(waiting, place);
      if (relative(waiting, path).startsWith('..')) {
        throw new Error(`stageFiles: files holds "${place}", which must stay inside the folder`);
      }
      await mkdir(dirname(path), { recursive: true });
      await writeFile(path, content);
    }
  } catch (error) {
    await discard();
    throw cannotWrite(folder, error);
  }
  return {
    discard,
    commit: async () => {
      try {
        for (const place of files.keys()) {
          await mkdir(dirname(join(folder, place)), { recursive: true });
          await rename(join(waiting, place), join(folder, place));
        }
      } catch (error) {
        throw cannotWrite(folder, error);
      } finally {
        await discard();
      }
    },
  };
}

/** One file, whole or not at all. */
export async function writeOneFile(path: string, content: string | Uint8Array): Promise<void> {
  const beside = `${path}.writing-${process.pid}`;
  try {
    await writeFile(beside, content, { flag: 'wx' });
    await rename(beside, path);
  } catch (error) {
    await rm(beside, { force: true });
    throw cannotWrite(path, error);
  }
}

function cannotWrite(path: string, error: unknown): unknown {
  const code = (error as { code?: string }).code;
  if (code === undefined) return error;
  const why: Record<string, string> = {
    ENOSPC: 'the drive is full; free some space',
    EACCES: 'this account is not allowed to; choose another folder',
    EPERM: 'this account is not allowed to; choose another folder',
    EROFS: 'the drive is for reading only; choose another one',
    ENOTDIR: 'a file stands where a folder is needed; choose another folder',
    EEXIST: 'a file stands where a folder is needed; choose another folder',
    EISDIR: 'a folder stands where a file is needed; choose another name',
    ENOENT: 'its folder does not exist; make it first',
    ENAMETOOLONG: 'a name is too long; choose a shorter one',
  };
  return new Stop(`“${path}” could not be written: ${why[code] ?? code}. Nothing was changed.`);
}
