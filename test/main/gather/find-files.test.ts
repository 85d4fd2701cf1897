import { mkdirSync, symlinkSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { beforeAll, describe, expect, test } from 'vitest';
import { findFiles } from '../../../main/gather/find-files.ts';
import { write } from '../commands/material.ts';
import { temporaryFolder } from '../commands/run.ts';

const folder = temporaryFolder();

beforeAll(() => {
  write(folder, {
    'a/two.txt': '',
    'a/one.txt': '',
    'a/deep/er/three 🌳.txt': '',
    'a/.hidden': '',
    'a/.hidden folder/x.txt': '',
    'a/~$two.docx': '',
    'a/caf\u0065\u0301.txt': '',
    'a/out/transcripts/one.txt': '',
    'b/one.txt': '',
  });
  symlinkSync(join(folder, 'b/one.txt'), join(folder, 'a/link.txt'));
});

const names = async (paths: string[], except: string[] = []): Promise<string[]> =>
  (await findFiles(paths, folder, except)).found.map(({ name }) => name);

const all = ['café.txt', 'deep/er/three 🌳.txt', 'one.txt', 'out/transcripts/one.txt', 'two.txt'];

describe('the files behind the paths that were given', () => {
  test('a folder stands for all in and below it, in code-unit order, composed, without hidden ones', async () => {
    expect(await names(['a'])).toEqual(all);
  });

  test('the order of the paths changes nothing, nor does giving one twice', async () => {
    const one = await findFiles(['a', 'b', 'a/deep', 'a/one.txt'], folder);
    const other = await findFiles(['a/one.txt', 'a/deep', 'b', 'b', 'a'], folder);
    expect(other).toEqual(one);
    expect(one.found.filter(({ name }) => name === 'one.txt')).toHaveLength(2);
  });

  test('a file given by itself and by its folder has the shorter name', async () => {
    expect(await names(['a', 'a/deep/er'])).toContain('three 🌳.txt');
    expect(await names(['a/deep/er', 'a'])).not.toContain('deep/er/three 🌳.txt');
  });

  test('what is excepted is passed over in a folder', async () => {
    expect(await names(['a'], [join(folder, 'a/out'), join(folder, 'a/two.txt')])).toEqual(
      all.slice(0, 3),
    );
  });

  test('and read where it is what was asked for', async () => {
    expect(await names(['a/out'], [join(folder, 'a/out')])).toEqual(['transcripts/one.txt']);
    expect(await names(['a/two.txt'], [join(folder, 'a/two.txt')])).toEqual(['two.txt']);
  });

  test('a folder whose name only begins the same is another one', async () => {
    writeFileSync(join(folder, 'a/outer.txt'), '');
    expect(await names(['a'], [join(folder, 'a/out')])).toContain('outer.txt');
  });

  test('paths that are not there are named', async () => {
    const { found, missed } = await findFiles(['no', 'a/one.txt', 'a/one.txt/x'], folder);
    expect(found.map(({ name }) => name)).toEqual(['one.txt']);
    expect(missed).toEqual([
      { name: 'a/one.txt/x', code: 'not found' },
      { name: 'no', code: 'not found' },
    ]);
  });

  test('an empty folder has none', async () => {
    mkdirSync(join(folder, 'empty'));
    expect(await findFiles(['empty'], folder)).toEqual({ found: [], missed: [] });
  });
});
