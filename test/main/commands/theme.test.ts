import { existsSync, readFileSync, readdirSync } from 'node:fs';
import { join } from 'node:path';
import { beforeAll, describe, expect, test } from 'vitest';
import { interviews, topicNames, topics, unreadable, write } from './material.ts';
import { contents, heading, oneSentence, run, said, table, temporaryFolder } from './run.ts';
import type { Ended, Row } from './run.ts';

const folder = temporaryFolder();
const columns = {
  excerpts:
    'excerpt_id, transcript, participant, speaker, start_time, question_before, passage, start, end, text, theme_id, theme, standing, strength, strength_at_decision, seen_suggestion, drawn_by, reader, decided_at, codebook_version, memo',
  themes: 'theme_id, theme, share, passages, words, seeds, shut_out, pinned',
  passages:
    'transcript, participant, speaker, passage, start, end, words, counted_words, unexplained',
};
const listed = (names: string): string[] => names.split(', ');

let ended: Ended;
let excerpts: Row[];
let themes: Row[];
let passages: Row[];
let fit: {
  skipped: { count: number; files: { file: string; code: string; reason: string }[] };
  [key: string]: unknown;
};

beforeAll(async () => {
  write(folder, Object.fromEntries(Object.entries(await interviews()).map(inFolder('in'))));
  const bad = Object.entries(await unreadable()).map(([name, [content]]) => [name, content]);
  write(folder, Object.fromEntries((bad as [string, string][]).map(inFolder('in'))));
  write(folder, {
    'in/zz copy of one.txt': readFileSync(join(folder, 'in/one.txt')),
    'in/people.csv':
      '\ufeffparticipant;site;=role\r\nP01;north;=1+1\r\nZoë;south;\r\nNobody;south;x\r\n',
  });
  ended = await run(folder, 'theme in --themes 4 --seed 1 --out out --no-guard'.split(' '));
  const read = (name: string): Row[] => table(join(folder, 'out', name));
  [excerpts, themes, passages] = [read('excerpts.csv'), read('themes.csv'), read('passages.csv')];
  fit = JSON.parse(readFileSync(join(folder, 'out', 'fit.json'), 'utf8'));
});

function inFolder(name: string) {
  return ([place, content]: [string, string | Uint8Array]) =>
    [`${name}/${place}`, content] as const;
}

const textOf = (transcript: string): string =>
  readFileSync(join(folder, 'out', 'transcripts', `${transcript}.txt`), 'utf8');

