import { mkdirSync, readFileSync, renameSync, writeFileSync } from 'node:fs';
import { dirname, isAbsolute } from 'node:path';
import { backupFolderBeside, type BackupPlaces } from './project/index.ts';

/** Where the settings are kept: given by the shell. */
export interface BackupStore {
  readonly read: () => BackupSettings;
  /** Throws the system's error. */
  readonly write: (settings: BackupSettings) => void;
}

/** How backups are kept on this machine, for all studies. */
export interface BackupSettings {
  /** How many of each study; 0 makes none. */
  readonly keep: number;
  /** An absolute path; null keeps them beside each study. */
  readonly folder: string | null;
  /** Folders that were set before: earlier backups may lie there. */
  readonly earlier: readonly string[];
}

export const usualBackups: BackupSettings = { keep: 5, folder: null, earlier: [] };
export const mostBackups = 100;
const mostEarlier = 50;

/** Where the backups of one study are. */
export function placesFor(settings: BackupSettings, studyPath: string): BackupPlaces {
  const { keep, folder, earlier } = settings;
  return { keep, folder: folder ?? backupFolderBeside(studyPath), earlier };
}

/** Other settings than before; the folder of before is remembered. */
export function changedBackups(
  before: BackupSettings,
  { keep, folder }: Pick<BackupSettings, 'keep' | 'folder'>,
): BackupSettings {
  const known = [before.folder, ...before.earlier].filter((one) => one !== null && one !== folder);
  const earlier = [...new Set(known)].filter((one) => one !== null).slice(0, mostEarlier);
  return { keep: Math.max(0, Math.min(mostBackups, Math.floor(keep))), folder, earlier };
}

/** What a file of the app's settings says; the usual where it says nothing that can be used. */
export function readBackupSettings(file: string): BackupSettings {
  try {
    const value: unknown = JSON.parse(readFileSync(file, 'utf8'));
    if (typeof value !== 'object' || value === null) return usualBackups;
    const { keep, folder, earlier } = value as Partial<BackupSettings>;
    const whole = typeof keep === 'number' && keep >= 0 && keep <= mostBackups;
    return {
      keep: whole ? Math.floor(keep) : usualBackups.keep,
      folder: typeof folder === 'string' && isAbsolute(folder) ? folder : null,
      earlier: Array.isArray(earlier)
        ? earlier.filter((one) => typeof one === 'string' && isAbsolute(one)).slice(0, mostEarlier)
        : [],
    };
  } catch {
    return usualBackups;
  }
}

/** In a file of the app's settings. */
export function backupStore(file: string): BackupStore {
  return {
    read: () => readBackupSettings(file),
    write: (settings) => writeBackupSettings(file, settings),
  };
}

/** Kept nowhere; none are made unless told. */
export function passingBackupStore(first: Partial<BackupSettings> = { keep: 0 }): BackupStore {
  let settings = { ...usualBackups, ...first };
  return {
    read: () => settings,
    write: (next) => {
      settings = next;
    },
  };
}

/** Whole or not at all; throws the system's error. */
export function writeBackupSettings(file: string, settings: BackupSettings): void {
  mkdirSync(dirname(file), { recursive: true, mode: 0o700 });
  const next = `${file}.${process.pid}`;
  writeFileSync(next, JSON.stringify(settings, null, 2), { mode: 0o600 });
  renameSync(next, file);
}
