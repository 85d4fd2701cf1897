import { existsSync } from 'node:fs';
import { homedir } from 'node:os';
import { basename, dirname, sep } from 'node:path';
import type { LockedStudy, RecentStudy } from '../api.ts';
import type { WantedStudy } from './room.ts';

export const studyEnding = '.understory';

/** What is shown of a study that is not open: where its file is, and nothing of what is in it. */
export function asRecent(path: string): RecentStudy {
  const folder = dirname(path);
  const home = homedir();
  return {
    path,
    name: basename(path, studyEnding),
    folder:
      folder === home
        ? '~'
        : folder.startsWith(home + sep)
          ? `~${folder.slice(home.length)}`
          : folder,
    missing: !existsSync(path),
  };
}

export function lockedStudy({ path, why }: WantedStudy): LockedStudy {
  // Whoever opens a study has just seen its name; over the shoulder of an empty chair nobody shall.
  if (why !== 'opening') return { why, name: null, folder: null };
  const { name, folder } = asRecent(path);
  return { why, name, folder };
}
