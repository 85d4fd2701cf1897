import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import mammoth from 'mammoth';
import { beforeAll, describe, expect, test } from 'vitest';
import { excerptColumns } from '../../../main/reports/excerpts-csv.ts';
import { interviews, write } from './material.ts';
import { elementsOf, textsOf } from './page.ts';
import { heading, run, said, table, temporaryFolder } from './run.ts';
import type { Ended, Row } from './run.ts';

const folder = temporaryFolder();
let fitted: Row[];

beforeAll(async () => {
  const files = await interviews();
  write(folder, {
    'in/one.txt': files['one.txt'],
    'in/talk.vtt': files['more/a/talk.vtt'],
    'in/markup.txt': `INT: What of it?\n\nP30: The <b>garden</b> & the "soil" were <script>good</script>. The soil & the bees.\n`,
  });
  const first = await run(
    folder,
    'theme in --themes 3 --out out --save s.understory --no-guard'.split(' '),
  );
  if (first.code !== 0) throw new Error(first.err);
  const [one, two, three] = table(join(folder, 'out', 'excerpts.csv'));
  const place = (row: Row) => ({
    transcript: row['transcript'],
    start: Number(row['start']),
    end: Number(row['end']),
    theme: row['theme_id'],
  });
  const markup = readFileSync(join(folder, 'out/transcripts/markup.txt'), 'utf8');
  const start = markup.indexOf('The <b>');
  write(folder, {
    'plan.json': JSON.stringify({
      themes: [{ id: one['theme_id'], name: 'A <named> & "quoted" theme' }],
      codings: [
        { ...place(one), standing: 'confirmed', memo: 'first\nsecond line' },
        { ...place(two), standing: 'rejected' },
        { ...place(three), standing: 'confirmed' },
        {
          transcript: 'markup',
          start,
          end: start + 25,
          theme: one['theme_id'],
          standing: 'by hand',
        },
      ],
    }),
  });
  const second = await run(
    folder,
    'refit s.understory --plan plan.json --out out --no-guard'.split(' '),
  );
  if (second.code !== 0) throw new Error(second.err);
  fitted = table(join(folder, 'out', 'excerpts.csv'));
});

function exported(as: string, out: string, ...more: string[]): Promise<Ended> {
  return run(folder, ['export', 's.understory', '--as', as, '--out', out, ...more]);
}

const decided = (): Row[] => fitted.filter(({ standing }) => standing !== 'suggested');

/** The rows of a table, once its last column was seen to say which state of the study it is from. */
function withoutHead(name: string): Row[] {
  return table(join(folder, name)).map(({ study_head: head, ...row }) => {
    expect(head).toMatch(/^[0-9a-f]{64}$/u);
    return row;
  });
}

describe('export writes coded excerpts', () => {
  test('as a table: confirmed and by hand, with the columns and rows of the fit', async () => {
    const ended = await exported('csv', 'e.csv', '--no-guard');
    expect(ended.code).toBe(0);
    expect(said(ended)).toEqual(['3 coded excerpts written to e.csv']);
    expect(heading(join(folder, 'e.csv'))).toEqual([...excerptColumns, 'study_head']);
    expect(withoutHead('e.csv')).toEqual(decided());
    expect(decided()).toHaveLength(3);
  });

  test('as a table that is guarded unless told otherwise', async () => {
    await exported('csv', 'guarded.csv', '--standing', 'confirmed,by-hand');
    expect(readFileSync(join(folder, 'guarded.csv'), 'utf8')).toMatch(/^excerpt_id,.*\r\n/u);
  });

  test('of the standings asked for', async () => {
    await exported('csv', 'all.csv', '--no-guard', '--standing', 'confirmed,by-hand,suggested');
    expect(withoutHead('all.csv')).toEqual(fitted);
    await exported('csv', 'rejected.csv', '--standing', 'rejected');
    expect(table(join(folder, 'rejected.csv')).map(({ standing }) => standing)).toEqual([
      'rejected',
    ]);
  });

  test('as JSON, with the filter that they passed', async () => {
    await exported('json', 'e.json');
    const { study, filter, excerpts } = JSON.parse(readFileSync(join(folder, 'e.json'), 'utf8'));
    expect(study).toBe('s');
    expect(filter).toEqual({ standings: ['confirmed', 'by hand'], themes: null });
    expect(excerpts.map(({ id }: { id: string }) => id)).toEqual(
      decided().map((row) => row['excerpt_id']),
    );
    expect(excerpts.map(({ text }: { text: string }) => text)).toEqual(
      decided().map(({ text }) => text),
    );
  });

  test('as a page that needs nothing else and runs nothing', async () => {
    await exported('html', 'e.html');
    const page = readFileSync(join(folder, 'e.html'), 'utf8');
    expect(textsOf(page, 'h2')).toContain('A <named> & "quoted" theme');
    expect(textsOf(page, 'blockquote')).toEqual(decided().map(({ text }) => text));
    expect(textsOf(page, 'p')).toContain('Memo: first\nsecond line');
    const tags = new Set(elementsOf(page).map(({ tag }) => tag));
    for (const tag of ['script', 'img', 'link', 'iframe', 'a']) expect(tags).not.toContain(tag);
    expect(page).not.toMatch(/https?:/u);
  });

  test('as a document that a word processor opens', async () => {
    await exported('docx', 'e.docx');
    const { value } = await mammoth.convertToHtml({ path: join(folder, 'e.docx') });
    expect(textsOf(value, 'h1')).toContain('A <named> & "quoted" theme');
    const paragraphs = textsOf(value, 'p');
    for (const { text } of decided()) expect(paragraphs).toContain(text);
    expect(paragraphs.some((text) => text.includes('Memo: first'))).toBe(true);
  });

  test('and says so where there are none', async () => {
    const other = await run(
      folder,
      'theme in --themes 3 --out none --save none.understory'.split(' '),
    );
    expect(other.code).toBe(0);
    for (const as of ['csv', 'json', 'html', 'docx']) {
      const ended = await run(folder, [
        'export',
        'none.understory',
        '--as',
        as,
        '--out',
        `n.${as}`,
      ]);
      expect(ended.code).toBe(0);
      expect(said(ended)[0]).toMatch(
        /^There are no excerpts that are confirmed or by hand yet, so the file holds none; /u,
      );
    }
    expect(heading(join(folder, 'n.csv'))).toEqual([...excerptColumns, 'study_head']);
  });

  test('over a file of that name, which it replaces', async () => {
    write(folder, { 'old.csv': 'old' });
    expect((await exported('csv', 'old.csv')).code).toBe(0);
    expect(table(join(folder, 'old.csv'))).toHaveLength(3);
  });
});