describe('what theme writes', () => {
  test('ends well and leaves these files', () => {
    expect(ended.code).toBe(0);
    expect(readdirSync(join(folder, 'out')).sort()).toEqual(
      'excerpts.csv fit.json methods.md passages.csv themes.csv transcripts'.split(' '),
    );
  });

  test('tables have these columns, in this order', () => {
    const head = (name: string): string[] => heading(join(folder, 'out', name));
    expect(head('excerpts.csv')).toEqual([...listed(columns.excerpts), '=role', 'site']);
    expect(head('themes.csv')).toEqual(listed(columns.themes));
    const ids = head('passages.csv').slice(listed(columns.passages).length);
    expect(head('passages.csv').slice(0, -ids.length)).toEqual(listed(columns.passages));
    expect([...ids].sort()).toEqual(themes.map((row) => row['theme_id']).sort());
  });

  test('every excerpt is the text of its transcript between start and end', () => {
    expect(excerpts.length).toBeGreaterThan(50);
    for (const row of excerpts) {
      expect(textOf(row['transcript']).slice(Number(row['start']), Number(row['end']))).toBe(
        row['text'],
      );
    }
  });

  test('every transcript is there as canonical text, in whatever encoding it came', () => {
    const names =
      'formula, five 🌳, four 1252, more/a/stem.docx, more/a/stem.txt, more/a/talk, more/b/talk, more/talk, one, three 16, two crlf, uncounted';
    expect(new Set(passages.map((row) => row['transcript']))).toEqual(new Set(listed(names)));
    for (const name of listed(names)) {
      expect(textOf(name)).not.toMatch(/\r|^\ufeff|\ufffd/u);
      if (name !== 'uncounted' && name !== 'formula')
        expect(textOf(name)).toContain('“that” thing');
    }
  });

  test('the people behind the passages are told apart, and interviewers are not modelled', () => {
    const people = listed(
      'José, Maria López, P01, P03, P05, P06, P07, P08, P09, P10, P11, P12, Zoë',
    );
    expect([...new Set(passages.map((row) => row['participant']))].sort()).toEqual(
      [...people, 'more/a/stem.txt'].sort(),
    );
    expect(new Set(passages.map((row) => row['speaker']))).not.toContain('INT');
    const [first] = excerpts.filter((row) => row['transcript'] === 'more/b/talk');
    expect(first['question_before']).toMatch(/^Could you tell me about the \w+\?$/u);
  });

  test('times are those of the captions, HH:MM:SS.mmm', () => {
    const timed = excerpts.filter((row) => row['transcript'] === 'more/a/talk');
    expect(timed.length).toBeGreaterThan(0);
    for (const row of timed) expect(row['start_time']).toMatch(/^00:0\d:\d\d\.000$/u);
    const untimed = excerpts.filter((row) => row['transcript'] === 'one');
    expect(new Set(untimed.map((row) => row['start_time']))).toEqual(new Set(['']));
  });

  test('proportions have six decimals and sum to one exactly', () => {
    for (const row of passages) {
      const shares = themes.map((theme) => row[theme['theme_id']]);
      for (const share of shares) expect(share).toMatch(/^[01]\.\d{6}$/u);
      expect(shares.reduce((sum, share) => sum + Math.round(Number(share) * 1e6), 0)).toBe(1e6);
    }
  });

  test('passages are numbered from 1 in each transcript and stand in its order', () => {
    const numbers = new Map<string, number>();
    for (const row of passages) {
      const next = (numbers.get(row['transcript']) ?? 0) + 1;
      expect(row['passage']).toBe(String(next));
      numbers.set(row['transcript'], next);
    }
  });

  test('a passage without counted words keeps a row with the mean of the prior, and is not suggested', () => {
    const [row] = passages.filter(({ transcript }) => transcript === 'uncounted');
    expect(row['counted_words']).toBe('0');
    expect(row['unexplained']).toBe('');
    expect(themes.map((theme) => row[theme['theme_id']])).toEqual(Array(4).fill('0.250000'));
    expect(excerpts.filter(({ transcript }) => transcript === 'uncounted')).toEqual([]);
  });

  test('every suggestion of half or more is an excerpt, with the strength of the passage', () => {
    const found = new Map(
      excerpts.map((row) => [
        `${row['transcript']} ${row['passage']} ${row['theme_id']}`,
        row['strength'],
      ]),
    );
    let expected = 0;
    for (const row of passages) {
      if (row['counted_words'] === '0') continue;
      for (const { theme_id: id } of themes) {
        if (Number(row[id]) < 0.5) continue;
        expected++;
        expect(found.get(`${row['transcript']} ${row['passage']} ${id}`)).toBe(row[id]);
      }
    }
    expect(excerpts).toHaveLength(expected);
  });

  test('a suggestion says that nobody has decided it', () => {
    const undecided = listed(
      'strength_at_decision, seen_suggestion, drawn_by, reader, decided_at, codebook_version, memo',
    );
    for (const row of excerpts) {
      expect(row['standing']).toBe('suggested');
      for (const column of undecided) expect(row[column]).toBe('');
    }
  });

  test('excerpts are ordered by theme share, theme id, strength, transcript and start', () => {
    const shares = new Map(themes.map((row) => [row['theme_id'], Number(row['share'])]));
    const key = (row: Row) =>
      [
        -(shares.get(row['theme_id']) as number),
        row['theme_id'],
        -Number(row['strength']),
        row['transcript'],
        Number(row['start']),
      ] as const;
    for (let i = 1; i < excerpts.length; i++) {
      const [before, after] = [key(excerpts[i - 1]), key(excerpts[i])];
      const place = before.findIndex((value, column) => value !== after[column]);
      expect(before[place] < after[place]).toBe(true);
    }
  });

  test('every excerpt has an id of its own', () => {
    expect(new Set(excerpts.map((row) => row['excerpt_id'])).size).toBe(excerpts.length);
  });

  test('themes are ordered by share; shares sum to one; each shows fifteen words', () => {
    const shares = themes.map((row) => Number(row['share']));
    expect(shares).toEqual([...shares].sort((a, b) => b - a));
    expect(shares.reduce((sum, share) => sum + share, 0)).toBeCloseTo(1, 5);
    for (const row of themes) expect(row['words'].split(' ')).toHaveLength(15);
  });

  test('four themes find the four things that people talk about', () => {
    const matched = topicNames.map((topic) => {
      const own = new Set(topics[topic].split(' '));
      const shared = themes.map(
        (row) =>
          row['words']
            .split(' ')
            .slice(0, 9)
            .filter((word) => own.has(word)).length,
      );
      return { row: shared.indexOf(Math.max(...shared)), words: Math.max(...shared) };
    });
    expect(new Set(matched.map(({ row }) => row)).size).toBe(4);
    for (const { words } of matched) expect(words).toBeGreaterThanOrEqual(8);
  });

  test('attributes stand with the participants that they belong to', () => {
    const of = (participant: string): Row =>
      excerpts.find((row) => row['participant'] === participant) as Row;
    expect([of('P01')['site'], of('P01')['=role']]).toEqual(['north', '=1+1']);
    expect([of('Zoë')['site'], of('Zoë')['=role']]).toEqual(['south', '']);
    expect(of('P03')['site']).toBe('');
    expect(ended.err).toContain('not in the transcripts: Nobody');
    expect(fit['attributesUnmatched']).toEqual(['Nobody']);
  });

  test('files that were skipped are named with the reason and counted', async () => {
    const reasons = Object.entries(await unreadable()).map(([file, [, code]]) => [file, code]);
    const expected = [...reasons, ['zz copy of one.txt', 'duplicate']].sort();
    expect(fit.skipped.count).toBe(expected.length);
    expect(fit.skipped.files.map(({ file, code }) => [file, code]).sort()).toEqual(expected);
    for (const { file, reason } of fit.skipped.files) {
      expect(reason).toMatch(oneSentence);
      expect(said(ended)).toContain(`Skipped ${file}: ${reason}`);
    }
  });

  test('fit.json says how the fit was made', () => {
    expect(fit).toMatchObject({
      method: expect.any(Number),
      seed: 1,
      sweeps: expect.any(Number),
      stopReason: 'schedule completed',
      hashes: {
        words: expect.stringMatching(/^[0-9a-f]{64}$/u),
        priors: expect.stringMatching(/^[0-9a-f]{64}$/u),
        result: expect.stringMatching(/^[0-9a-f]{64}$/u),
      },
    });
    const bounds = fit['boundBySweep'] as { sweep: number; bound: number }[];
    expect(bounds.length).toBeGreaterThan(3);
    for (const { bound } of bounds) expect(bound).toBeLessThan(0);
    expect(fit['settings']).toMatchObject({ themes: 4, 'text.minimumPassages': 2, alpha: 0.1 });
  });

  test('methods.md names the estimator and its numbers', () => {
    const text = readFileSync(join(folder, 'out', 'methods.md'), 'utf8');
    const { result } = fit['hashes'] as { result: string };
    expect(text).toContain('Latent Dirichlet allocation (Blei, Ng & Jordan 2003) with 4 themes');
    expect(text).toContain('CVB0');
    expect(text).toContain(result);
    expect(text).toContain('12 transcripts with 14 participants');
  });

  test('progress is told on the way', () => {
    expect(ended.err).toMatch(/^Fitting: \d+ %/mu);
  });
});

