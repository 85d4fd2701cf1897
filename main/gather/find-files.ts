import { readdir, stat } from 'node:fs/promises';
import { basename, join, resolve } from 'node:path';
import { compareCodeUnits } from '../../engine/numbers/index.ts';

/** A file to be read, and what it is called in the study and in messages. */
export interface FoundFile {
  readonly path: string;
  /** Relative to the folder it was found in, NFC, with "/" whatever the system uses. */
  readonly name: string;
}

export interface MissedFile {
  readonly name: string;
  readonly code: 'not found' | 'not allowed' | 'cannot read';
}

/**
 * The files behind the paths that a person gave: a file stands for itself, a folder for all files in
 * and below it. Hidden files and links are passed over. In code-unit order of their names, whatever
 * the order of the paths.
 */
export async function findFiles(
  paths: readonly string[],
  from: string,
): Promise<{ readonly found: FoundFile[]; readonly missed: MissedFile[] }> {
  const found = new Map<string, FoundFile>();
  const missed: MissedFile[] = [];
  for (const path of paths) {
    const full = resolve(from, path);
    try {
      const stats = await stat(full);
      const files = stats.isDirectory()
        ? await walk(full, '')
        : [{ path: full, name: basename(full) }];
      for (const file of files) {
        found.set(file.path, { path: file.path, name: file.name.normalize('NFC') });
      }
    } catch (error) {
      missed.push({ name: path, code: codeOf(error) });
    }
  }
  return {
    found: [...found.values()].sort(
      (a, b) => compareCodeUnits(a.name, b.name) || compareCodeUnits(a.path, b.path),
    ),
    missed,
  };
}

async function walk(folder: string, prefix: string): Promise<FoundFile[]> {
  const files: FoundFile[] = [];
  for (const item of await readdir(folder, { withFileTypes: true })) {
    if (item.name.startsWith('.') || item.name.startsWith('~$')) continue;
    const name = `${prefix}${item.name}`;
    if (item.isDirectory()) files.push(...(await walk(join(folder, item.name), `${name}/`)));
    else if (item.isFile()) files.push({ path: join(folder, item.name), name });
  }
  return files;
}

export function codeOf(error: unknown): MissedFile['code'] {
  const code = (error as { code?: string }).code;
  if (code === 'ENOENT' || code === 'ENOTDIR') return 'not found';
  return code === 'EACCES' || code === 'EPERM' ? 'not allowed' : 'cannot read';
}
