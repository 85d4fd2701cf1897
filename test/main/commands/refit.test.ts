import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { beforeAll, describe, expect, test } from 'vitest';
import { openStudy } from '../../../main/commands/open.ts';
import { createStudyFile } from '../../../main/project/index.ts';
import type { Desk } from '../../../main/desk.ts';
import { interviews, write } from './material.ts';
import { contents, run, said, table, temporaryFolder } from './run.ts';
import type { Ended, Row } from './run.ts';

const folder = temporaryFolder();
const study = 'study.understory';

const firstPlan = {
  themes: [
    { name: 'Growing things', seed: ['soil', 'Compost'] },
    { name: 'Care', seed: ['nurse', 'doctor'], shutOut: ['waiting'] },
    { name: 'Getting about', seed: ['bus', 'ticket'] },
    { name: 'The young', seed: ['school', 'toddler'] },
    { name: 'Quiet', byHand: true, brief: 'What is not said.' },
  ],
  interviewers: ['INT', 'Interviewer'],
};

interface Outputs {
  readonly excerpts: Row[];
  readonly themes: Row[];
  readonly passages: Row[];
  readonly fit: {
    readonly hashes: Record<string, string>;
    readonly themes: {
      readonly id: string;
      readonly shutOut: { readonly word: string; readonly probability: number | null }[];
    }[];
  };
}

function outputs(name: string): Outputs {
  const read = (file: string): Row[] => table(join(folder, name, file));
  return {
    excerpts: read('excerpts.csv'),
    themes: read('themes.csv'),
    passages: read('passages.csv'),
    fit: JSON.parse(readFileSync(join(folder, name, 'fit.json'), 'utf8')),
  };
}

const called = ({ themes }: Outputs, name: string): Row =>
  themes.find(({ theme }) => theme === name) as Row;
const place = (row: Row) => ({
  transcript: row['transcript'],
  start: Number(row['start']),
  end: Number(row['end']),
});

let first: Outputs;
let second: Outputs;
let third: Outputs;
let refitted: Ended;
let codings: Record<'confirmed' | 'rejected' | 'moved' | 'byHand' | 'none', Row>;

beforeAll(async () => {
  const files = Object.entries(await interviews());
  write(folder, Object.fromEntries(files.map(([name, content]) => [`in/${name}`, content])));
  write(folder, { 'first.json': JSON.stringify(firstPlan) });
  const words = 'theme in --themes 5 --seed 3 --out first --plan first.json --no-guard';
  await mustEnd(run(folder, [...words.split(' '), '--save', study]));
  first = outputs('first');

  const care = first.excerpts.filter(({ theme }) => theme === 'Care');
  const weak = first.passages.find(
    (row) =>
      Number(row['counted_words']) > 8 && Number(row[called(first, 'Care')['theme_id']]) < 0.1,
  ) as Row;
  codings = {
    confirmed: care[0],
    rejected: care[1],
    none: care[2],
    byHand: care[3],
    moved: weak,
  };
  const byHand = place(codings.byHand);
  const plan = {
    themes: [
      { name: 'Growing things', pin: true },
      { id: called(first, 'Getting about')['theme_id'], name: 'Roads', shutOut: ['late', 'Depot'] },
    ],
    codings: [
      { ...place(codings.confirmed), theme: 'Care', standing: 'confirmed', memo: 'As said, twice' },
      { ...place(codings.rejected), theme: 'Care', standing: 'rejected' },
      { ...place(codings.none), standing: 'none' },
      { ...place(codings.moved), theme: 'Care', standing: 'by hand' },
      { ...byHand, end: byHand.start + 40, theme: 'Quiet', standing: 'by hand' },
    ],
  };
  write(folder, { 'second.json': JSON.stringify(plan) });
  const again = `refit ${study} --out second --plan second.json --no-guard`;
  refitted = await mustEnd(run(folder, again.split(' ')));
  second = outputs('second');
  write(folder, { 'third.json': '{"themes":[{"name":"Care","seed":["referral"]}]}' });
  await mustEnd(run(folder, `refit ${study} --out third --plan third.json --no-guard`.split(' ')));
  third = outputs('third');
});

async function mustEnd(ending: Promise<Ended>): Promise<Ended> {
  const ended = await ending;
  if (ended.code !== 0) throw new Error(ended.err);
  return ended;
}