describe('the files are those of RFC 4180', () => {
  test('UTF-8 without a mark, each line ended by CRLF', () => {
    for (const name of ['excerpts.csv', 'themes.csv', 'passages.csv']) {
      const text = readFileSync(join(folder, 'out', name), 'utf8');
      expect(text.startsWith('\ufeff')).toBe(false);
      expect(text.endsWith('\r\n')).toBe(true);
      const outsideQuotes = text.replace(/"(?:[^"]|"")*"/gu, '');
      expect(outsideQuotes).not.toMatch(/(?<!\r)\n|\r(?!\n)/u);
    }
  });

  test('quotes and commas in talk come back as they were', () => {
    const row = excerpts.find(({ text }) => text.startsWith('@home we had soil, "quoted"'));
    expect(row).toBeDefined();
  });

  test('cells that a spreadsheet would run are guarded unless told otherwise', async () => {
    const guarded = await run(folder, 'theme in --themes 4 --seed 1 --out guarded'.split(' '));
    expect(guarded.code).toBe(0);
    const rows = table(join(folder, 'guarded', 'excerpts.csv'));
    const starts = (start: string): boolean => rows.some(({ text }) => text.startsWith(start));
    expect([starts("'=SUM(A1)"), starts("'-5 degrees"), starts("'@home")]).toEqual([
      true,
      true,
      true,
    ]);
    expect(heading(join(folder, 'guarded', 'excerpts.csv')).slice(-2)).toEqual(["'=role", 'site']);
    expect(rows.find(({ participant }) => participant === 'P01')?.["'=role"]).toBe("'=1+1");
    expect(excerpts.some(({ text }) => text.startsWith('=SUM(A1)'))).toBe(true);
    const cells = rows.flatMap((row) => Object.values(row));
    expect(cells.filter((cell) => /^[=+\-@\t\r\n]/u.test(cell))).toEqual([]);
  });
});

