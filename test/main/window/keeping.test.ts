import * as fs from 'node:fs';
import * as path from 'node:path';
import { describe, expect, test } from 'vitest';
import { passingBackupStore } from '../../../main/backup-settings.ts';
import { BackupKeeper } from '../../../main/window/backup-keeper.ts';
import { OpenStudy } from '../../../main/window/open-study.ts';
import { create } from '../project/study-folder.ts';
import { nameBeside } from '../../../main/project/name-beside.ts';
import { interviews, newFolder, newStudy, newTable, steadyClock, type Table } from './table.ts';

const keeping = (keep = 3) => ({ backups: passingBackupStore({ keep }) });
const backupsOf = (table: Table): string[] => {
  const folder = path.join(table.folder, 'Understory backups');
  return fs.existsSync(folder) ? fs.readdirSync(folder) : [];
};
const pathOf = async (table: Table): Promise<string> =>
  (await table.ask('overview', null))?.study.path ?? '';

describe('backups in a window', () => {
  test('are made when a study is opened and closed, where something was decided', async () => {
    const table = await newStudy(2, keeping());
    await new Promise(setImmediate);
    expect(backupsOf(table)).toHaveLength(1);
    await table.ask('renameStudy', { name: 'Winter' });
    await table.ask('closeStudy', null);
    expect(backupsOf(table)).toHaveLength(2);
    await table.ask('openStudy', { path: table.recent[0], readOnly: false });
    await new Promise(setImmediate);
    await table.ask('closeStudy', null);
    expect(backupsOf(table)).toHaveLength(2);
  });

  test('are not made of a study that is open for reading only, nor where none are kept', async () => {
    const table = await newStudy(0, keeping(0));
    await table.ask('closeStudy', null);
    expect(backupsOf(table)).toEqual([]);
    expect(await table.refused('makeBackup', null)).toBe('no study');
    await table.ask('openStudy', { path: table.recent[0], readOnly: false });
    expect(await table.refused('makeBackup', null)).toBe('no backups kept');
    await table.ask('keepBackups', { keep: 2, folder: null });
    await table.ask('openStudy', { path: table.recent[0], readOnly: true });
    expect(await table.refused('makeBackup', null)).toBe('reading only');
  });

  test('are listed newest first, made when asked for, removed, and no other file is', async () => {
    const table = await newStudy(0, keeping());
    await table.ask('renameStudy', { name: 'Winter' });
    const first = await table.ask('makeBackup', null);
    await table.ask('renameStudy', { name: 'Spring' });
    const { backups, keep, folder, failed } = await table.ask('makeBackup', null);
    expect({ keep, folder, failed }).toEqual({
      keep: 3,
      folder: path.join(table.folder, 'Understory backups'),
      failed: null,
    });
    expect(backups.map(({ number }) => number)).toEqual([2, 1]);
    expect(backups[0]).toMatchObject({
      calledThen: null,
      bytes: fs.statSync(backups[0].path).size,
    });
    const study = await pathOf(table);
    expect(await table.refused('removeBackup', { path: study })).toBe('no such backup');
    expect(fs.existsSync(study)).toBe(true);
    const left = await table.ask('removeBackup', { path: first.backups[0].path });
    expect(left.backups.map(({ number }) => number)).toEqual([2]);
  });

  test('go to the folder that is chosen, and a relative one is refused', async () => {
    const table = await newStudy(0, keeping());
    const folder = path.join(newFolder(), 'safe');
    expect(await table.refused('keepBackups', { keep: 2, folder: 'safe' })).toBe('no whole path');
    expect(await table.ask('keepBackups', { keep: 2, folder })).toMatchObject({
      keep: 2,
      folder,
      chosenFolder: folder,
    });
    await table.ask('renameStudy', { name: 'Winter' });
    expect((await table.ask('makeBackup', null)).backups[0].path.startsWith(folder)).toBe(true);
  });

  test('are opened as a copy, which leaves the study and the backup as they are', async () => {
    const table = await newStudy(0, keeping());
    await table.ask('renameStudy', { name: 'Winter' });
    const { backups } = await table.ask('makeBackup', null);
    await table.ask('renameStudy', { name: 'Spring' });
    const study = await pathOf(table);
    const backup = backups[0].path;
    const before = fs.readFileSync(backup);
    const opened = await table.ask('openBackup', { backup, path: null });
    expect(opened?.study).toEqual({
      id: expect.any(String) as string,
      name: 'Winter',
      path: path.join(table.folder, 'Crossings from backup 1.understory'),
    });
    await table.ask('renameStudy', { name: 'Another' });
    expect(fs.readFileSync(backup).equals(before)).toBe(true);
    expect((await table.ask('openStudy', { path: study, readOnly: true }))?.study.name).toBe(
      'Spring',
    );
    expect(await table.refused('openBackup', { backup: study, path: null })).toBe('no such backup');
  });

  test('that cannot be made are said once, and decisions go on', async () => {
    const cautions: string[] = [];
    const table = newTable(keeping());
    table.session.on('caution', (sentence) => cautions.push(sentence));
    fs.writeFileSync(path.join(table.folder, 'Understory backups'), 'a file in the way');
    await table.ask('startStudy', { name: 'Crossings', path: null });
    await new Promise(setImmediate);
    await table.ask('renameStudy', { name: 'Winter' });
    expect(await table.refused('makeBackup', null)).toBe('already there');
    expect(cautions).toHaveLength(1);
    expect(cautions[0]).toMatch(/^Decisions are saved in the study, and no backup .*\.$/su);
    expect((await table.ask('backupsView', null)).failed).toMatch(/exists already/u);
    await table.ask('closeStudy', null);
  });

  test('come again after a quarter of an hour of decisions', async () => {
    const file = await create(path.join(newFolder(), 'a.understory'));
    const open = new OpenStudy(file, { accountName: 'Ada', now: steadyClock() });
    let minutes = 0;
    const keeper = new BackupKeeper({
      store: passingBackupStore({ keep: 5 }),
      now: steadyClock(),
      moment: () => minutes * 60_000,
      onFailure: () => {},
    });
    const folder = path.join(path.dirname(file.path), 'Understory backups');
    const made: number[] = [];
    for (minutes of [0, 5, 14, 16, 20, 31.5]) {
      open.decide([{ kind: 'studyStarted', study: 's', name: 'A' }]);
      file.append([], () => ({ minutes }));
      keeper.look(open);
      await new Promise(setImmediate);
      made.push(fs.readdirSync(folder).length);
    }
    expect(made).toEqual([1, 1, 1, 2, 2, 3]);
  });
});

