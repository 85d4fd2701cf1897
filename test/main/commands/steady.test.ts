import { existsSync, readFileSync, readdirSync } from 'node:fs';
import { join } from 'node:path';
import { beforeAll, describe, expect, test } from 'vitest';
import { Desk } from '../../../main/desk.ts';
import { materialFor } from '../../../main/evidence.ts';
import { randomIds } from '../../../main/ids.ts';
import { openStudyFile } from '../../../main/project/index.ts';
import { runEvidence } from '../../../main/work/run-evidence.ts';
import { fitAnew, planSteadiness } from '../../../engine/evidence/index.ts';
import { planted, told } from '../../engine/evidence/spoken.ts';
import { copyOf, fittedStudy, interrupted } from './fitted-study.ts';
import { contents, heading, oneSentence, run, table, temporaryFolder, type Ended } from './run.ts';

const folder = temporaryFolder();
const columns =
  'theme_id, theme, steadiness, steadiness_floor, cosine, cosine_floor, passages, stayed, stayed_share_floor, refits, refits_at_least, coherence, coherence_floor, strength_floor, people, most_from_person, person_share, most_after_question, question_share, perplexity, perplexity_floor';
const command = 'steady study.understory --resamples 5'.split(' ');

let ended: Ended;

beforeAll(async () => {
  await fittedStudy(folder, 'study.understory');
  copyOf(folder, 'study.understory', 'twin.understory');
  ended = await run(folder, command);
});

async function editsOf(name: string): Promise<{ kind: string; result?: unknown }[]> {
  const opened = await openStudyFile(join(folder, name), { readOnly: true });
  if (!opened.ok) throw new Error(opened.code);
  const edits = [...opened.value.edits()].map(
    ({ json }) => (json as { edit: { kind: string } }).edit,
  );
  opened.value.close();
  return edits;
}

describe('steady', () => {
  test('ends well, with a row for each theme beside the study', () => {
    expect(ended.code).toBe(0);
    const rows = table(join(folder, 'study.steady.csv'));
    expect(heading(join(folder, 'study.steady.csv'))).toEqual(columns.split(', '));
    expect(rows).toHaveLength(4);
    for (const row of rows) {
      expect(Number(row['steadiness'])).toBeGreaterThan(0);
      expect(Number(row['steadiness'])).toBeLessThanOrEqual(1);
      expect(Number(row['stayed'])).toBeLessThanOrEqual(Number(row['passages']));
      expect([row['refits'], row['refits_at_least']]).toEqual(['5', '4']);
      expect(row['most_from_person']).toMatch(/^P0[1-6]$/u);
      expect(row['most_after_question']).toMatch(/^Could you tell me about the \w+\?$/u);
      expect(Number(row['perplexity'])).toBeLessThan(Number(row['perplexity_floor']));
    }
  });

  test('finds four things that people talk about steadier than shuffled words', () => {
    for (const row of table(join(folder, 'study.steady.csv'))) {
      expect(Number(row['steadiness'])).toBeGreaterThan(Number(row['steadiness_floor']));
    }
    expect(ended.out).toContain('4 of 4 themes are steadier than the floor.');
  });

  test('prints a table and says how it was measured', () => {
    expect(ended.out).toMatch(/^Each of 5 re-fits leaves out 1 of 6 participants\./u);
    expect(ended.out).toMatch(/at least 4 of 5\.$/mu);
    expect(ended.out).toMatch(
      / +\d\.\d\d +-?\d\.\d\d +\d+ of \d+ +\d +\d+ % +\d+ % {2}candidate: /u,
    );
    expect(ended.out).toContain('(floor)');
    expect(ended.err).toMatch(/^Re-fitting: \d+ %$/mu);
  });

  test('keeps the result with the fit, as one decision that can be taken back', async () => {
    const last = (await editsOf('study.understory')).at(-1);
    expect(last).toMatchObject({ kind: 'evidenceGathered', what: 'steadiness', before: null });
    expect(JSON.stringify(last?.result).length).toBeLessThan(4000);
  });

  test('gives the same table and the same trail on a copy of the study', async () => {
    const again = await run(folder, ['steady', 'twin.understory', '--resamples', '5']);
    expect(again.out).toBe(ended.out);
    expect(readFileSync(join(folder, 'twin.steady.csv'), 'utf8')).toBe(
      readFileSync(join(folder, 'study.steady.csv'), 'utf8'),
    );
    expect((await editsOf('twin.understory')).at(-1)).toEqual(
      (await editsOf('study.understory')).at(-1),
    );
  });

  test('measures otherwise under another seed, into the file that was asked for', async () => {
    const words = [
      'steady',
      'twin.understory',
      '--resamples',
      '4',
      '--seed',
      '9',
      '--out',
      'x.csv',
    ];
    expect((await run(folder, words)).code).toBe(0);
    expect(table(join(folder, 'x.csv'))).not.toEqual(table(join(folder, 'twin.steady.csv')));
    expect((await editsOf('twin.understory')).at(-1)).toMatchObject({ result: { seed: 9 } });
  });

  test('stopped, leaves everything as it was', async () => {
    const before = contents(folder);
    const stopped = await interrupted(folder, command);
    expect(stopped.code).toBe(1);
    expect(stopped.err).toMatch(/^Stopped: nothing was written\.$/mu);
    expect(contents(folder)).toEqual(before);
    expect(readdirSync(folder).filter((name) => name.startsWith('.writing-'))).toEqual([]);
  });
});