describe('the same call gives the same bytes', () => {
  const call = '--themes 4 --seed 1 --no-guard'.split(' ');

  test('again, over what the last run left', async () => {
    const before = contents(join(folder, 'out'));
    const again = await run(folder, ['theme', 'in', ...call, '--out', 'out']);
    expect(again.code).toBe(0);
    expect(contents(join(folder, 'out'))).toEqual(before);
  });

  test('from another working folder', async () => {
    const elsewhere = temporaryFolder();
    const other = await run(elsewhere, ['theme', join(folder, 'in'), ...call, '--out', 'here']);
    expect(other.code).toBe(0);
    expect(contents(join(elsewhere, 'here'))).toEqual(contents(join(folder, 'out')));
  });

  test('with the files given one by one, in another order', async () => {
    const names = readdirSync(join(folder, 'in')).map((name) => join('in', name));
    const given = [...names.filter((name) => name !== 'in/more')].sort();
    const both = await Promise.all(
      [given, [...given].reverse()].map(async (files, index) => {
        const out = `order ${index}`;
        expect((await run(folder, ['theme', ...files, ...call, '--out', out])).code).toBe(0);
        return contents(join(folder, out));
      }),
    );
    expect(both[1]).toEqual(both[0]);
  });

  test('with a folder inside it given as well, before or after', async () => {
    const both = await Promise.all(
      [
        ['in', 'in/more/a'],
        ['in/more/a', 'in'],
      ].map(async (files, index) => {
        const out = `twice ${index}`;
        expect((await run(folder, ['theme', ...files, ...call, '--out', out])).code).toBe(0);
        return contents(join(folder, out));
      }),
    );
    expect(both[1]).toEqual(both[0]);
  });

  test('and another seed another answer', async () => {
    const words = ['theme', 'in', '--themes', '4', '--seed', '2', '--no-guard', '--out', 'seed 2'];
    expect((await run(folder, words)).code).toBe(0);
    const other = JSON.parse(readFileSync(join(folder, 'seed 2', 'fit.json'), 'utf8'));
    expect(other.hashes.result).not.toBe((fit['hashes'] as { result: string }).result);
  });
});