describe('a plan of named and seeded themes', () => {
  test('comes back under its names, with a candidate to fill up', () => {
    const names = first.themes.map(({ theme }) => theme);
    for (const { name } of firstPlan.themes) expect(names).toContain(name);
    expect(names.filter((name) => name.startsWith('candidate: '))).toHaveLength(1);
    expect(names.at(-1)).toBe('Quiet');
  });

  test('seeds that are said five times are among the first fifteen words', () => {
    const talk = first.passages
      .map((row) => {
        const text = readFileSync(
          join(folder, `first/transcripts/${row['transcript']}.txt`),
          'utf8',
        );
        return text.slice(Number(row['start']), Number(row['end'])).toLowerCase();
      })
      .join('\n');
    for (const { name, seed = [] } of firstPlan.themes) {
      for (const word of seed.map((each) => each.toLowerCase())) {
        expect(talk.split(new RegExp(`\\b${word}\\b`, 'u')).length - 1).toBeGreaterThanOrEqual(5);
        expect(called(first, name)['words'].split(' ')).toContain(word);
      }
    }
  });

  test('themes.csv shows seeds and what is shut out; a theme by hand has no words', () => {
    expect(called(first, 'Growing things')['seeds'].split(' ')).toHaveLength(2);
    expect(called(first, 'Care')).toMatchObject({ shut_out: 'waiting', pinned: 'no' });
    expect(called(first, 'Quiet')).toMatchObject({ share: '', words: '', passages: '0' });
  });

  test('a word shut out has no share in its theme', () => {
    const { id, shutOut } = first.fit.themes.find(
      (theme) => theme.id === called(first, 'Care')['theme_id'],
    ) as Outputs['fit']['themes'][number];
    expect(shutOut).toEqual([{ word: 'waiting', probability: 0 }]);
    expect(id).toMatch(/^[0-9a-f]{32}$/u);
    expect(called(first, 'Care')['words'].split(' ')).not.toContain('waiting');
  });
});

describe('a re-fit keeps what was decided', () => {
  test('every theme keeps its id', () => {
    const ids = ({ themes }: Outputs): string[] => themes.map((row) => row['theme_id']).sort();
    expect(ids(second)).toEqual(ids(first));
    expect(ids(third)).toEqual(ids(first));
  });

  test('every name stays, and a theme that was renamed keeps its id', () => {
    const rows = new Map(third.themes.map((row) => [row['theme_id'], row['theme']]));
    for (const row of first.themes) {
      if (row['theme'].startsWith('candidate: ')) continue;
      const expected = row['theme'] === 'Getting about' ? 'Roads' : row['theme'];
      expect(rows.get(row['theme_id'])).toBe(expected);
    }
  });

  test('a pinned theme keeps its first fifteen words, in their order', () => {
    const words = called(first, 'Growing things')['words'];
    expect(words.split(' ')).toHaveLength(15);
    expect(called(second, 'Growing things')).toMatchObject({ words, pinned: 'yes' });
    expect(called(third, 'Growing things')['words']).toBe(words);
  });

  test('words that were shut out afterwards have no share in the theme', () => {
    for (const outs of [second, third]) {
      const theme = outs.fit.themes.find(({ id }) => id === called(outs, 'Roads')['theme_id']);
      expect(theme?.shutOut).toEqual([
        { word: 'depot', probability: 0 },
        { word: 'late', probability: 0 },
      ]);
      const words = called(outs, 'Roads')['words'].split(' ');
      expect(words).not.toEqual(expect.arrayContaining(['depot']));
      expect(words).not.toEqual(expect.arrayContaining(['late']));
    }
  });

  test('seeds given later hold from then on, beside the earlier ones', () => {
    expect(called(third, 'Care')['seeds']).toBe('doctor nurse referral');
    expect(called(third, 'Care')['words'].split(' ')).toContain('referral');
  });

  test('codings are there after each re-fit, as they were decided', () => {
    const coded = ({ excerpts }: Outputs) =>
      excerpts
        .filter(({ standing }) => standing !== 'suggested')
        .map((row) => ({ ...row, strength: '', theme: '' }))
        .sort((a: Row, b: Row) => (a['excerpt_id'] < b['excerpt_id'] ? -1 : 1));
    expect(coded(second)).toHaveLength(3);
    expect(coded(third)).toEqual(coded(second));
  });

  test('a suggestion that was confirmed keeps its excerpt id', () => {
    const row = second.excerpts.find(({ standing }) => standing === 'confirmed') as Row;
    expect(row).toMatchObject({
      excerpt_id: codings.confirmed['excerpt_id'],
      text: codings.confirmed['text'],
      theme: 'Care',
      memo: 'As said, twice',
      drawn_by: 'plan',
      seen_suggestion: 'no',
      reader: 'command line',
      decided_at: '2026-02-03T04:05:06.000Z',
      codebook_version: '1',
    });
  });

  test('a coding by hand stands with its own words, whatever its strength', () => {
    const row = second.excerpts.find(({ theme }) => theme === 'Quiet') as Row;
    expect(row).toMatchObject({ standing: 'by hand', strength: '' });
    expect(row['text']).toBe(codings.byHand['text'].slice(0, 40));
    expect(called(second, 'Quiet')['passages']).toBe('1');
  });

  test('the model follows: confirmed and by hand lead, rejected has no share', () => {
    const care = called(second, 'Care')['theme_id'];
    const row = ({ transcript, start }: Row): Row =>
      second.passages.find(
        (each) => each['transcript'] === transcript && each['start'] === start,
      ) as Row;
    const leading = (of: Row): string => {
      const ids = second.themes.map((theme) => theme['theme_id']);
      return ids.reduce((best, id) => (Number(of[id]) > Number(of[best] ?? 0) ? id : best), '');
    };
    expect(leading(row(codings.confirmed))).toBe(care);
    expect(leading(row(codings.moved))).toBe(care);
    expect(Number(row(codings.rejected)[care])).toBe(0);
  });

  test('what was rejected, and where nothing applies, is not suggested again', () => {
    const suggested = second.excerpts.filter(({ standing }) => standing === 'suggested');
    const at = (coding: Row): Row[] =>
      suggested.filter(
        ({ transcript, start }) => transcript === coding['transcript'] && start === coding['start'],
      );
    expect(at(codings.rejected).map(({ theme }) => theme)).not.toContain('Care');
    expect(at(codings.none)).toEqual([]);
    expect(at(codings.confirmed).map(({ theme }) => theme)).not.toContain('Care');
  });

  test('proportions still sum to one', () => {
    for (const row of second.passages) {
      const ids = second.fit.themes.map(({ id }) => id).filter((id) => row[id] !== undefined);
      expect(ids.reduce((sum, id) => sum + Math.round(Number(row[id]) * 1e6), 0)).toBe(1e6);
    }
  });

  test('a re-fit names the fit that it went on from', () => {
    expect(second.fit.hashes['previousResult']).toBe(first.fit.hashes['result']);
    expect(third.fit.hashes['previousResult']).toBe(second.fit.hashes['result']);
    const methods = readFileSync(join(folder, 'second', 'methods.md'), 'utf8');
    expect(methods).toContain('It was a re-fit around decisions made');
    expect(methods).toContain('1 pinned theme');
    expect(methods).toContain('People confirmed 1 suggestion, rejected 1, made 2 codings by hand');
  });
});