describe('a copy of the study', () => {
  test('is made beside it while the work goes on in the study', async () => {
    const table = await newStudy(1);
    const study = await pathOf(table);
    const copied = await table.ask('copyStudy', { path: null, goOn: false });
    expect(copied?.path).toBe(path.join(table.folder, 'Crossings copy.understory'));
    expect(copied?.overview.study.path).toBe(study);
    expect(fs.readFileSync(copied?.path ?? '').equals(fs.readFileSync(study))).toBe(true);
    expect((await table.ask('copyStudy', { path: null, goOn: false }))?.path).toMatch(/copy 2/u);
  });

  test('takes the study’s place where the work is to go on in it', async () => {
    const table = await newStudy(1);
    const study = await pathOf(table);
    const before = fs.readFileSync(study);
    const to = path.join(newFolder(), 'elsewhere');
    const copied = await table.ask('copyStudy', { path: to, goOn: true });
    expect(copied?.overview.study.path).toBe(`${to}.understory`);
    await table.ask('renameStudy', { name: 'Winter' });
    expect(fs.readFileSync(study).equals(before)).toBe(true);
    expect(table.recent[0]).toBe(`${to}.understory`);
  });

  test('of a study open for reading only can be worked in', async () => {
    const table = await newStudy(1);
    await table.ask('openStudy', { path: await pathOf(table), readOnly: true });
    expect(await table.refused('renameStudy', { name: 'Winter' })).toBe('read only');
    const copied = await table.ask('copyStudy', { path: null, goOn: true });
    expect(copied?.overview.readOnly).toBe(false);
    await table.ask('renameStudy', { name: 'Winter' });
  });

  test('is refused where a file of that name is there, the study’s own included', async () => {
    const table = await newStudy(0);
    const study = await pathOf(table);
    expect(await table.refused('copyStudy', { path: study, goOn: true })).toBe('already there');
    const there = path.join(table.folder, 'there.understory');
    fs.writeFileSync(there, 'somebody’s');
    expect(await table.refused('copyStudy', { path: there, goOn: false })).toBe('already there');
    expect(fs.readFileSync(there, 'utf8')).toBe('somebody’s');
    expect(await pathOf(table)).toBe(study);
  });

  test('asks the system where to, and is given up where that is cancelled', async () => {
    let answer: string | null = null;
    const folder = newFolder();
    const given = {
      dialogs: {
        chooseStudy: async () => null,
        placeStudy: async () => answer,
        chooseTranscripts: async () => null,
        placeFile: async () => null,
        chooseFolder: async () => '/safe',
      },
    };
    const second = newTable(given);
    answer = path.join(folder, 'a.understory');
    await second.ask('startStudy', { name: 'A', path: null });
    answer = null;
    expect(await second.ask('copyStudy', { path: null, goOn: true })).toBeNull();
    expect(await second.ask('chooseBackupFolder', null)).toBe('/safe');
    answer = path.join(folder, 'b.understory');
    fs.writeFileSync(answer, 'to be replaced, as the system’s dialog has asked');
    const copied = await second.ask('copyStudy', { path: null, goOn: true });
    expect(copied?.overview.study.path).toBe(answer);
  });
});

