import { mkdirSync, readFileSync, renameSync, writeFileSync } from 'node:fs';
import { dirname } from 'node:path';

/** After how many minutes without a sign of a person a study with a password is locked; 0: never. */
export const idleChoices = [1, 2, 5, 10, 15, 30, 60, 0] as const;
export const usualIdleMinutes = 10;

/** How this machine locks studies, whichever study it is. */
export interface LockSettings {
  idleMinutes(): number;
  /** Throws the system's error where it cannot be kept. */
  setIdleMinutes(minutes: number): void;
}

export function isIdleChoice(value: unknown): value is number {
  return idleChoices.some((choice) => choice === value);
}

/** Kept in a file of the app's settings. */
export function lockSettings(file: string): LockSettings {
  return {
    idleMinutes() {
      try {
        const value = JSON.parse(readFileSync(file, 'utf8')) as { idleMinutes?: unknown } | null;
        return isIdleChoice(value?.idleMinutes) ? value.idleMinutes : usualIdleMinutes;
      } catch {
        return usualIdleMinutes;
      }
    },
    setIdleMinutes(idleMinutes) {
      mkdirSync(dirname(file), { recursive: true, mode: 0o700 });
      const next = `${file}.${process.pid}`;
      writeFileSync(next, JSON.stringify({ idleMinutes }), { mode: 0o600 });
      renameSync(next, file);
    },
  };
}

/** For this run of the program alone. */
export function passingLockSettings(minutes: number = usualIdleMinutes): LockSettings {
  let now = minutes;
  return { idleMinutes: () => now, setIdleMinutes: (next) => void (now = next) };
}
