import * as fs from 'node:fs';
import * as path from 'node:path';
import { afterEach, beforeEach, describe, expect, test, vi } from 'vitest';
import type { LockedStudy } from '../../../main/api.ts';
import { passingBackupStore } from '../../../main/backup-settings.ts';
import { passingLockSettings } from '../../../main/lock-settings.ts';
import { isLocked } from '../../../main/project/index.ts';
import { newFolder, newStudy, newTable, passageOf, seen, type Table } from './table.ts';

const password = 'moss after four rains';

async function pathOf(table: Table): Promise<string> {
  return (await table.ask('overview', null))!.study.path!;
}

/** A study with a password in a window that notes what it is told. */
async function lockedTable(
  transcripts = 1,
  given: Parameters<typeof newStudy>[1] = {},
): Promise<Table & { readonly told: (LockedStudy | 'closed' | 'changed')[] }> {
  const table = await newStudy(transcripts, given);
  await table.ask('setPassword', { current: null, next: password });
  const told: (LockedStudy | 'closed' | 'changed')[] = [];
  table.session.on('locked', (locked) => told.push(locked));
  table.session.on('closed', () => told.push('closed'));
  table.session.on('changed', () => told.push('changed'));
  return { ...table, told };
}

describe('a password', () => {
  test('is set, changed and removed, and the study stays open as it was', async () => {
    const table = await newStudy(2);
    const file = await pathOf(table);
    const before = await table.ask('gatherView', null);
    const set = await table.ask('setPassword', { current: null, next: password });
    expect(set.overview.hasPassword).toBe(true);
    expect(isLocked(file)).toBe(true);
    expect(await table.ask('gatherView', null)).toEqual(before);

    const another = 'bark and berries too';
    expect(await table.refused('setPassword', { current: null, next: another })).toBe(
      'wrong password',
    );
    expect(await table.refused('setPassword', { current: 'a guess', next: null })).toBe(
      'wrong password',
    );
    await table.ask('setPassword', { current: password, next: another });
    const removed = await table.ask('setPassword', { current: another, next: null });
    expect(removed.overview.hasPassword).toBe(false);
    expect(isLocked(file)).toBe(false);
    expect(await table.refused('setPassword', { current: null, next: null })).toBe('no password');
    expect(await table.refused('setPassword', { current: null, next: 'short' })).toBe(
      'password too short',
    );
    await table.ask('renameStudy', { name: 'Other crossings' });
    expect(await table.ask('gatherView', null)).toEqual(before);
  });

  test('takes the backups along: none stays that opens as before', async () => {
    const table = await newStudy(1, { backups: passingBackupStore({ keep: 3 }) });
    await table.ask('makeBackup', null);
    const [first] = (await table.ask('backupsView', null)).backups;
    const set = await table.ask('setPassword', { current: null, next: password });
    expect(set.notes).toEqual([expect.stringMatching(/from before (was|were) removed, and one/u)]);
    const { backups } = await table.ask('backupsView', null);
    expect(backups).toHaveLength(1);
    expect([fs.existsSync(first.path), isLocked(backups[0].path)]).toEqual([false, true]);
    await table.ask('setPassword', { current: password, next: null });
    const after = (await table.ask('backupsView', null)).backups;
    expect(after.map(({ path: one }) => isLocked(one))).toEqual([false]);
  });

  test('may be there from the start', async () => {
    const table = newTable();
    const started = await table.ask('startStudy', { name: 'A', path: null, password });
    expect(started?.hasPassword).toBe(true);
    expect(isLocked(started!.study.path!)).toBe(true);
    expect(await table.refused('startStudy', { name: 'B', path: null, password: 'short' })).toBe(
      'password too short',
    );
    expect(fs.readdirSync(table.folder).filter((name) => name.startsWith('B'))).toEqual([]);
  });

  test('cannot be set on a study that is open for reading only, nor without a study', async () => {
    const table = await newStudy(1);
    const file = await pathOf(table);
    await table.ask('openStudy', { path: file, readOnly: true });
    expect(await table.refused('setPassword', { current: null, next: password })).toBe('read only');
    await table.ask('closeStudy', null);
    expect(await table.refused('setPassword', { current: null, next: password })).toBe('no study');
  });

  test('is set with nothing else at work on the study, and what is asked meanwhile waits', async () => {
    const table = await newStudy(2);
    const { place } = await passageOf(table);
    const all = await Promise.all([
      table.ask('markNone', { place, ...seen }),
      table.ask('setPassword', { current: null, next: password }),
      table.ask('renameStudy', { name: 'Renamed meanwhile' }),
      table.ask('gatherView', null),
    ]);
    expect(all[1].overview.hasPassword).toBe(true);
    const after = await table.ask('overview', null);
    expect(after).toMatchObject({ hasPassword: true, study: { name: 'Renamed meanwhile' } });
  });
});

