import * as fs from 'node:fs';
import { describe, expect, it } from 'vitest';
import { openStudyFile, type Erasing, type StudyFile } from '../../../main/project/index.ts';
import { faultyStorage } from './faulty-storage.ts';
import { appendSamples, create, look, newPath, reopen, valueOf } from './study-folder.ts';

const secret = 'Ragnhild of Skarvoy';

function erasing(gone: readonly number[], instead: [number, unknown][] = []): Erasing {
  const at = '2031-04-05T06:07:08.000Z';
  return { because: 'withdrawal', at, by: 'reader-ada', gone, instead: new Map(instead) };
}

/** Records 1 to 4: an edit with the secret, a blob with it, its edit, another edit. */
async function planted(path = newPath()): Promise<StudyFile> {
  const file = await create(path);
  valueOf(file.append([], () => ({ name: secret })));
  valueOf(file.append([Buffer.from(`She said: ${secret}`)], () => ({ type: 'gathered' })));
  valueOf(file.append([], () => ({ type: 'kept' })));
  return file;
}

describe('erasing', () => {
  it('takes content out of the file for good, and leaves numbers and chain as they were', async () => {
    const file = await planted();
    const before = [...file.chain()];
    const edits = valueOf(
      await file.erase(
        [{ edit: () => ({ type: 'withdrawn' }) }],
        erasing([1, 2], [[1, { name: 'nobody' }]]),
      ),
    );
    expect(edits).toEqual([5]);
    expect(fs.readFileSync(file.path).includes('Ragnhild')).toBe(false);
    expect([...file.chain()].slice(0, 4)).toEqual(before);
    expect(await file.check()).toBeNull();

    for (const one of [file, await reopen(file.path, { readOnly: true })]) {
      expect(one.records.map(({ kind, removed }) => (removed ? '-' : kind))).toEqual([
        ...['-', '-', 'edit', 'edit', 'edit', 'seal'],
      ]);
      expect([...one.edits()]).toEqual([
        { sequence: 1, json: { name: 'nobody' } },
        { sequence: 3, json: { type: 'gathered' } },
        { sequence: 4, json: { type: 'kept' } },
        { sequence: 5, json: { type: 'withdrawn' } },
      ]);
      expect(one.erased).toMatchObject([{ sequence: 6, because: 'withdrawal', removed: [1, 2] }]);
      expect(one.head).toBe(file.head);
    }
    appendSamples(file, 2);
    expect((await look(file.path)).length).toBe(file.records.length);
  });

  it('leaves out an edit that nothing stands for', async () => {
    const file = await planted();
    valueOf(await file.erase([], erasing([1, 2])));
    expect([...file.edits()].map(({ sequence }) => sequence)).toEqual([3, 4]);
  });

  it('can erase what an earlier act had put in the place of an edit', async () => {
    const file = await planted();
    valueOf(await file.erase([], erasing([1], [[1, { name: 'Ragnhild' }]])));
    expect(fs.readFileSync(file.path).includes('Ragnhild')).toBe(true);
    valueOf(await file.erase([], erasing([1, 2], [[1, { name: 'R' }]])));
    expect(fs.readFileSync(file.path).includes('Ragnhild')).toBe(false);
    expect([...file.edits()][0]).toEqual({ sequence: 1, json: { name: 'R' } });
    expect(file.erased.map(({ removed }) => removed)).toEqual([[1], [1, 2]]);
    const again = await reopen(file.path, { readOnly: true });
    expect([...again.edits()]).toEqual([...file.edits()]);
  });

  it('keeps what earlier acts put in the place of other edits', async () => {
    const file = await planted();
    valueOf(await file.erase([], erasing([1], [[1, { name: 'first' }]])));
    valueOf(await file.erase([], erasing([2, 4], [[4, { type: 'second' }]])));
    expect([...file.edits()].map(({ json }) => json)).toEqual([
      { name: 'first' },
      { type: 'gathered' },
      { type: 'second' },
    ]);
  });

  it('works in a study with a password, without giving the key up', async () => {
    const path = newPath();
    const password = 'a long one for tests';
    const work = { n: 16, r: 8, p: 1 };
    const file = await create(path, { password, work });
    valueOf(file.append([], () => ({ name: secret })));
    valueOf(await file.erase([], erasing([1], [[1, { name: 'nobody' }]])));
    const again = await reopen(path, { readOnly: true, password });
    expect([...again.edits()].map(({ json }) => json)).toEqual([{ name: 'nobody' }]);
  });

  it('leaves the study as it was, and open, where the new file cannot be put in place', async () => {
    const path = newPath();
    (await planted(path)).close();
    const storage = faultyStorage();
    const file = await reopen(path, { storage });
    const before = fs.readFileSync(path);
    storage.plan = { at: 1, fault: 'fails', counted: ['rename'] };
    expect(await file.erase([], erasing([1, 2]))).toMatchObject({ ok: false });
    expect(fs.readFileSync(path).equals(before)).toBe(true);
    expect([...file.edits()]).toHaveLength(3);
    valueOf(file.append([], () => ({ type: 'goes on' })));
    expect(await file.check()).toBeNull();
  });

  it('is refused in a study that is open for reading', async () => {
    const file = await planted();
    file.close();
    const reader = await reopen(file.path, { readOnly: true });
    expect(await reader.erase([], erasing([1]))).toMatchObject({ code: 'read only' });
  });

  it('of a record that is not there is a mistake of ours', async () => {
    const file = await planted();
    await expect(file.erase([], erasing([9]))).rejects.toThrow(/gone holds 9/);
  });
});

describe('checking an open study', () => {
  it('finds a byte that changed under it, and names the record', async () => {
    const file = await planted();
    const bytes = fs.readFileSync(file.path);
    const record = file.records[1]!;
    bytes[record.offset + 112 + 3] ^= 1;
    fs.writeFileSync(file.path, bytes);
    expect(await file.check()).toMatchObject({ sequence: 2, reason: 'content' });
  });

  it('finds records cut off the end', async () => {
    const file = await planted();
    fs.truncateSync(file.path, file.records[3]!.offset);
    expect(await file.check()).toMatchObject({ sequence: 3, reason: 'chain' });
    expect((await openStudyFile(file.path, { readOnly: true })).ok).toBe(true);
  });
});
