import { readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { beforeAll, describe, expect, test } from 'vitest';
import { emptyStudy, type Entry } from '../../../engine/study/index.ts';
import { openStudyFile } from '../../../main/project/index.ts';
import { trailHeadings, trailLines } from '../../../main/reports/trail.ts';
import { fittedStudy } from './fitted-study.ts';
import { run, said, table, temporaryFolder } from './run.ts';

const folder = temporaryFolder();
const study = 'trailed.understory';
let head = '';

beforeAll(async () => {
  await fittedStudy(folder, study, 4);
  writeFileSync(
    join(folder, 'more.json'),
    JSON.stringify({ themes: [{ name: 'Bees | wasps', seed: ['bees'] }, { name: 'Buses' }] }),
  );
  const refitted = await run(folder, [
    ...['refit', study, '--plan', 'more.json', '--out', 'out refit'],
  ]);
  if (refitted.code !== 0) throw new Error(refitted.err);
  const opened = await openStudyFile(join(folder, study), { readOnly: true });
  if (!opened.ok) throw new Error(opened.code);
  ({ head } = opened.value);
  opened.value.close();
});

describe('trail', () => {
  test('prints who, when, what and on what, in order, and the head of the chain', async () => {
    const { code, out } = await run(folder, ['trail', study]);
    const lines = out.trimEnd().split('\n');
    expect(code).toBe(0);
    expect(lines[0]).toMatch(/^1 {2}2026-02-03T04:05:06\.000Z {2}command line {2}start of /u);
    expect(out).toMatch(/adding of P01 · P01/u);
    expect(out).toMatch(/seed “bees” in Bees \| wasps · Bees \| wasps\n/u);
    expect(lines.at(-1)).toBe(`Head: ${head}`);
    const numbers = lines.slice(0, -1).map((line) => Number(line.split(' ')[0]));
    expect(numbers).toEqual([...numbers].sort((a, b) => a - b));
  });

  test('is narrowed by reader, kind, day and theme', async () => {
    const count = async (...words: string[]): Promise<number> => {
      const { code, out } = await run(folder, ['trail', study, ...words]);
      expect(code).toBe(0);
      return out.trimEnd().split('\n').length - 1;
    };
    const all = await count();
    expect(await count('--by', 'command line')).toBe(all);
    expect(await count('--by', 'Ada')).toBe(0);
    expect(await count('--kind', 'modelFitted')).toBe(2);
    expect(await count('--since', '2026-02-03')).toBe(all);
    expect(await count('--since', '2026-02-04')).toBe(0);
    // Its adding, its seed, the re-fit that took it in.
    expect(await count('--theme', 'Bees | wasps')).toBe(3);
  });

  test('is written as a table, with the head in every row', async () => {
    const { code, err } = await run(folder, ['trail', study, '--out', 'trail.csv']);
    const rows = table(join(folder, 'trail.csv'));
    expect([code, err]).toEqual([0, `${rows.length} decisions written to trail.csv\n`]);
    expect(rows[0]).toMatchObject({ record: '1', kind: 'studyStarted', heading: 'intentions' });
    expect(new Set(rows.map((row) => row['study_head']))).toEqual(new Set([head]));
  });

  test('is written under the six headings of an audit trail', async () => {
    await run(folder, ['trail', study, '--out', 'trail.md']);
    const text = readFileSync(join(folder, 'trail.md'), 'utf8');
    expect(text.match(/^## .*$/gmu)?.map((line) => line.slice(3).toLowerCase())).toEqual([
      ...trailHeadings,
    ]);
    expect(text).toContain(head);
    // A name cannot break the table that it stands in.
    expect(text).toContain('| new theme Bees \\| wasps | Bees \\| wasps |');
  });

  test('says what it did not understand', async () => {
    for (const words of [
      [],
      ['--out', 'trail.pdf'],
      ['--kind', 'nothing'],
      ['--since', 'Tuesday'],
      ['--theme', 'Trains'],
    ]) {
      const ended = await run(folder, words.length === 0 ? ['trail'] : ['trail', study, ...words]);
      expect(ended.code, words.join(' ')).toBe(2);
      expect(said(ended)).toHaveLength(1);
    }
  });
});

describe('what was taken back', () => {
  const names = { theme: (id: string) => id, transcript: () => '', participant: () => '' };
  const entry = (sequence: number, undoes?: number): Entry => ({
    sequence,
    at: '2031-04-05T06:07:08.000Z',
    by: 'reader-ada',
    ...(undoes === undefined ? {} : { undoes }),
    edit: { kind: 'studyRenamed', from: 'a', to: 'b' },
  });

  test('is marked, and what was done again is not', () => {
    const entries = [entry(1), entry(2), entry(3, 2), entry(4, 3), entry(5, 4)];
    const lines = trailLines({ study: emptyStudy, entries }, names);
    expect(lines.filter((line) => line.takenBack).map(({ record }) => record)).toEqual([2, 4]);
    const again = trailLines({ study: emptyStudy, entries: entries.slice(0, 4) }, names);
    expect(again.filter((line) => line.takenBack).map(({ record }) => record)).toEqual([3]);
  });
});