describe('opening a study that has a password', () => {
  test('asks for it, tells nothing where it is wrong, and opens where it is right', async () => {
    const first = await lockedTable(2);
    const file = await pathOf(first);
    await first.ask('closeStudy', null);
    const table = newTable({ folder: first.folder });
    const told: unknown[] = [];
    table.session.on('locked', (locked) => told.push(locked));
    expect(await table.ask('lockedStudy', null)).toBeNull();
    expect(await table.refused('openStudy', { path: file, readOnly: false })).toBe('locked');
    const waiting = { why: 'opening', name: 'Crossings', folder: path.dirname(file) };
    expect(told).toEqual([waiting]);
    expect(await table.ask('lockedStudy', null)).toEqual(waiting);
    expect(await table.ask('overview', null)).toBeNull();

    const wrong = await table.answer('unlockStudy', { password: 'a guess' });
    expect(wrong).toMatchObject({ code: 'wrong password' });
    expect(JSON.stringify(wrong)).not.toContain('Crossings');
    expect(table.recent).toEqual([]);
    const opened = await table.ask('unlockStudy', { password });
    expect(opened).toMatchObject({ hasPassword: true, transcripts: 2, readOnly: false });
    expect(table.recent).toEqual([file]);
    expect(await table.ask('lockedStudy', null)).toBeNull();
  });

  test('may be left, and what was open before is open still', async () => {
    const first = await lockedTable();
    const file = await pathOf(first);
    await first.ask('closeStudy', null);
    const table = newTable({ folder: first.folder });
    await table.ask('startStudy', { name: 'Mine', path: null });
    expect(await table.refused('openStudy', { path: file, readOnly: false })).toBe('locked');
    expect((await table.ask('leaveLocked', null))?.study.name).toBe('Mine');
    expect(await table.ask('lockedStudy', null)).toBeNull();
    await table.ask('closeStudy', null);
    expect(await table.refused('openStudy', { path: file, readOnly: true })).toBe('locked');
    expect(await table.ask('leaveLocked', null)).toBeNull();
    expect(await table.refused('unlockStudy', { password })).toBe('no study');
  });

  test('for reading only stays so', async () => {
    const first = await lockedTable();
    const file = await pathOf(first);
    const table = newTable({ folder: first.folder });
    expect(await table.refused('openStudy', { path: file, readOnly: true })).toBe('locked');
    expect((await table.ask('unlockStudy', { password })).readOnly).toBe(true);
  });
});

describe('locking a study that is open', () => {
  test('closes it at once, shows nothing of it, and the password brings it back', async () => {
    const table = await lockedTable();
    const file = await pathOf(table);
    await table.ask('lockStudy', null);
    expect(table.told).toEqual([{ why: 'asked', name: null, folder: null }]);
    expect(await table.ask('overview', null)).toBeNull();
    expect(await table.refused('gatherView', null)).toBe('no study');
    // Another window may have it meanwhile: nothing holds the file.
    const other = newTable();
    expect(await other.refused('openStudy', { path: file, readOnly: false })).toBe('locked');
    const back = await table.ask('unlockStudy', { password });
    expect(back).toMatchObject({ transcripts: 1, readOnly: false });
  });

  test('is refused where there is no password, or no study', async () => {
    const table = await newStudy(1);
    expect(await table.refused('lockStudy', null)).toBe('no password');
    await table.ask('closeStudy', null);
    expect(await table.refused('lockStudy', null)).toBe('no study');
  });
});

