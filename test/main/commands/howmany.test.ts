import { existsSync } from 'node:fs';
import { join } from 'node:path';
import { beforeAll, describe, expect, test } from 'vitest';
import { openStudyFile } from '../../../main/project/index.ts';
import { createStudyFile } from '../../../main/project/index.ts';
import { recommendationSentence } from '../../../main/reports/how-many.ts';
import { fittedStudy, interrupted } from './fitted-study.ts';
import { contents, heading, oneSentence, run, table, temporaryFolder, type Ended } from './run.ts';

const folder = temporaryFolder();
const command = 'howmany study.understory --from 2 --to 8 --step 2'.split(' ');
let ended: Ended;

beforeAll(async () => {
  await fittedStudy(folder, 'study.understory');
  ended = await run(folder, command);
});

describe('howmany', () => {
  test('ends well, with a row for each number of themes beside the study', () => {
    expect(ended.code).toBe(0);
    const path = join(folder, 'study.howmany.csv');
    expect(heading(path)).toEqual(
      'themes perplexity perplexity_floor coherence coherence_error coherence_floor steadiness steadiness_error steadiness_floor'.split(
        ' ',
      ),
    );
    const rows = table(path);
    expect(rows.map((row) => row['themes'])).toEqual(['2', '4', '6', '8']);
    for (const row of rows) {
      expect(Number(row['perplexity'])).toBeLessThan(Number(row['perplexity_floor']));
      expect(Number(row['coherence'])).toBeGreaterThan(Number(row['coherence_floor']));
    }
  });

  test('prints three curves with their floors and a sentence that chooses nothing', () => {
    expect(ended.out).toMatch(
      /^themes {2}perplexity {2}\(floor\) {2}coherence {2}\(floor\) {2}steadiness {2}\(floor\)$/mu,
    );
    expect(ended.out.match(/^ +[2468] +\d+\.\d/gmu)).toHaveLength(4);
    expect(ended.out.trimEnd().split('\n').at(-1)).toMatch(
      /^(\d+ to \d+ cannot be told apart; read them|\d+ stands out; read it and the numbers beside it)\.$/u,
    );
    expect(ended.err).toMatch(/^Fitting: \d+ %$/mu);
  });

  test('keeps the result with the fit beside what is there already', async () => {
    await run(folder, 'steady study.understory --resamples 2'.split(' '));
    await run(folder, 'howmany study.understory --from 3 --to 3 --seed 4'.split(' '));
    const opened = await openStudyFile(join(folder, 'study.understory'), { readOnly: true });
    if (!opened.ok) throw new Error(opened.code);
    const edits = [...opened.value.edits()].map(({ json }) => (json as { edit: object }).edit);
    opened.value.close();
    expect(edits.slice(-3)).toMatchObject([
      { what: 'how many', before: null, result: { points: [{}, {}, {}, {}] } },
      { what: 'steadiness', before: null },
      { what: 'how many', before: { what: 'how many' }, result: { points: [{}], seed: 4 } },
    ]);
  });

  test('stopped, leaves everything as it was', async () => {
    const before = contents(folder);
    const stopped = await interrupted(folder, command);
    expect(stopped.code).toBe(1);
    expect(stopped.err).toMatch(/^Stopped: nothing was written\.$/mu);
    expect(contents(folder)).toEqual(before);
  });
});

describe('howmany refuses, in one sentence and without a trace', () => {
  const on = ['howmany', 'study.understory'];
  const refusals: [string, string[], number, RegExp][] = [
    ['more than one study', [...on, 'other.understory'], 2, /^Name one study\./u],
    ['from above to', [...on, '--from', '9', '--to', '8'], 2, /^--from must not be above --to\./u],
    ['one theme', [...on, '--from', '1'], 2, /^--from must be a whole number from 2 to 200\./u],
    ['no step', [...on, '--step', '0'], 2, /^--step must be/u],
    ['more themes than passages', [...on, '--to', '150'], 1, /^150 themes are too many: /u],
  ];
  test.each(refusals)('%s', async (_what, words, code, sentence) => {
    const before = contents(folder);
    const { code: found, err, out } = await run(folder, words);
    const lines = err.split('\n').filter((line) => !/^(Fitting|Usage):? /u.test(line));
    expect(lines[0]).toMatch(sentence);
    expect(lines[0]).toMatch(oneSentence);
    expect([found, out]).toEqual([code, '']);
    expect(contents(folder)).toEqual(before);
  });

  test('a study without a fit', async () => {
    const created = await createStudyFile(join(folder, 'bare.understory'), { studyId: 'bare' });
    if (!created.ok) throw new Error(created.code);
    created.value.close();
    for (const name of ['howmany', 'steady']) {
      const { code, err } = await run(folder, [name, 'bare.understory']);
      expect([code, err.trim()]).toEqual([
        1,
        'There is no fit to measure yet; fit the study from scratch first.',
      ]);
    }
    expect(existsSync(join(folder, 'bare.howmany.csv'))).toBe(false);
  });
});

describe('the sentence of recommendation', () => {
  test('names a range, one number or none', () => {
    expect(recommendationSentence({ kind: 'range', from: 8, to: 13 })).toBe(
      '8 to 13 cannot be told apart; read them.',
    );
    expect(recommendationSentence({ kind: 'one', themes: 9 })).toBe(
      '9 stands out; read it and the numbers beside it.',
    );
    expect(recommendationSentence({ kind: 'none' })).toMatch(oneSentence);
  });
});
