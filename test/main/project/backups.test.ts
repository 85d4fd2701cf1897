import * as fs from 'node:fs';
import * as path from 'node:path';
import { describe, expect, it } from 'vitest';
import {
  backupFolderBeside,
  listBackups,
  makeBackup,
  removeBackups,
  rewriteBackups,
  type BackupPlaces,
} from '../../../main/project/index.ts';
import { nameBeside } from '../../../main/project/name-beside.ts';
import { faultyStorage, type Fault, type Operation } from './faulty-storage.ts';
import {
  appendSamples,
  contents,
  create,
  look,
  newFolder,
  newPath,
  reopen,
} from './study-folder.ts';
import { quickStorage, sha256Of, valueOf } from './study-folder.ts';

function beside(studyPath: string, keep = 3): BackupPlaces {
  return { folder: backupFolderBeside(studyPath), keep, earlier: [] };
}

/** A clock that says these hours one after the other. */
function hours(...each: number[]): () => string {
  return () => `2026-03-01T${String(each.shift() ?? 23).padStart(2, '0')}:00:00.000Z`;
}

describe('a backup', () => {
  it('is the study as it stands, in a folder beside it, named with number and date', async () => {
    const at = newPath('Winter crossings.understory');
    const file = await create(at);
    appendSamples(file, 3);
    fs.chmodSync(at, 0o640);
    const made = valueOf(makeBackup(file, beside(at), { now: hours(9) }));
    const name = 'Winter crossings backup 1 2026-03-01 09.00.00.understory';
    expect(made).toMatchObject({ number: 1, at: '2026-03-01T09:00:00.000Z', size: file.size });
    expect(made?.path).toBe(path.join(path.dirname(at), 'Understory backups', name));
    expect(sha256Of(made?.path ?? '')).toBe(sha256Of(at));
    expect(fs.statSync(made?.path ?? '').mode & 0o777).toBe(0o640);
    expect(fs.readdirSync(backupFolderBeside(at))).toEqual([name]);
    appendSamples(file, 1);
    expect(await look(made?.path ?? '')).toEqual(contents(file).slice(0, 5));
  });

  it('leaves out what an interrupted write left at the end', async () => {
    const at = newPath();
    const file = await create(at);
    appendSamples(file, 2);
    fs.appendFileSync(at, 'half a frame');
    const made = valueOf(makeBackup(file, beside(at)));
    expect((await reopen(made?.path ?? '', { readOnly: true })).leftOver).toBe(0);
  });

  it('is not made where the newest says the same, and is again after the next decision', async () => {
    const at = newPath();
    const file = await create(at);
    appendSamples(file, 1);
    expect(valueOf(makeBackup(file, beside(at)))).not.toBeNull();
    expect(valueOf(makeBackup(file, beside(at)))).toBeNull();
    appendSamples(file, 1);
    expect(valueOf(makeBackup(file, beside(at)))?.number).toBe(2);
    expect(valueOf(makeBackup(file, beside(at, 0)))).toBeNull();
  });

  it('pushes out the oldest by number, also where the clock was set back', async () => {
    const at = newPath();
    const file = await create(at);
    const now = hours(12, 13, 4, 3, 2);
    for (let round = 0; round < 5; round++) {
      appendSamples(file, 1);
      valueOf(makeBackup(file, beside(at, 2), { now }));
    }
    const kept = listBackups(file, beside(at));
    expect(kept.map(({ number }) => number)).toEqual([5, 4]);
    expect(await look(kept[0]?.path ?? '')).toEqual(contents(file));
  });

  it('refuses to copy a record that is no longer what was written', async () => {
    const at = newPath();
    const file = await create(at);
    appendSamples(file, 3);
    const { offset } = file.records[2];
    const handle = fs.openSync(at, 'r+');
    fs.writeSync(handle, Uint8Array.from([7]), 0, 1, offset + 112);
    fs.closeSync(handle);
    expect(makeBackup(file, beside(at))).toMatchObject({ code: 'damaged', sequence: 3 });
    expect(fs.readdirSync(backupFolderBeside(at))).toEqual([]);
  });

  it.each([
    ['spaces and quotes', ' it’s "hers" & \'his\' '],
    ['emoji', '⛴️ ferry 🏝️'],
    ['two hundred and forty characters', 'n'.repeat(240)],
    ['wide characters', 'é'.repeat(110)],
    ['a name like a backup', 'a backup 3 2026-03-01 09.00.00'],
  ])('takes a study’s name with %s', async (_, name) => {
    const at = newPath(`${name}.understory`);
    const file = await create(at);
    for (let round = 0; round < 3; round++) {
      appendSamples(file, 1);
      valueOf(makeBackup(file, beside(at, 2)));
    }
    expect(listBackups(file, beside(at)).map(({ number }) => number)).toEqual([3, 2]);
  });

  it('can be kept elsewhere, and those of before are found', async () => {
    const at = newPath();
    const file = await create(at);
    appendSamples(file, 1);
    valueOf(makeBackup(file, beside(at)));
    appendSamples(file, 1);
    const first = path.join(newFolder(), 'safe');
    valueOf(makeBackup(file, { folder: first, keep: 3, earlier: [] }));
    appendSamples(file, 1);
    const places = { folder: path.join(newFolder(), 'safer'), keep: 2, earlier: [first] };
    valueOf(makeBackup(file, places));
    expect(
      listBackups(file, places).map(({ number, path: one }) => [number, path.dirname(one)]),
    ).toEqual([
      [3, places.folder],
      [2, first],
    ]);
  });

  it('says where it could not be made', async () => {
    const at = newPath();
    const file = await create(at);
    appendSamples(file, 1);
    const nowhere = { folder: path.join(newFolder(), 'not', 'there'), keep: 3, earlier: [] };
    expect(makeBackup(file, nowhere)).toMatchObject({ code: 'not found', path: nowhere.folder });
    fs.writeFileSync(backupFolderBeside(at), 'a file in the way');
    expect(makeBackup(file, beside(at))).toMatchObject({ ok: false });
    appendSamples(file, 1);
  });
});

