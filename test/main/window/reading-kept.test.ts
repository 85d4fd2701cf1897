import { mkdtemp, readFile, rm, stat, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { machineSettings } from '../../../main/shells/machine-settings.ts';
import { newStudy, newTable } from './table.ts';

let folder = '';
beforeEach(async () => {
  folder = await mkdtemp(join(tmpdir(), 'understory-'));
});
afterEach(() => rm(folder, { recursive: true }));

const preferences = { suggestions: false, goOn: true, singleKeys: true, keys: { next: 'd' } };
const stopped = {
  kind: 'random draw',
  unreadOnly: true,
  count: 60,
  seed: 7,
  theme: -1,
  only: -1,
  transcript: 2,
  start: 812,
} as const;

describe('what a machine keeps for a reader', () => {
  it('is found again by another session, the place in its own study alone', async () => {
    const machine = machineSettings(join(folder, 'settings', 'machine.json'));
    const table = await newStudy(1, { machine });
    await table.ask('keepReading', { preferences, stopped: null });
    await table.ask('keepReading', { preferences: null, stopped });
    const { path } = (await table.ask('overview', null))!.study;
    await table.ask('closeStudy', null);
    const again = newTable({ machine: machineSettings(join(folder, 'settings', 'machine.json')) });
    expect(await again.ask('readingKept', null)).toEqual({ preferences, stopped: null });
    await again.ask('openStudy', { path, readOnly: false });
    expect(await again.ask('readingKept', null)).toEqual({ preferences, stopped });
    const other = await newStudy(1, { machine });
    expect((await other.ask('readingKept', null)).stopped).toBeNull();
    const kept = await readFile(join(folder, 'settings', 'machine.json'), 'utf8');
    expect(kept).not.toMatch(/Crossings|P1|Interviewer/u);
    if (process.platform !== 'win32') {
      const { mode } = await stat(join(folder, 'settings', 'machine.json'));
      expect(mode & 0o077).toBe(0);
    }
  });

  it('is nothing where it is damaged, foreign, or cannot be kept', async () => {
    const file = join(folder, 'machine.json');
    for (const text of ['{"a":', '[1]', '{"reading": {"suggestions": 3}, "stopped": [1]}']) {
      await writeFile(file, text);
      const table = newTable({ machine: machineSettings(file) });
      expect(await table.ask('readingKept', null)).toEqual({ preferences: null, stopped: null });
    }
    const blocked = newTable({ machine: machineSettings(join(file, 'machine.json')) });
    await blocked.ask('keepReading', { preferences, stopped: null });
    expect((await blocked.ask('readingKept', null)).preferences).toBeNull();
    const none = newTable();
    await none.ask('keepReading', { preferences, stopped: null });
    expect((await none.ask('readingKept', null)).preferences).toBeNull();
  });
});
