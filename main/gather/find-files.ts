import { readdir, stat } from 'node:fs/promises';
import { basename, join, resolve } from 'node:path';
import { compareCodeUnits } from '../../engine/numbers/index.ts';
import { isInside } from '../is-inside.ts';

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
 * and below it, but for those in the absolute paths `except`. Hidden files and links are passed over.
 * In code-unit order of their names, whatever the order of the paths.
 */
export async function findFiles(
  paths: readonly string[],
  from: string,
  except: readonly string[] = [],
): Promise<{ readonly found: FoundFile[]; readonly missed: MissedFile[] }> {
  const found = new Map<string, FoundFile>();
  const missed: MissedFile[] = [];
  for (const path of paths) {
    const full = resolve(from, path);
    const passedOver = except.filter((other) => !isInside(full, other));
    const walk = async (folder: string, prefix: string): Promise<void> => {
      for (const item of await readdir(folder, { withFileTypes: true })) {
        const place = join(folder, item.name);
        if (item.name.startsWith('.') || item.name.startsWith('~$')) continue;
        if (passedOver.some((other) => isInside(place, other))) continue;
        const name = `${prefix}${item.name}`;
        if (item.isFile()) add(place, name);
        if (!item.isDirectory()) continue;
        try {
          await walk(place, `${name}/`);
        } catch (error) {
          missed.push({ name, code: codeOf(error) });
        }
      }
    };
    const add = (place: string, given: string): void => {
      const name = given.normalize('NFC');
      const known = found.get(place)?.name;
      // Given twice, by itself and by a folder: the shorter name, whichever came first.
      if (known === undefined || name.length < known.length)
        found.set(place, { path: place, name });
    };
    try {
      if ((await stat(full)).isDirectory()) await walk(full, '');
      else add(full, basename(full));
    } catch (error) {
      missed.push({ name: path, code: codeOf(error) });
    }
  }
  missed.sort((a, b) => compareCodeUnits(a.name, b.name));
  return {
    found: [...found.values()].sort(
      (a, b) => compareCodeUnits(a.name, b.name) || compareCodeUnits(a.path, b.path),
    ),
    missed,
  };
}

export function codeOf(error: unknown): MissedFile['code'] {
  const code = (error as { code?: string }).code;
  if (code === 'ENOENT' || code === 'ENOTDIR') return 'not found';
  return code === 'EACCES' || code === 'EPERM' ? 'not allowed' : 'cannot read';
}
