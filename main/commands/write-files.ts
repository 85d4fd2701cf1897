import { constants } from 'node:fs';
import { access, mkdir, mkdtemp, rename, rm, rmdir, stat, writeFile } from 'node:fs/promises';
import { basename, dirname, join, resolve } from 'node:path';
import { isInside } from '../is-inside.ts';
import { Stop } from './terminal.ts';

/** Contents by their place in the folder, with "/" between the parts. */
export type Files = ReadonlyMap<string, string | Uint8Array>;

/** Files that wait in a folder of their own, on the same drive, to be moved to their places. */
export interface StagedFiles {
  readonly commit: () => Promise<void>;
  /** Takes away what is not in its place, and the folder where it was made for nothing. */
  readonly discard: () => Promise<void>;
}

/** Stops before any work where no file can be put into a folder, or where it cannot be made. */
export async function checkFolder(folder: string): Promise<void> {
  let path = folder;
  try {
    for (;;) {
      const found = await statOf(path);
      if (found === null) {
        path = dirname(path);
        continue;
      }
      if (!found.isDirectory()) throw Object.assign(new Error(), { code: 'ENOTDIR' });
      await access(path, constants.W_OK | constants.X_OK);
      return;
    }
  } catch (error) {
    throw cannotWrite(folder, error);
  }
}

/**
 * Writes files beside their places in a folder, made where needed, so that a full drive or a wrong
 * folder shows before anything is decided. `commit` moves them to their places. None of them may
 * take the place of a file in `keep`.
 */
export async function stageFiles(
  folder: string,
  files: Files,
  keep: readonly string[],
): Promise<StagedFiles> {
  let made: string | undefined;
  let waiting = '';
  const discard = async (): Promise<void> => {
    if (waiting !== '') await rm(waiting, { recursive: true, force: true });
    waiting = '';
    if (made !== undefined) await removeEmpty(folder, made);
    made = undefined;
  };
  try {
    const kept = await identities(keep);
    for (const place of files.keys()) await checkPlace(folder, place, kept);
    made = await mkdir(folder, { recursive: true });
    waiting = await mkdtemp(join(folder, '.writing-'));
    for (const [place, content] of files) {
      const path = join(waiting, place);
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
        made = undefined;
      } catch (error) {
        throw cannotWrite(folder, error, 'not every file could be put there');
      } finally {
        await discard();
      }
    },
  };
}

/** One file, whole or not at all; never in the place of a file in `keep`. */
export async function writeOneFile(
  path: string,
  content: string | Uint8Array,
  keep: readonly string[],
): Promise<void> {
  const beside = `${path}.writing-${process.pid}`;
  try {
    await checkPlace(dirname(path), basename(path), await identities(keep));
    await writeFile(beside, content, { flag: 'wx' });
    await rename(beside, path);
  } catch (error) {
    await rm(beside, { force: true }).catch(() => {});
    throw cannotWrite(path, error);
  }
}

async function checkPlace(folder: string, place: string, kept: ReadonlySet<string>): Promise<void> {
  const path = resolve(folder, place);
  if (!isInside(path, resolve(folder))) {
    throw new Error(`checkPlace: place is ${place}, but must stay inside its folder`);
  }
  const found = await statOf(path);
  if (found === null) return;
  if (found.isDirectory()) throw Object.assign(new Error(), { code: 'EISDIR' });
  if (kept.has(identityOf(found))) {
    throw new Stop(
      `“${path}” was given to be read and would be written over; choose another place with --out.`,
    );
  }
}

/** What tells files apart whatever they are called. */
async function identities(paths: readonly string[]): Promise<ReadonlySet<string>> {
  const found = await Promise.all(paths.map(statOf));
  return new Set(found.flatMap((stats) => (stats === null ? [] : [identityOf(stats)])));
}

function identityOf({ dev, ino }: { readonly dev: number; readonly ino: number }): string {
  return `${dev} ${ino}`;
}

/** Null where nothing is there. */
async function statOf(path: string) {
  try {
    return await stat(path);
  } catch (error) {
    if ((error as { code?: string }).code === 'ENOENT') return null;
    throw error;
  }
}

/** Removes empty folders from `folder` up to `top`; stops at the first that holds something. */
async function removeEmpty(folder: string, top: string): Promise<void> {
  for (let path = folder; isInside(path, top); path = dirname(path)) {
    try {
      await rmdir(path);
    } catch {
      return;
    }
  }
}

function cannotWrite(path: string, error: unknown, otherwise = 'nothing was changed'): unknown {
  const code = (error as { code?: string }).code;
  if (error instanceof Stop || code === undefined) return error;
  const why: Record<string, string> = {
    ENOSPC: 'the drive is full, so free some space',
    EDQUOT: 'the space allowed to this account is used up, so free some',
    EACCES: 'this account is not allowed to, so choose another folder',
    EPERM: 'this account is not allowed to, so choose another folder',
    EROFS: 'the drive is for reading only, so choose another one',
    ENOTDIR: 'a file stands where a folder is needed, so choose another folder',
    EEXIST: 'a file stands where a folder is needed, so choose another folder',
    EISDIR: 'a folder stands where a file is needed, so choose another name',
    ENOENT: 'its folder does not exist, so make it first',
    ENAMETOOLONG: 'a name is too long, so choose a shorter one',
  };
  const reason = why[code] ?? `the system says ${code}, so check the drive`;
  return new Stop(`“${path}” could not be written: ${reason}; ${otherwise}.`);
}
