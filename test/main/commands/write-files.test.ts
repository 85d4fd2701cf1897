import { mkdirSync, readFileSync, readdirSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { beforeEach, describe, expect, test } from 'vitest';
import { checkFolder, stageFiles, writeOneFile } from '../../../main/commands/write-files.ts';
import { contents, temporaryFolder } from './run.ts';

const top = temporaryFolder();
let folder: string;
let count = 0;

beforeEach(() => {
  folder = join(top, String(count++));
  mkdirSync(folder);
});

const files = new Map<string, string | Uint8Array>([
  ['a.csv', 'a'],
  ['deep/er/b.txt', Uint8Array.of(98)],
]);
const hex = { 'a.csv': '61', 'deep/er/b.txt': '62' };

describe('files of one command', () => {
  test('come to their places together', async () => {
    const out = join(folder, 'made/for/it');
    const staged = await stageFiles(out, files, []);
    expect(readdirSync(out).filter((name) => !name.startsWith('.writing-'))).toEqual([]);
    await staged.commit();
    await staged.discard();
    expect(contents(folder)).toEqual({
      'made/for/it/a.csv': hex['a.csv'],
      'made/for/it/deep/er/b.txt': hex['deep/er/b.txt'],
    });
    expect(readdirSync(out).sort()).toEqual(['a.csv', 'deep']);
  });

  test('replace those of an earlier run and leave others alone', async () => {
    writeFileSync(join(folder, 'a.csv'), 'old');
    writeFileSync(join(folder, 'mine.txt'), 'm');
    await (await stageFiles(folder, files, [])).commit();
    expect(contents(folder)).toEqual({ ...hex, 'mine.txt': '6d' });
  });

  test('leave nothing where they are given up, not even the folders made for them', async () => {
    await (await stageFiles(join(folder, 'made/for/it'), files, [])).discard();
    expect(readdirSync(folder)).toEqual([]);
  });

  test('leave a folder that was there', async () => {
    mkdirSync(join(folder, 'there'));
    await (await stageFiles(join(folder, 'there'), files, [])).discard();
    expect(readdirSync(folder)).toEqual(['there']);
  });

  test('are refused where one would replace what was given to be read', async () => {
    writeFileSync(join(folder, 'a.csv'), 'input');
    await expect(stageFiles(folder, files, [join(folder, 'a.csv')])).rejects.toThrow(
      /was given to be read and would be written over/u,
    );
    expect(readFileSync(join(folder, 'a.csv'), 'utf8')).toBe('input');
  });

  test('are refused where a folder or a file stands in their way', async () => {
    mkdirSync(join(folder, 'one/a.csv'), { recursive: true });
    await expect(stageFiles(join(folder, 'one'), files, [])).rejects.toThrow(/a folder stands/u);
    mkdirSync(join(folder, 'two'));
    writeFileSync(join(folder, 'two/deep'), '');
    await expect(stageFiles(join(folder, 'two'), files, [])).rejects.toThrow(/a file stands/u);
    expect(readdirSync(join(folder, 'two'))).toEqual(['deep']);
  });

  test('may not leave their folder', async () => {
    await expect(stageFiles(folder, new Map([['../x', '']]), [])).rejects.toThrow(
      'must stay inside its folder',
    );
    expect(readdirSync(folder)).toEqual([]);
  });
});

describe('a place to write to', () => {
  test('may be a folder, or none yet', async () => {
    await checkFolder(folder);
    await checkFolder(join(folder, 'not/yet'));
    expect(readdirSync(folder)).toEqual([]);
  });

  test('may not be a file, nor lie below one', async () => {
    writeFileSync(join(folder, 'file'), '');
    for (const place of ['file', 'file/below', 'file/far/below']) {
      await expect(checkFolder(join(folder, place))).rejects.toThrow(/a file stands/u);
    }
  });
});

describe('one file', () => {
  test('is written whole, or what was there stays', async () => {
    const path = join(folder, 'one.csv');
    await writeOneFile(path, 'new', []);
    expect(contents(folder)).toEqual({ 'one.csv': '6e6577' });
    await expect(writeOneFile(path, 'x', [path])).rejects.toThrow(/would be written over/u);
    await expect(writeOneFile(join(folder, 'no/one.csv'), 'x', [])).rejects.toThrow(
      /its folder does not exist/u,
    );
    expect(contents(folder)).toEqual({ 'one.csv': '6e6577' });
  });
});
