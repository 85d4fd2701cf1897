import * as fs from 'node:fs';
import { describe, expect, it } from 'vitest';
import {
  appendSamples,
  contents,
  countedSalts,
  create,
  newPath,
  reopen,
  valueOf,
} from './study-folder.ts';

describe('a study file', () => {
  it('gives back its edits and blobs after closing and opening', async () => {
    const at = newPath();
    const file = await create(at);
    const text = 'Anna: "I – said 🦊".\nB: no.';
    const sequence = valueOf(
      file.append([Buffer.from(text), new Uint8Array(0)], (blobs) => ({ type: 'gathered', blobs })),
    );
    expect(sequence).toBe(3);
    expect(valueOf(file.append([], (_, own) => ({ type: 'renamed', own })))).toBe(4);
    const { head, size } = file;
    file.close();

    const again = await reopen(at);
    expect(again.studyId).toBe('a study of ours');
    expect([...again.edits()]).toEqual([
      { sequence: 3, json: { type: 'gathered', blobs: [1, 2] } },
      { sequence: 4, json: { type: 'renamed', own: 4 } },
    ]);
    expect(Buffer.from(again.readBlob(1)).toString()).toBe(text);
    expect(again.readBlob(2).length).toBe(0);
    expect(again.readEdit(4)).toEqual({ type: 'renamed', own: 4 });
    expect(again.records.map(({ kind }) => kind)).toEqual(['blob', 'blob', 'edit', 'edit']);
    expect(again.nextSequence).toBe(5);
    expect(again.head).toBe(head);
    expect(again.size).toBe(size);
    expect(fs.statSync(at).size).toBe(size);
  });

  it('goes on where it was after each opening', async () => {
    const at = newPath();
    (await create(at)).close();
    for (let round = 0; round < 4; round++) {
      const file = await reopen(at);
      appendSamples(file, 2);
      file.close();
    }
    const file = await reopen(at);
    expect(file.records.filter(({ kind }) => kind === 'edit')).toHaveLength(8);
    expect(file.records.map(({ sequence }) => sequence)).toEqual(
      [...Array(16).keys()].map((n) => n + 1),
    );
  });

  it('keeps readable text readable in the file', async () => {
    const at = newPath();
    const file = await create(at);
    valueOf(file.append([Buffer.from('what Ruth said')], () => ({ type: 'themeRenamed' })));
    const bytes = fs.readFileSync(at);
    expect(bytes.includes('what Ruth said')).toBe(true);
    expect(bytes.includes('{"type":"themeRenamed"}')).toBe(true);
  });

  it('writes several edits with their blobs in one act and one fsync', async () => {
    const file = await create(newPath());
    const sequences = valueOf(
      file.appendAll([
        { blobs: [Buffer.from('one')], edit: (blobs) => ({ blobs }) },
        { edit: (blobs, own) => ({ blobs, own }) },
        { blobs: [Buffer.from('two'), Buffer.from('three')], edit: (blobs) => ({ blobs }) },
      ]),
    );
    expect(sequences).toEqual([2, 3, 6]);
    expect(contents(file)).toEqual([
      '1 blob 6f6e65',
      '2 edit {"blobs":[1]}',
      '3 edit {"blobs":[],"own":3}',
      '4 blob 74776f',
      '5 blob 7468726565',
      '6 edit {"blobs":[4,5]}',
    ]);
    expect(valueOf(file.appendAll([]))).toEqual([]);
  });

  it('holds blobs longer than any buffer of ours', async () => {
    const at = newPath();
    const file = await create(at);
    const blob = new Uint8Array(3_500_000).map((_, index) => (index * 2654435761) >>> 24);
    valueOf(file.append([blob, blob.subarray(7)], (blobs) => ({ blobs })));
    file.close();
    const again = await reopen(at);
    expect(Buffer.compare(again.readBlob(1), blob)).toBe(0);
    expect(Buffer.compare(again.readBlob(2), blob.subarray(7))).toBe(0);
  });

  it('is the same file, byte for byte, from the same edits and the same salts', async () => {
    const [one, two] = [newPath(), newPath('b.understory')];
    for (const at of [one, two]) {
      const file = await create(at, { randomBytes: countedSalts() });
      appendSamples(file, 5);
      file.close();
    }
    expect(fs.readFileSync(one).equals(fs.readFileSync(two))).toBe(true);
  });

  it('salts equal content differently unless told otherwise', async () => {
    const heads = [];
    for (let round = 0; round < 2; round++) {
      const at = newPath();
      (await create(at)).close();
      const file = await reopen(at);
      valueOf(file.append([], () => ({ type: 'same' })));
      heads.push(file.head);
    }
    expect(heads[0]).not.toBe(heads[1]);
  });

  it('writes nothing when an edit cannot be made or is no JSON', async () => {
    const at = newPath();
    const file = await create(at);
    appendSamples(file, 2);
    const before = fs.readFileSync(at);
    expect(() =>
      file.append([Buffer.from('x')], () => {
        throw new Error('no such theme');
      }),
    ).toThrow('no such theme');
    expect(() => file.append([], () => undefined)).toThrow(/must give what JSON can say/);
    expect(fs.readFileSync(at).equals(before)).toBe(true);
    expect(file.nextSequence).toBe(5);
    appendSamples(file, 2);
  });

  it('refuses a blob larger than a study holds, and writes nothing', async () => {
    const at = newPath();
    const file = await create(at);
    const size = file.size;
    const result = file.append([new Uint8Array(2 ** 30 + 1)], () => ({ type: 'large' }));
    expect(result).toMatchObject({ ok: false, code: 'too large' });
    expect(fs.statSync(at).size).toBe(size);
  });

  it('says what misuse is', async () => {
    const file = await create(newPath());
    appendSamples(file, 2);
    expect(() => file.readBlob(1)).toThrow(/sequence is 1, must be of a kept blob/);
    expect(() => file.readBlob(99)).toThrow(/sequence is 99/);
    expect(() => file.readEdit(2)).toThrow(/must be of a kept edit/);
    file.close();
    file.close();
    expect(() => file.append([], () => 1)).toThrow(/closed/);
  });
});