describe('a study written anew', () => {
  test('loses the numbers of a fit that can no longer be done again, and nothing else', async () => {
    const table = await newStudy(3, { fitted: true });
    expect((await table.ask('compactView', null)).goes).toEqual([]);
    await table.ask('undo', null);
    expect((await table.ask('compactView', null)).goes).toEqual([]);
    await table.ask('redo', null);
    await table.ask('undo', null);
    await table.ask('renameStudy', { name: 'Winter' });
    const view = await table.ask('compactView', null);
    expect(view.goes).toEqual(['fit from scratch']);
    expect(view.after).toBeLessThan(view.before);
    const study = await pathOf(table);
    expect(fs.statSync(study).size).toBe(view.before);
    expect(await table.ask('compactStudy', null)).toEqual(view);
    expect(fs.statSync(study).size).toBe(view.after);
    expect((await table.ask('compactView', null)).goes).toEqual([]);
    const undone = await table.ask('undo', null);
    expect(undone.overview.study.name).toBe('Crossings');
    await table.ask('fit', { kind: 'from scratch', themes: null });
    await table.ask('closeStudy', null);
    await table.ask('openStudy', { path: study, readOnly: false });
    expect((await table.ask('shapeView', null)).themes).toHaveLength(2);
  });

  test('keeps the text of a transcript that an undo brings back', async () => {
    const table = await newStudy(2);
    const { transcripts } = await table.ask('gatherView', null);
    await table.ask('removeTranscript', { transcript: transcripts[0].id });
    expect((await table.ask('compactView', null)).goes).toEqual([]);
    await table.ask('compactStudy', null);
    await table.ask('undo', null);
    const view = await table.ask('transcriptView', { transcript: transcripts[0].id });
    expect(view.text.length).toBeGreaterThan(100);
  });

  test('loses a transcript that was taken back and cannot be added again by redo', async () => {
    const table = await newStudy(0);
    await table.ask('addTranscripts', { files: interviews(1) });
    await table.ask('undo', null);
    await table.ask('renameStudy', { name: 'Winter' });
    expect((await table.ask('compactView', null)).goes).toEqual(['adding of P1']);
    await table.ask('compactStudy', null);
    const bytes = fs.readFileSync(await pathOf(table));
    expect(bytes.includes('The ferry was cancelled')).toBe(false);
  });

  test('is refused for reading only', async () => {
    const table = await newStudy(0);
    await table.ask('openStudy', { path: await pathOf(table), readOnly: true });
    expect(await table.refused('compactStudy', null)).toBe('read only');
  });
});

describe('a study that another machine is said to have open', () => {
  test('is refused with who has it, and opened all the same where a person says so', async () => {
    const table = await newStudy(0);
    const study = await pathOf(table);
    await table.ask('closeStudy', null);
    const owner = { host: 'north', name: 'Ruth', since: '2026-02-01T09:00:00.000Z' };
    fs.writeFileSync(nameBeside(study, 'open'), JSON.stringify(owner));
    const answer = await table.answer('openStudy', { path: study, readOnly: false });
    expect(answer).toMatchObject({
      code: 'noted elsewhere',
      path: study,
      refused: expect.stringContaining('Ruth on north') as string,
    });
    expect((await table.ask('openStudy', { path: study, readOnly: true }))?.readOnly).toBe(true);
    await table.ask('closeStudy', null);
    const opened = await table.ask('openStudy', {
      path: study,
      readOnly: false,
      despiteNote: true,
    });
    expect(opened?.readOnly).toBe(false);
  });
});
