import * as fs from 'node:fs';
import * as path from 'node:path';
import { describe, expect, it } from 'vitest';
import { nodeStorage, recoverStudyFile, type Storage } from '../../../main/project/index.ts';
import { faultyStorage } from './faulty-storage.ts';
import {
  appendSamples,
  contents,
  create,
  look,
  newFolder,
  newPath,
  reopen,
  sha256Of,
  valueOf,
} from './study-folder.ts';

describe('saving a copy', () => {
  it('gives the same bytes, and leaves the study open where it was', async () => {
    const file = await create(newPath());
    appendSamples(file, 5);
    const copy = path.join(newFolder(), 'copy.understory');
    expect(valueOf(await file.saveCopy(copy))).toBe(file.size);
    expect(sha256Of(copy)).toBe(sha256Of(file.path));
    expect(fs.readdirSync(path.dirname(copy))).toEqual(['copy.understory']);
    appendSamples(file, 1);
    const other = await reopen(copy);
    expect(other.studyId).toBe(file.studyId);
    appendSamples(other, 1);
  });

  it('leaves out an end that an interrupted write left', async () => {
    const at = newPath();
    const file = await create(at);
    appendSamples(file, 3);
    file.close();
    fs.truncateSync(at, file.size - 1);
    const reader = await reopen(at, { readOnly: true });
    const copy = path.join(newFolder(), 'copy.understory');
    expect(valueOf(await reader.saveCopy(copy))).toBe(reader.size);
    expect((await reopen(copy)).leftOver).toBe(0);
  });

  it('refuses a name that is taken unless told to replace it', async () => {
    const file = await create(newPath());
    appendSamples(file, 2);
    const copy = newPath('copy.understory');
    fs.writeFileSync(copy, 'something of somebody');
    expect(await file.saveCopy(copy)).toMatchObject({ code: 'already there', path: copy });
    expect(fs.readFileSync(copy, 'utf8')).toBe('something of somebody');
    valueOf(await file.saveCopy(copy, { replace: true }));
    expect(await look(copy)).toEqual(contents(file));
  });

  it('refuses to take its own place', async () => {
    const file = await create(newPath());
    expect(await file.saveCopy(file.path)).toMatchObject({ code: 'already there' });
    expect(await file.saveCopy(file.path, { replace: true })).toMatchObject({
      code: 'already there',
    });
    appendSamples(file, 1);
  });

  it('says where it could not', async () => {
    const storage = faultyStorage();
    const file = await create(newPath(), { storage });
    appendSamples(file, 2);
    const to = path.join(newFolder(), 'nowhere', 'copy');
    expect(await file.saveCopy(to)).toMatchObject({ code: 'not found' });
    const full = newFolder();
    storage.plan = { at: 1, fault: 'half', counted: ['write'], code: 'ENOSPC' };
    expect(await file.saveCopy(path.join(full, 'copy'))).toMatchObject({ code: 'no space' });
    expect(fs.readdirSync(full)).toEqual([]);
  });
});

describe('a file written anew', () => {
  it('is on the drive before it gets its name, and its name is made lasting after', async () => {
    const done: string[] = [];
    const storage: Storage = {
      ...nodeStorage,
      write: (...args) => (done.push('write'), nodeStorage.write(...args)),
      sync: (...args) => (done.push('sync'), nodeStorage.sync(...args)),
      rename: (...args) => (done.push('rename'), nodeStorage.rename(...args)),
      syncFolder: (...args) => (done.push('sync folder'), nodeStorage.syncFolder(...args)),
    };
    const order = ['write', 'sync', 'rename', 'sync folder'];
    const file = await create(newPath(), { storage, owner: null });
    expect(done.splice(0)).toEqual(['write', 'sync', 'sync folder']);
    appendSamples(file, 2);
    expect(done.splice(0)).toEqual(['write', 'sync', 'write', 'sync']);
    valueOf(await file.compact([2]));
    expect(done.splice(0)).toEqual(order);
    valueOf(await file.saveCopy(path.join(newFolder(), 'copy')));
    expect(done.splice(0)).toEqual(order);
    valueOf(await recoverStudyFile(file.path, path.join(newFolder(), 'new'), { storage }));
    expect(done.splice(0)).toEqual(order);
  });
});

describe.each([false, true])('compaction (closing the file first: %s)', (mustCloseToReplace) => {
  const storage = { ...nodeStorage, mustCloseToReplace };

  it('takes content away and keeps numbers, chain and head', async () => {
    const at = newPath();
    const file = await create(at, { storage });
    const secret = 'Ottoline of Harbour Street';
    valueOf(file.append([Buffer.from(secret), Buffer.from('kept')], () => ({ type: 'one' })));
    valueOf(file.append([], () => ({ type: 'two', memo: secret })));
    appendSamples(file, 4);
    const { head } = file;
    const seen = contents(file);
    const before = file.size;
    fs.chmodSync(at, 0o640);

    const sizes = valueOf(await file.compact([1, 4]));
    expect(sizes).toEqual({ before, after: file.size });
    expect(sizes.after).toBeLessThan(before);
    expect(fs.statSync(at)).toMatchObject({ size: sizes.after });
    expect(fs.statSync(at).mode & 0o777).toBe(0o640);
    expect(fs.readFileSync(at).includes('Ottoline')).toBe(false);
    const expected = [...seen];
    expected[0] = '1 blob removed';
    expected[3] = '4 edit removed';
    expect(contents(file)).toEqual(expected);
    expect(file.head).toBe(head);
    expect([...file.edits()].map(({ sequence }) => sequence)).not.toContain(4);
    expect(() => file.readBlob(1)).toThrow(/must be of a kept blob/);

    appendSamples(file, 2);
    const after = contents(file);
    file.close();
    expect(fs.readdirSync(path.dirname(at))).toEqual(['a.understory']);
    const again = await reopen(at);
    expect(contents(again)).toEqual(after);
    expect(valueOf(await again.compact([1])).after).toBe(again.size);
  });

  it('may take away the last edit too', async () => {
    const file = await create(newPath(), { storage });
    appendSamples(file, 3);
    valueOf(await file.compact([file.nextSequence - 1]));
    appendSamples(file, 1);
    file.close();
    expect(await look(file.path)).toHaveLength(6);
  });

  it('of nothing writes the same bytes', async () => {
    const file = await create(newPath(), { storage });
    appendSamples(file, 3);
    const before = sha256Of(file.path);
    valueOf(await file.compact([]));
    expect(sha256Of(file.path)).toBe(before);
  });

  it('says what misuse is, and lets nobody in between', async () => {
    const file = await create(newPath(), { storage });
    appendSamples(file, 2);
    await expect(file.compact([9])).rejects.toThrow(/unused holds 9/);
    const underWay = file.compact([2]);
    expect(() => file.append([], () => 1)).toThrow(/must wait for compact/);
    expect(() => file.close()).toThrow(/must wait for compact/);
    await expect(file.compact([])).rejects.toThrow(/must wait/);
    valueOf(await underWay);
    appendSamples(file, 1);
  });

  it('clears up after one that was killed in the middle', async () => {
    const at = newPath();
    const file = await create(at, { storage });
    appendSamples(file, 2);
    file.close();
    const { nameBeside } = await import('../../../main/project/name-beside.ts');
    fs.writeFileSync(nameBeside(at, 'new'), 'half a study');
    (await reopen(at)).close();
    expect(fs.readdirSync(path.dirname(at))).toEqual(['a.understory']);
  });
});