describe('steady refuses, in one sentence and without a trace', () => {
  const refusals: [string, string[], number, RegExp][] = [
    ['no study', ['steady'], 2, /^Name one study\./u],
    ['a file that is not there', ['steady', 'gone.understory'], 1, /^There is no file/u],
    ['too few re-fits', [...command.slice(0, 2), '--resamples', '1'], 2, /^--resamples must be/u],
    ['a seed that is none', [...command, '--seed', '-3'], 2, /--seed/u],
    [
      'a folder that is a file',
      [...command, '--out', 'plan.json/x.csv'],
      1,
      /could not be written/u,
    ],
    ['to write over the study', [...command, '--out', 'study.understory'], 1, /written over/u],
    ['an option that it does not have', [...command, '--from', '3'], 2, /no option --from/u],
  ];
  test.each(refusals)('%s', async (_what, words, code, sentence) => {
    const before = contents(folder);
    const { code: found, err, out } = await run(folder, words);
    const lines = err.split('\n').filter((line) => !/^(Re-fitting|Usage):? /u.test(line));
    expect(lines[0]).toMatch(sentence);
    expect(lines[0]).toMatch(oneSentence);
    expect([found, out]).toEqual([code, '']);
    expect(contents(folder)).toEqual(before);
  });

  test('too few participants', async () => {
    await fittedStudy(folder, 'few.understory', 3);
    const { code, err } = await run(folder, ['steady', 'few.understory']);
    expect(code).toBe(1);
    expect(err.trim()).toMatch(/^3 participants say counted words, and at least 4 are needed/u);
    expect(existsSync(join(folder, 'few.steady.csv'))).toBe(false);
  });
});

describe('the material of a fit', () => {
  test('is what the fit was made from: the same themes come out of it, bit for bit', async () => {
    const decided = { seed: ['nurse', 'doctor'], shutOut: ['garden'] };
    await fittedStudy(folder, 'decided.understory', 5, [
      { name: 'Being seen', ...decided },
      { name: 'Getting about', seed: ['bus'] },
    ]);
    const opened = await openStudyFile(join(folder, 'decided.understory'), { readOnly: true });
    if (!opened.ok) throw new Error(opened.code);
    const desk = new Desk(opened.value, { by: 'test', now: () => '', mintId: randomIds });
    desk.load(opened.value.edits());
    const fitted = desk.fitted(desk.study.fit)!;
    const material = materialFor(desk, fitted);
    expect(material.leanings).toHaveLength(3);
    expect(fitAnew(material)!.phi).toEqual(fitted.phi);
    opened.value.close();
  });
});

describe('pieces of evidence made side by side', () => {
  const material = told(planted, 8, 4);
  const plan = planSteadiness(material, 3, 1);
  const tasks = plan.ok ? plan.first : [];

  test('are the same to the last bit with one worker and with three, in the tasks’ order', async () => {
    const one = await runEvidence(material, tasks, { workers: 1 });
    const three = await runEvidence(material, tasks, { workers: 3 });
    expect(one).toHaveLength(5);
    expect(three).toEqual(one);
  });

  test('end without a result when stopped before or on the way', async () => {
    expect(await runEvidence(material, tasks, { signal: AbortSignal.abort() })).toBe(null);
    const stop = new AbortController();
    const options = { signal: stop.signal, onProgress: () => stop.abort() };
    expect(await runEvidence(material, tasks, options)).toBe(null);
  });
});
