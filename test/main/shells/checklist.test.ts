import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { expect, it } from 'vitest';

const top = join(import.meta.dirname, '..', '..', '..');

/** Sources of a room, with their paths. */
function sources(room: string): { readonly name: string; readonly text: string }[] {
  return readdirSync(join(top, room), { recursive: true, encoding: 'utf8' })
    .filter((name) => /\.(?:ts|mjs|svelte|html)$/u.test(name))
    .map((name) => ({ name, text: readFileSync(join(top, room, name), 'utf8') }));
}

// Points of Electron's security checklist (electronjs.org, "Security") that are kept by never using
// something; the table in DEVELOPERS.md has the tests of the others.
it.each([
  ['opens addresses in other programs', /\bopenExternal\b/u],
  ['switches features of Chromium on', /\benableBlinkFeatures\b|enable-blink-features/u],
  ['lets a page inside the page open windows', /\ballowpopups\b|<webview\b/u],
  ['loads the window from file://', /loadFile\(|loadURL\([`'"]file:/u],
  ['runs text as code', /\beval\(|new Function\(/u],
])('nothing in main or renderer %s', (_, pattern) => {
  const found = [...sources('main'), ...sources('renderer')].filter(({ text }) =>
    pattern.test(text),
  );
  expect(found.map(({ name }) => name)).toEqual([]);
});
