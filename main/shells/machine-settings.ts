import { mkdir, readFile, rename, writeFile } from 'node:fs/promises';
import { dirname } from 'node:path';
import type { MachineSettings } from '../window/session-types.ts';

const longest = 1_000_000;

/**
 * Small things that a machine keeps for the person who works there, in a file of the app's settings
 * that only its owner can read. What cannot be read is as if it had never been kept.
 */
export function machineSettings(file: string): MachineSettings {
  async function all(): Promise<Record<string, unknown>> {
    try {
      const text = await readFile(file, 'utf8');
      const value: unknown = text.length > longest ? null : JSON.parse(text);
      const usable = typeof value === 'object' && value !== null && !Array.isArray(value);
      return usable ? { ...value } : {};
    } catch {
      return {};
    }
  }

  // One after the other, so that two quick changes do not lose one.
  let last: Promise<void> = Promise.resolve();
  return {
    get: async (key) => {
      await last;
      const kept = await all();
      return Object.hasOwn(kept, key) ? kept[key] : undefined;
    },
    keep: (key, value) => {
      last = last.then(async () => {
        try {
          const kept = Object.entries(await all()).filter(([other]) => other !== key);
          await mkdir(dirname(file), { recursive: true, mode: 0o700 });
          const next = `${file}.${process.pid}`;
          const text = JSON.stringify(Object.fromEntries([...kept, [key, value]]), null, 2);
          await writeFile(next, text, { mode: 0o600 });
          await rename(next, file);
        } catch {
          // Conveniences: a settings folder that cannot be written costs nobody a study.
        }
      });
      return last;
    },
  };
}
