import * as fs from 'node:fs';
import * as path from 'node:path';
import { describe, expect, it } from 'vitest';
import {
  nodeStorage,
  openStudyFile,
  type Storage,
  type StudyFile,
} from '../../../main/project/index.ts';
import {
  appendSamples,
  contents,
  create,
  look,
  newFolder,
  newPath,
  reopen,
  sha256Of,
} from './study-folder.ts';

const changes: [string, 'missing' | 'replaced' | 'size' | 'content', (file: StudyFile) => void][] =
  [
    ['removed', 'missing', (file) => fs.unlinkSync(file.path)],
    ['renamed', 'missing', (file) => fs.renameSync(file.path, `${file.path}.away`)],
    [
      'replaced by a copy of itself',
      'replaced',
      (file) => {
        fs.copyFileSync(file.path, `${file.path}.new`);
        fs.renameSync(`${file.path}.new`, file.path);
      },
    ],
    ['made longer', 'size', (file) => fs.appendFileSync(file.path, 'x')],
    ['made shorter', 'size', (file) => fs.truncateSync(file.path, file.size - 1)],
    [
      'given another last edit of the same length',
      'content',
      (file) => {
        const handle = fs.openSync(file.path, 'r+');
        fs.writeSync(handle, 'x', file.size - 3);
        fs.closeSync(handle);
      },
    ],
  ];

describe('a study file changed by something else', () => {
  it.each(changes)('(%s) is written to no more', async (_, how, change) => {
    const at = newPath();
    const file = await create(at, { owner: null });
    appendSamples(file, 4);
    const records = file.records.length;
    change(file);
    const before = fs
      .readdirSync(path.dirname(at))
      .map((name) => [name, sha256Of(path.join(path.dirname(at), name))]);
    const result = file.append([Buffer.from('x')], () => ({ type: 'more' }));
    expect(result).toMatchObject({ ok: false, code: 'changed underneath', how });
    expect(await file.compact([])).toMatchObject({ code: 'changed underneath', how });
    const after = fs
      .readdirSync(path.dirname(at))
      .map((name) => [name, sha256Of(path.join(path.dirname(at), name))]);
    expect(after).toEqual(before);
    expect(file.records).toHaveLength(records);
  });

  it('while it is being opened is not opened for writing', async () => {
    const at = newPath();
    const made = await create(at);
    appendSamples(made, 2);
    made.close();
    const storage: Storage = {
      ...nodeStorage,
      open(filePath, how, mode) {
        const handle = nodeStorage.open(filePath, how, mode);
        if (how === 'write') {
          fs.copyFileSync(at, `${at}.new`);
          fs.renameSync(`${at}.new`, at);
        }
        return handle;
      },
    };
    expect(await openStudyFile(at, { storage })).toMatchObject({
      code: 'changed underneath',
      how: 'replaced',
    });
    appendSamples(await reopen(at), 1);
  });

  it('before the first edit is noticed as well', async () => {
    const file = await create(newPath());
    fs.appendFileSync(file.path, 'x');
    expect(file.append([], () => 1)).toMatchObject({ code: 'changed underneath', how: 'size' });
  });

  it('and put back is written to again', async () => {
    const file = await create(newPath());
    appendSamples(file, 2);
    fs.renameSync(file.path, `${file.path}.away`);
    expect(file.append([], () => 1)).toMatchObject({ code: 'changed underneath', how: 'missing' });
    fs.renameSync(`${file.path}.away`, file.path);
    appendSamples(file, 1);
  });

  it('can still be saved as a copy from what we hold open', async () => {
    const file = await create(newPath());
    appendSamples(file, 3);
    const seen = contents(file);
    fs.writeFileSync(`${file.path}.new`, 'something else');
    fs.renameSync(`${file.path}.new`, file.path);
    const copy = path.join(newFolder(), 'copy.understory');
    expect(await file.saveCopy(copy)).toMatchObject({ ok: true });
    expect(await look(copy)).toEqual(seen);
  });
});

describe('a study opened read-only', () => {
  it('never changes a byte, nor its folder, also with a torn end', async () => {
    const at = newPath();
    const made = await create(at);
    appendSamples(made, 6);
    const { size } = made;
    made.close();
    for (const cut of [0, 1, 60, 200]) {
      fs.truncateSync(at, size - cut);
      const before = [sha256Of(at), fs.statSync(at).mtimeMs, fs.readdirSync(path.dirname(at))];
      const file = await reopen(at, { readOnly: true });
      expect(file.leftOver > 0).toBe(cut > 0);
      contents(file);
      expect(file).toMatchObject({ readOnly: true, readOnlyBecause: 'asked' });
      expect(file.append([], () => 1)).toMatchObject({ code: 'read only' });
      expect(await file.compact([])).toMatchObject({ code: 'read only' });
      await file.saveCopy(path.join(newFolder(), 'copy'));
      file.close();
      expect([sha256Of(at), fs.statSync(at).mtimeMs, fs.readdirSync(path.dirname(at))]).toEqual(
        before,
      );
    }
  });

  it('while somebody writes sees the study as it was on opening', async () => {
    const at = newPath();
    const writer = await create(at);
    appendSamples(writer, 3);
    const reader = await reopen(at, { readOnly: true });
    const seen = contents(reader);
    appendSamples(writer, 3);
    await writer.compact([3]);
    expect(contents(reader)).toEqual(seen);
  });
});