describe('what moved', () => {
  test('is said at the end of a re-fit and again by moved', async () => {
    const lines = said(refitted);
    expect(lines[0]).toMatch(/^\d+ of \d+ passages moved, \d of 5 themes changed words\.$/u);
    const { out, code } = await run(folder, ['moved', study]);
    expect(code).toBe(0);
    expect(out.split('\n')[0]).toMatch(
      /^\d+ of \d+ passages moved, \d of 5 themes changed words\.$/u,
    );
  });

  test('names a passage that was coded by hand with both its themes and their strengths', () => {
    const { transcript, passage } = codings.moved;
    expect(said(refitted)).toContainEqual(
      expect.stringMatching(
        new RegExp(
          `^${transcript}, passage ${passage}: from .+ \\(0\\.\\d\\d → 0\\.\\d\\d\\) to Care \\(0\\.\\d\\d → 0\\.\\d\\d\\)$`,
          'u',
        ),
      ),
    );
  });

  test('words that a theme lost are listed', () => {
    expect(said(refitted)).toContainEqual(
      expect.stringMatching(/^Roads:.* lost (?=.*\bdepot\b)(?=.*\blate\b)/u),
    );
  });

  test('of a pinned theme no words changed', () => {
    expect(said(refitted).filter((line) => line.startsWith('Growing things:'))).toEqual([]);
  });
});