describe('whichever operation of a backup goes wrong', () => {
  const all: Operation[] = [
    'open',
    'read',
    'write',
    'sync',
    'stat',
    'statPath',
    'list',
    'makeFolder',
    'rename',
    'remove',
    'syncFolder',
  ];

  it.each<[Fault, Operation[]]>([
    ['fails', all],
    ['dead', all],
    ['half', ['write', 'rename', 'sync']],
    ['short', ['write']],
  ])(
    '(%s, of %j) the study goes on, and every backup that bears a name is whole',
    async (fault, counted) => {
      const rounds = async (storage: ReturnType<typeof faultyStorage>) => {
        const at = newPath();
        const file = await create(at, { storage });
        for (let round = 0; round < 3; round++) {
          storage.plan = null;
          appendSamples(file, 1);
          storage.plan = plan;
          makeBackup(file, beside(at, 2), { storage });
        }
        storage.plan = null;
        return { at, file };
      };
      let plan = { at: Infinity, fault, counted, code: 'ENOSPC' };
      const counting = faultyStorage();
      await rounds(counting);
      const total = counting.count();
      expect(total).toBeGreaterThanOrEqual(3);
      const hits = new Set<string>();
      for (let at = 1; at <= total; at++) {
        plan = { at, fault, counted, code: 'ENOSPC' };
        const storage = faultyStorage();
        const done = await rounds(storage);
        hits.add(storage.hit() ?? '');
        const where = `${fault} ${at} ${storage.hit()}`;
        expect(await look(done.at), where).toEqual(contents(done.file));
        const backups = listBackups(done.file, beside(done.at));
        for (const { path: one } of backups) {
          const seen = await look(one);
          expect(contents(done.file).slice(0, seen.length), where).toEqual(seen);
        }
        // What was left half made is taken away by the next, and goes on counting.
        appendSamples(done.file, 1);
        valueOf(makeBackup(done.file, beside(done.at, 2), { storage: quickStorage }));
        const names = fs.readdirSync(backupFolderBeside(done.at));
        expect(
          names.filter((name) => name.startsWith('.')),
          where,
        ).toEqual([]);
        expect(await look(listBackups(done.file, beside(done.at))[0].path)).toEqual(
          contents(done.file),
        );
        done.file.close();
      }
      for (const one of counted) expect([...hits]).toContain(one);
    },
  );
});

