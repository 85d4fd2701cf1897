import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { strToU8 } from 'fflate';
import { describe, expect, test } from 'vitest';
import { readSource, type ReadTable } from '../../../main/formats/index.ts';

async function table(bytes: Uint8Array | string, name: string): Promise<ReadTable> {
  const result = await readSource(typeof bytes === 'string' ? strToU8(bytes) : bytes, name);
  if (!result.ok) throw new Error(result.code);
  if (result.kind !== 'table') throw new Error(`a ${result.value.format}`);
  return result.value;
}

const rows = async (text: string): Promise<readonly (readonly string[])[]> =>
  (await table(text, 'a.csv')).sheets[0]!.rows;

describe('a table of answers', () => {
  test('is the same from .csv and from the workbook that an office suite made of it', async () => {
    const file = (name: string): Uint8Array =>
      new Uint8Array(readFileSync(join(import.meta.dirname, 'files', name)));
    const [csv, xlsx] = await Promise.all([
      table(file('answers.csv'), 'answers.csv'),
      table(file('answers.xlsx'), 'answers.xlsx'),
    ]);
    expect(xlsx.sheets[0]!.rows).toEqual(csv.sheets[0]!.rows);
    expect(csv.sheets[0]!.rows).toHaveLength(4);
    expect(csv.sheets[0]!.rows[2]![2]).toContain('week.\nI did not');
  });

  test.each([
    ['semicolons', 'who;said\nA;yes, but\nB;no'],
    ['tabs', 'who\tsaid\nA\tyes, but\nB\tno'],
    ['bars', 'who|said\nA|yes, but\nB|no'],
  ])('may be divided by %s', async (_, text) => {
    expect(await rows(text)).toEqual([
      ['who', 'said'],
      ['A', 'yes, but'],
      ['B', 'no'],
    ]);
  });

  test('with ragged rows loses no cell', async () => {
    expect(await rows('who,said\nA\nB,no,more\nC,so')).toEqual([
      ['who', 'said', 'Column 3'],
      ['A', '', ''],
      ['B', 'no', 'more'],
      ['C', 'so', ''],
    ]);
  });

  test('has a heading of its own for every column', async () => {
    expect((await rows('a,a,\n1,2,3'))[0]).toEqual(['a', 'a (2)', 'Column 3']);
  });

  test('may hold quotes inside cells, and a cell of ten megabytes', async () => {
    expect((await rows('who,said\nA,the "old" pier'))[1]).toEqual(['A', 'the "old" pier']);
    const long = 'word '.repeat(2_000_000);
    expect((await rows(`who,said\nA,"${long}"`))[1]![1]).toHaveLength(10_000_000);
  });

  test('is a transcript after all where nothing divides its lines', async () => {
    const result = await readSource(strToU8('INT: How?\nP07: Well.'), 'talk.csv');
    expect(result.ok && result.kind).toBe('transcript');
  });
});

describe('refused is', () => {
  test('a table whose quotes never close, with the place', async () => {
    expect(await readSource(strToU8('who,said\nA,"yes\nB,no\n'), 'a.csv')).toMatchObject({
      code: 'broken file',
      format: 'csv',
      where: expect.stringContaining('quotes') as string,
    });
  });

  test('a table with NUL among its letters', async () => {
    expect(await readSource(strToU8('who,said\nA,y\0s\n'), 'a.csv')).toEqual({
      ok: false,
      code: 'not text',
    });
  });
});