describe('a stored study', () => {
  async function opened<Value>(path: string, use: (desk: Desk) => Value, keep = false) {
    const terminal = { folder, now: () => '2026-02-03T04:05:06.000Z' } as never;
    const { desk, store, file } = await openStudy(path, terminal, {
      readOnly: !keep,
      call: 'test',
    });
    try {
      const value = use(desk);
      if (keep && !store.flush(file).ok) throw new Error('flush');
      return value;
    } finally {
      file.close();
    }
  }

  async function copied(name: string): Promise<string> {
    write(folder, { [name]: readFileSync(join(folder, study)) });
    return name;
  }

  test('takes back the last fit after it was closed and opened, and makes it again', async () => {
    const copy = await copied('undo.understory');
    const before = await opened(copy, (desk) => [...desk.study.fits.keys()]);
    expect(before).toHaveLength(3);
    const undone = await opened(
      copy,
      (desk) => (desk.undo()?.ok ? desk.study.fit : 'refused'),
      true,
    );
    expect(undone).toBe(before[1]);
    expect(await opened(copy, (desk) => desk.study.fit)).toBe(before[1]);
    const again = await opened(
      copy,
      (desk) => (desk.redo()?.ok ? desk.study.fit : 'refused'),
      true,
    );
    expect(again).toBe(before[2]);
    const shown = await opened(copy, (desk) => desk.fitted(desk.study.fit)?.theta);
    const original = await opened(study, (desk) => desk.fitted(desk.study.fit)?.theta);
    expect(shown).toEqual(original);
  });

  test('takes back every decision, one gesture at a time, down to nothing', async () => {
    const copy = await copied('all.understory');
    const steps = await opened(copy, (desk) => {
      let count = 0;
      for (let taken = desk.undo(); taken !== null; taken = desk.undo()) {
        if (!taken.ok) throw new Error(taken.code);
        count++;
      }
      expect(desk.study.fits.size).toBe(0);
      expect(desk.study.transcripts.size).toBe(0);
      expect(desk.study.themes.size).toBe(0);
      return count;
    });
    expect(steps).toBeGreaterThan(20);
  });

  test('fits again to the same bits after it was closed and opened', async () => {
    const [one, two] = [await copied('bits 1.understory'), await copied('bits 2.understory')];
    await mustEnd(run(folder, ['refit', one, '--out', 'bits 1']));
    await mustEnd(run(folder, ['refit', two, '--out', 'bits 2']));
    expect(contents(join(folder, 'bits 2'))).toEqual(contents(join(folder, 'bits 1')));
  });

  test('a fit from scratch keeps named themes and finds the others anew', async () => {
    const copy = await copied('scratch.understory');
    await mustEnd(
      run(folder, ['refit', copy, '--from-scratch', '--themes', '6', '--out', 'scratch']),
    );
    const { themes } = outputs('scratch');
    const named = ['Growing things', 'Care', 'Roads', 'The young', 'Quiet'];
    for (const name of named) {
      expect(themes.find(({ theme }) => theme === name)?.['theme_id']).toBe(
        called(third, name)['theme_id'],
      );
    }
    expect(themes.filter(({ theme }) => theme.startsWith('candidate: '))).toHaveLength(2);
    expect(themes.find(({ theme }) => theme === 'Growing things')?.['words']).toBe(
      called(first, 'Growing things')['words'],
    );
  });

  test('merges themes: one id stays, with what both had', async () => {
    const copy = await copied('merge.understory');
    write(folder, { 'merge.json': '{"themes":[{"name":"Care","merge":["The young"]}]}' });
    await mustEnd(run(folder, `refit ${copy} --plan merge.json --out merge`.split(' ')));
    const { themes } = outputs('merge');
    const shares = ['Care', 'The young'].map((name) => Number(called(third, name)['share']));
    const merged = themes.find(({ theme }) => theme === 'Care') as Row;
    expect(merged['theme_id']).toBe(called(third, 'Care')['theme_id']);
    expect(Number(merged['share'])).toBeGreaterThan(0.7 * (shares[0] + shares[1]));
    expect(themes.map(({ theme }) => theme)).not.toContain('The young');
    expect(merged['seeds']).toBe('doctor nurse referral');
  });

  test('sets a theme aside and brings it back under its id', async () => {
    const copy = await copied('aside.understory');
    write(folder, {
      'aside.json': '{"themes":[{"name":"The young","setAside":true}]}',
      'back.json': '{"themes":[{"name":"The young","setAside":false}]}',
    });
    await mustEnd(run(folder, `refit ${copy} --plan aside.json --out aside`.split(' ')));
    expect(called(outputs('aside'), 'The young')).toMatchObject({ share: '', words: '' });
    expect(outputs('aside').excerpts.map(({ theme }) => theme)).not.toContain('The young');
    await mustEnd(run(folder, `refit ${copy} --plan back.json --out back`.split(' ')));
    expect(called(outputs('back'), 'The young')['theme_id']).toBe(
      called(third, 'The young')['theme_id'],
    );
  });

  test('without a fit: a re-fit is refused, moved and export say so', async () => {
    const created = await createStudyFile(join(folder, 'bare.understory'), { studyId: 'bare' });
    if (!created.ok) throw new Error(created.code);
    created.value.append([], () => ({
      at: '2026-02-03T04:05:06.000Z',
      by: 'test',
      edit: { kind: 'studyStarted', study: 'bare', name: 'Bare' },
    }));
    created.value.close();
    const ended = await run(folder, 'refit bare.understory --out bare'.split(' '));
    expect(ended).toMatchObject({ code: 1 });
    expect(said(ended)).toEqual([
      'There is no fit to start from yet; fit the study from scratch first.',
    ]);
    expect((await run(folder, ['moved', 'bare.understory'])).out).toBe('There is no fit yet.\n');
    const none = await run(folder, 'export bare.understory --as csv --out bare.csv'.split(' '));
    expect(none.code).toBe(0);
    expect(table(join(folder, 'bare.csv'))).toEqual([]);
  });
});
