import { copyFileSync, mkdirSync, readdirSync, readFileSync, statSync } from 'node:fs';
import { join } from 'node:path';
import { beforeAll, describe, expect, test } from 'vitest';
import { placesFor, usualBackups } from '../../../main/backup-settings.ts';
import { isLocked, makeBackup, openStudyFile } from '../../../main/project/index.ts';
import { copyOf, fittedStudy } from './fitted-study.ts';
import { write } from './material.ts';
import { run, temporaryFolder } from './run.ts';
import { newStudy } from '../window/table.ts';

const folder = temporaryFolder();
const kept = join(folder, 'kept elsewhere');
const settings = { ...usualBackups, folder: kept };
const one = 'moss after four räins';
const two = 'lichen on the north side';

const command = (words: readonly string[], answers: (string | null)[] | null = null) =>
  run(folder, words, {
    backups: () => settings,
    password: {
      file: null,
      environment: null,
      ask: answers === null ? null : async () => answers.shift() ?? null,
    },
  });

async function backUp(name: string): Promise<void> {
  const opened = await openStudyFile(join(folder, name));
  if (!opened.ok) throw new Error(opened.code);
  mkdirSync(kept, { recursive: true });
  const made = makeBackup(opened.value, placesFor(settings, opened.value.path));
  opened.value.close();
  if (!made.ok) throw new Error(made.code);
}

const backupsOf = (name: string): string[] =>
  readdirSync(kept)
    .filter((each) => each.startsWith(`${name} backup `))
    .map((each) => join(kept, each));
const size = (name: string): number => statSync(join(folder, name)).size;
const grouped = (count: number): string => count.toLocaleString('en-GB');
const opens = async (name: string, password?: string): Promise<boolean> => {
  const opened = await openStudyFile(join(folder, name), { readOnly: true, password });
  if (opened.ok) opened.value.close();
  return opened.ok;
};

beforeAll(async () => {
  write(folder, { 'one.txt': `${one}\n`, 'two.txt': `${two}\n`, 'short.txt': 'short\n' });
  await fittedStudy(folder, 'made.understory', 6);
});

describe('compact', () => {
  test('says both sizes and that backups stay; a second time nothing can go', async () => {
    // Files that were taken in, taken back, and can't come again.
    const table = await newStudy(3);
    await table.ask('undo', null);
    await table.ask('undo', null);
    await table.ask('renameStudy', { name: 'Winter' });
    await table.ask('closeStudy', null);
    copyFileSync(table.recent[0], join(folder, 'big.understory'));
    await backUp('big.understory');
    const [backup] = backupsOf('big');
    const [before, other] = [size('big.understory'), readFileSync(backup)];

    const done = await command(['compact', 'big.understory']);
    const after = size('big.understory');
    expect(done.code).toBe(0);
    expect(after).toBeLessThan(before);
    expect(done.out).toContain(`Before: ${grouped(before)} bytes; after: ${grouped(after)} bytes.`);
    expect(done.out).toContain(`One backup from before stays as it is, ${grouped(before)} bytes.`);
    expect(readFileSync(backup).equals(other)).toBe(true);
    const again = await command(['compact', 'big.understory']);
    expect(again.out).toMatch(/^Nothing in the study can go; /u);
    expect(size('big.understory')).toBe(after);
    expect((await command(['verify', 'big.understory'])).code).toBe(0);
  });

  test('needs one study, and the password of a locked one', async () => {
    expect((await command(['compact'])).code).toBe(2);
    expect((await command(['compact', 'a', 'b'])).code).toBe(2);
    const none = await command(['compact', 'nowhere.understory']);
    expect([none.code, none.err]).toEqual([1, expect.stringContaining('“nowhere.understory”')]);
  });
});

describe('password', () => {
  test('is set, changed and removed with files, and the backups go along in the same act', async () => {
    copyOf(folder, 'made.understory', 's.understory');
    await backUp('s.understory');
    const set = await command(['password', 's.understory', '--set', '--new-password-file=one.txt']);
    expect(set).toMatchObject({ code: 0, out: expect.stringMatching(/^The password is set\./u) });
    expect(set.err).toContain('nobody can bring it back');
    expect(set.out).toContain('One backup from before was removed');
    expect(backupsOf('s').map((path) => isLocked(path))).toEqual([true]);
    expect([await opens('s.understory'), await opens('s.understory', one)]).toEqual([false, true]);

    const change = ['password', 's.understory', '--set', '--new-password-file', 'two.txt'];
    expect((await command(change)).code).toBe(1);
    expect((await command([...change, '--password-file', 'two.txt'])).code).toBe(1);
    expect((await command([...change, '--password-file', 'one.txt'])).code).toBe(0);
    expect(await opens('s.understory', two)).toBe(true);

    const remove = await command(['password', 's.understory', '--remove'], [two]);
    expect(remove.code).toBe(0);
    expect(remove.err).toContain('whoever gets the file can read all of it');
    expect(backupsOf('s').map((path) => isLocked(path))).toEqual([false]);
    expect(await opens('s.understory')).toBe(true);
  });

  test('is asked for twice where somebody can type, and nothing changes unless both are the same', async () => {
    copyOf(folder, 'made.understory', 't.understory');
    const set = ['password', 't.understory', '--set'];
    for (const answers of [[one, two], [one, null], [null], ['short', 'short']]) {
      expect((await command(set, answers)).code).toBe(1);
      expect(isLocked(join(folder, 't.understory'))).toBe(false);
    }
    const done = await command(set, [one, one]);
    expect(done.code).toBe(0);
    expect(done.out + done.err).not.toContain(one);
    expect(await opens('t.understory', one)).toBe(true);
  });

  test('is refused in a sentence where a call is not understood or nothing can be done', async () => {
    copyOf(folder, 'made.understory', 'u.understory');
    for (const [words, code, what] of [
      [['u.understory'], 2, 'either --set or --remove'],
      [['u.understory', '--set', '--remove'], 2, 'either --set or --remove'],
      [['--set'], 2, 'Name one study'],
      [['u.understory', '--remove', '--new-password-file', 'one.txt'], 2, 'with --set alone'],
      [['u.understory', '--remove'], 1, 'has no password'],
      [['u.understory', '--set'], 1, '--new-password-file'],
      [['u.understory', '--set', '--new-password-file', 'short.txt'], 1, 'at least 8'],
      [['u.understory', '--set', '--new-password-file', 'no.txt'], 1, '“no.txt”'],
    ] as const) {
      const ended = await command(['password', ...words]);
      expect([ended.code, ended.err]).toEqual([code, expect.stringContaining(what)]);
    }
    expect(isLocked(join(folder, 'u.understory'))).toBe(false);
  });
});
