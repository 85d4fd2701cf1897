import { mkdir, readFile, rename, writeFile } from 'node:fs/promises';
import { dirname } from 'node:path';
import type { RecentPaths } from '../window/session-types.ts';

const longest = 10;

/**
 * Paths of studies opened lately, in a file of the app's settings that only its owner can read. The
 * system's own list of recent documents is left alone: others can see it.
 */
export function recentPaths(file: string): RecentPaths {
  async function list(): Promise<readonly string[]> {
    try {
      const value: unknown = JSON.parse(await readFile(file, 'utf8'));
      return Array.isArray(value)
        ? value.filter((path) => typeof path === 'string').slice(0, longest)
        : [];
    } catch {
      return [];
    }
  }

  async function write(paths: readonly string[]): Promise<void> {
    try {
      await mkdir(dirname(file), { recursive: true, mode: 0o700 });
      const next = `${file}.${process.pid}`;
      await writeFile(next, JSON.stringify(paths, null, 2), { mode: 0o600 });
      await rename(next, file);
    } catch {
      // A list of conveniences: a settings folder that cannot be written costs nobody a study.
    }
  }

  // One after the other, so that two quick changes do not lose one.
  let last: Promise<void> = Promise.resolve();
  function change(next: (paths: readonly string[]) => readonly string[]): Promise<void> {
    last = last.then(async () => write(next(await list())));
    return last;
  }

  return {
    list,
    add: (path) =>
      change((paths) => [path, ...paths.filter((other) => other !== path)].slice(0, longest)),
    remove: (path) => change((paths) => paths.filter((other) => other !== path)),
  };
}