describe('backups of a study that was written anew', () => {
  async function withBackups() {
    const at = newPath();
    const file = await create(at);
    valueOf(file.append([Buffer.from('Ottoline of Harbour Street')], () => ({ type: 'one' })));
    valueOf(makeBackup(file, beside(at)));
    appendSamples(file, 1);
    valueOf(makeBackup(file, beside(at)));
    return { at, file, folder: backupFolderBeside(at) };
  }

  it('give way to one of the study as it is now', async () => {
    const { at, file, folder } = await withBackups();
    valueOf(await file.compact([1]));
    const rewritten = rewriteBackups(file, beside(at));
    expect(rewritten).toMatchObject({ failed: null, left: [], made: { number: 3 } });
    expect(rewritten.removed).toHaveLength(2);
    const [only, ...rest] = fs.readdirSync(folder);
    expect(rest).toEqual([]);
    const bytes = fs.readFileSync(path.join(folder, only));
    expect(bytes.includes('Ottoline')).toBe(false);
    expect(await look(path.join(folder, only))).toEqual(contents(file));
  });

  it('are as locked as the study is', async () => {
    const { at, file } = await withBackups();
    valueOf(await file.setPassword('a long enough password'));
    const [before] = listBackups(file, beside(at));
    expect(fs.readFileSync(before.path).includes('Ottoline')).toBe(true);
    const { made, removed } = rewriteBackups(file, beside(at));
    expect(removed).toHaveLength(2);
    const bytes = fs.readFileSync(made?.path ?? '');
    expect(bytes.equals(fs.readFileSync(at))).toBe(true);
    expect(bytes.includes('Ottoline')).toBe(false);
    expect(valueOf(makeBackup(file, beside(at)))).toBeNull();
  });

  it('go also where the study has been renamed, or a backup is damaged', async () => {
    const { at, file, folder } = await withBackups();
    file.close();
    const [first] = fs.readdirSync(folder);
    fs.writeFileSync(path.join(folder, first), 'Ottoline');
    const renamed = path.join(path.dirname(at), 'another.understory');
    const again = await reopen(at);
    expect(removeBackups(again, beside(at)).removed).toHaveLength(2);
    again.close();
    fs.renameSync(at, renamed);
    const last = await reopen(renamed);
    appendSamples(last, 1);
    valueOf(makeBackup(last, beside(renamed)));
    last.close();
    fs.renameSync(renamed, at);
    expect(removeBackups(await reopen(at), beside(at)).removed).toMatchObject([
      { study: 'another' },
    ]);
    expect(fs.readdirSync(folder)).toEqual([]);
  });

  it('go even where no new one can be made, and what a killed process left of one goes too', async () => {
    const { at, file, folder } = await withBackups();
    fs.writeFileSync(nameBeside(path.join(folder, path.basename(at)), 'backup'), 'Ottoline');
    const storage = faultyStorage({ at: 1, fault: 'fails', counted: ['makeFolder'] });
    expect(rewriteBackups(file, beside(at), { storage })).toMatchObject({
      made: null,
      failed: { code: 'cannot write' },
      left: [],
    });
    expect(fs.readdirSync(folder)).toEqual([]);
  });

  it('that cannot be removed or looked for are named', async () => {
    const { at, file } = await withBackups();
    const storage = faultyStorage({ at: 1, fault: 'fails', counted: ['remove'], code: 'EBUSY' });
    const { left } = removeBackups(file, beside(at), { storage });
    expect(left).toMatchObject([{ code: 'cannot write', cause: 'EBUSY' }]);
    expect(fs.existsSync(left[0].path)).toBe(true);
    const unread = faultyStorage({ at: 1, fault: 'fails', counted: ['list'], code: 'EACCES' });
    expect(removeBackups(file, beside(at), { storage: unread }).left).toMatchObject([
      { code: 'not allowed', path: backupFolderBeside(at) },
    ]);
  });

  it('of another study in the same folder stay', async () => {
    const { at, file, folder } = await withBackups();
    const other = path.join(path.dirname(at), 'other.understory');
    const { createStudyFile } = await import('../../../main/project/index.ts');
    const second = valueOf(await createStudyFile(other, { studyId: 'another study' }));
    appendSamples(second, 1);
    valueOf(makeBackup(second, beside(other)));
    fs.writeFileSync(path.join(folder, 'notes backup.txt'), 'somebody’s');
    removeBackups(file, beside(at));
    expect(fs.readdirSync(folder)).toHaveLength(2);
    second.close();
  });
});