describe('a study with a password, when nobody is there', () => {
  beforeEach(() => {
    vi.useFakeTimers({ toFake: ['setInterval', 'clearInterval', 'Date', 'performance'] });
  });
  afterEach(() => {
    vi.useRealTimers();
  });
  const minutes = (count: number) => vi.advanceTimersByTimeAsync(count * 60_000);

  test('is locked after the time that was set, and not before', async () => {
    const table = await lockedTable(1, { lock: passingLockSettings(5) });
    await minutes(4.8);
    expect(await table.ask('overview', null)).not.toBeNull();
    await table.ask('stillHere', null);
    await minutes(4.8);
    expect(await table.ask('overview', null)).not.toBeNull();
    await minutes(0.5);
    expect(await table.ask('overview', null)).toBeNull();
    expect(table.told).toEqual([{ why: 'idle', name: null, folder: null }]);
    await table.ask('unlockStudy', { password });
    await minutes(4);
    expect(await table.ask('overview', null)).not.toBeNull();
  });

  test('is locked at once when a machine wakes after as long', async () => {
    const table = await lockedTable(1, { lock: passingLockSettings(30) });
    vi.setSystemTime(Date.now() + 31 * 60_000);
    await minutes(0.1);
    expect(await table.ask('overview', null)).toBeNull();
  });

  test('is locked although the clock was set back', async () => {
    const table = await lockedTable(1, { lock: passingLockSettings(5) });
    vi.setSystemTime(Date.now() - 86_400_000);
    await minutes(5.2);
    expect(await table.ask('overview', null)).toBeNull();
  });

  test('stays open until a fit that runs is finished', async () => {
    const table = await lockedTable(2, { lock: passingLockSettings(1) });
    const fitting = table.ask('fit', { kind: 'from scratch', themes: 2 });
    await minutes(3);
    expect((await fitting).overview.fitted).toBe(true);
    expect(await table.ask('overview', null)).not.toBeNull();
    await minutes(0.1);
    expect(await table.ask('overview', null)).toBeNull();
  });

  test('is locked although a dialog of the system waits for an answer', async () => {
    const never = new Promise<null>(() => {});
    const dialogs = {
      chooseStudy: () => never,
      placeStudy: async () => path.join(newFolder(), 'a'),
      chooseTranscripts: () => never,
      placeFile: () => never,
    };
    const table = newTable({ dialogs, lock: passingLockSettings(1) });
    await table.ask('startStudy', { name: 'A', path: null, password });
    for (const asked of [
      table.ask('openStudy', { path: null, readOnly: false }),
      table.ask('chooseTranscripts', null),
      table.ask('saveFile', { fileName: 'a.csv', bytes: new Uint8Array(1) }),
    ]) {
      asked.catch(() => {});
    }
    await minutes(1.2);
    expect(await table.ask('overview', null)).toBeNull();
  });

  test('stays open where it has none, or where locking is switched off', async () => {
    const without = await newStudy(1, { lock: passingLockSettings(1) });
    const never = await lockedTable(1, { lock: passingLockSettings(0) });
    await minutes(120);
    expect(await without.ask('overview', null)).not.toBeNull();
    expect(await never.ask('overview', null)).not.toBeNull();
    const view = await never.ask('setIdleMinutes', { minutes: 2 });
    expect(view).toMatchObject({ idleMinutes: 2, hasPassword: true });
    expect(await never.refused('setIdleMinutes', { minutes: 3 })).toBe('no such idle time');
    await minutes(2.2);
    expect(await never.ask('overview', null)).toBeNull();
  });

  test('is locked by the shell when a screen is', async () => {
    const table = await lockedTable();
    await table.session.lock();
    expect(await table.ask('overview', null)).toBeNull();
    expect(table.told).toHaveLength(1);
  });
});