describe('what else can be said', () => {
  test('--strict makes skipped files the exit code 1, with everything written', async () => {
    const strict = await run(folder, 'theme in --themes 4 --out strict --strict'.split(' '));
    expect(strict.code).toBe(1);
    expect(existsSync(join(folder, 'strict', 'excerpts.csv'))).toBe(true);
    const clean = await run(
      folder,
      ['theme', 'in/one.txt', 'in/three 16.txt'].concat(
        '--themes 4 --out clean --strict'.split(' '),
      ),
    );
    expect(clean.code).toBe(0);
  });

  test('what lies in the folder to write to is not read when that lies among the transcripts', async () => {
    write(folder, {
      'own/one.txt': readFileSync(join(folder, 'in/one.txt')),
      'own/two.txt': readFileSync(join(folder, 'in/two crlf.txt')),
      'own/plan.json': '{"themes":[{"name":"Garden","seed":["soil"]}]}',
    });
    const words = 'theme own --themes 3 --out own/out --plan own/plan.json --strict'.split(' ');
    expect(await run(folder, words)).toMatchObject({ code: 0 });
    const before = contents(join(folder, 'own/out'));
    expect(await run(folder, words)).toMatchObject({ code: 0 });
    expect(contents(join(folder, 'own/out'))).toEqual(before);
  });

  test('--interviewer says who asks; a name that nobody has is pointed out', async () => {
    const words = ['theme', 'in/two crlf.txt', 'in/one.txt', '--themes', '3', '--out', 'asked'];
    const asked = await run(folder, [...words, '--interviewer', 'josé', '--interviewer', 'Bob']);
    expect(asked.code).toBe(0);
    expect(said(asked)[0]).toMatch(/^No transcript has an interviewer “Bob”; /u);
    const people = table(join(folder, 'asked', 'passages.csv')).map((row) => row['participant']);
    expect(new Set(people)).toEqual(new Set(['Interviewer', 'Maria López', 'P01']));
  });

  test('a language that is set brings its own lists', async () => {
    const sentence =
      'Das ist ein Garten und die Erde war nicht gut. Wir haben keine Tomaten und der Kompost ist von der Nachbarin.';
    write(folder, {
      'deutsch/eins.txt': `Interviewer: Was war im Garten los?\n\nAnna: ${sentence} ${sentence}\n`,
      'deutsch/zwei.txt': `Interviewer: Und bei Ihnen?\n\nJörg: ${sentence} Über die Straße kam sie.\n`,
      'deutsch.json': '{"settings":{"text.language":"deu","text.maximumPassageShare":1}}',
    });
    const words = 'theme deutsch --themes 1 --out deutsch-out --plan deutsch.json'.split(' ');
    expect(await run(folder, words)).toMatchObject({ code: 0 });
    const [row] = table(join(folder, 'deutsch-out', 'themes.csv'));
    const shown = row['words'].split(' ');
    expect(shown).toEqual(
      expect.arrayContaining(['garten', 'erde', 'nicht', 'kompost', 'tomaten']),
    );
    expect(shown).not.toEqual(expect.arrayContaining(['das', 'und', 'die', 'der']));
  });

  test('one person alone can be themed: words need not be said by two', async () => {
    const alone = await run(folder, ['theme', 'in/one.txt', '--themes', '3', '--out', 'alone']);
    expect(alone.code).toBe(0);
    expect(table(join(folder, 'alone', 'themes.csv'))).toHaveLength(3);
  });

  test('settings of the plan hold, and what the command line says goes before them', async () => {
    write(folder, {
      'settings.json': '{"settings":{"themes":2,"seed":9,"suggestionStrength":0.9}}',
    });
    const words = 'theme in/one.txt --out settings --plan settings.json --seed 4'.split(' ');
    expect((await run(folder, words)).code).toBe(0);
    const { settings, seed } = JSON.parse(
      readFileSync(join(folder, 'settings', 'fit.json'), 'utf8'),
    );
    expect({ seed, themes: settings.themes }).toEqual({ seed: 4, themes: 2 });
    const strengths = table(join(folder, 'settings', 'excerpts.csv')).map(
      ({ strength }) => strength,
    );
    expect(strengths.every((strength) => Number(strength) >= 0.9)).toBe(true);
  });
});
