import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { beforeAll, expect, test } from 'vitest';
import { interviews, write } from './material.ts';
import { run, table, temporaryFolder } from './run.ts';

const folder = temporaryFolder();

interface Told {
  readonly id: string;
  readonly words: { readonly word: string }[];
}

const themesOf = (name: string): Told[] =>
  (JSON.parse(readFileSync(join(folder, name, 'fit.json'), 'utf8')) as { themes: Told[] }).themes;

async function mustRun(words: string): Promise<void> {
  const ended = await run(folder, words.split(' '));
  expect(ended, ended.err).toMatchObject({ code: 0 });
}

let aside: string;

beforeAll(async () => {
  const files = Object.entries(await interviews());
  write(folder, Object.fromEntries(files.map(([name, content]) => [`in/${name}`, content])));
  await mustRun('theme in --themes 4 --seed 3 --out first --save study.understory --no-guard');
  aside = themesOf('first')[1].id;
  for (const [out, setAside] of [
    ['without', true],
    ['back', false],
  ] as const) {
    write(folder, {
      'plan.json': JSON.stringify({ themes: [{ id: aside, name: 'Kept', setAside }] }),
    });
    await mustRun(`refit study.understory --plan plan.json --out ${out}`);
  }
});

test('a theme that was set aside leaves the model', () => {
  expect(themesOf('first').map(({ id }) => id)).toContain(aside);
  const rows = table(join(folder, 'without', 'passages.csv'));
  expect(Object.keys(rows[0])).not.toContain(aside);
});

test('a named theme that is brought back after a re-fit comes back with its words', () => {
  const first = (name: string): string[] =>
    themesOf(name)
      .find(({ id }) => id === aside)!
      .words.slice(0, 5)
      .map(({ word }) => word)
      .sort();
  expect(first('back')).toEqual(first('first'));
});
