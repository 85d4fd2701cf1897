import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { Answer, Api, Method, SearchRequest } from '../../main/api.ts';
import { createSession } from '../../main/window/index.ts';
import { spoken } from './corpora.ts';
import { keep, machine, median, say, table } from './machine.ts';

// Keyword in context over a generated study of a million spoken words, as a window asks for it.

const words = process.argv.includes('--quick') ? 200_000 : 1_000_000;
const folder = mkdtempSync(join(tmpdir(), 'understory-bench-'));
const session = createSession({
  about: {
    version: '0',
    shell: 'browser',
    dialogs: false,
    studiesFolder: folder,
    platform: process.platform,
    locale: 'en',
  },
  dialogs: null,
  recent: { list: async () => [], add: async () => {}, remove: async () => {} },
  demoFolder: folder,
  now: () => new Date().toISOString(),
  readerName: 'Bench',
});

async function ask<Name extends Method>(
  method: Name,
  takes: Api[Name]['takes'],
): Promise<Api[Name]['gives']> {
  const answer: Answer<Api[Name]['gives']> = await session.handlers[method](takes, {
    onProgress: () => {},
    signal: new AbortController().signal,
  });
  if ('refused' in answer) throw new Error(`${method}: ${answer.refused}`);
  return answer.value;
}

async function milliseconds(work: () => Promise<unknown>): Promise<number> {
  const began = performance.now();
  await work();
  return performance.now() - began;
}

say(machine());
await ask('startStudy', { name: 'Bench', path: null });
const transcripts = spoken(words, 15, Math.ceil(words / 25_000));
await ask('addTranscripts', {
  files: transcripts.map(({ text }, index) => ({
    name: `P${index + 1}.txt`,
    bytes: new TextEncoder().encode(text),
  })),
});
const overview = await ask('overview', null);
say(`${overview?.words} words, ${overview?.passages} passages, ${overview?.transcripts} transcripts`);

// The commonest of all, and one of the first answer.
const common = 'the';
const rare = /P: .*?(\S{9})\b/u.exec(transcripts[0].text)?.[1] ?? 'the';
const base = { mode: 'words', within: 5, order: 'place' } as const;
const questions: readonly [string, SearchRequest][] = [
  ['a common word', { ...base, text: common }],
  ['a common word, all forms, by the words before', { ...base, text: common, mode: 'stems', order: 'left' }],
  ['a common word, by the words after', { ...base, text: common, order: 'right' }],
  ['a rare word', { ...base, text: rare }],
  ['a beginning', { ...base, text: `${rare.slice(0, 3)}*` }],
  ['a phrase of two common words', { ...base, text: `${common} and`, mode: 'phrase' }],
  ['two words near each other', { ...base, text: `${common} ${rare}`, mode: 'near' }],
];
const first = await milliseconds(() => ask('search', { ...questions[0][1], from: 0, count: 200 }));
const rows: string[][] = [];
const figures: Record<string, number> = { first };
for (const [what, request] of questions) {
  const times: number[] = [];
  let lines = 0;
  for (let round = 0; round < 7; round++) {
    // Another question in between, so that nothing is answered from what was kept.
    await ask('search', { ...base, text: `nobody${round}`, from: 0, count: 200 });
    times.push(
      await milliseconds(async () => {
        lines = (await ask('search', { ...request, from: 0, count: 200 })).lines;
      }),
    );
  }
  figures[what] = median(times);
  rows.push([what, String(lines), median(times).toFixed(1), Math.max(...times).toFixed(1)]);
}
say(`\nThe first search, which makes the index: ${first.toFixed(0)} ms\n`);
say(table(['search', 'lines', 'median, ms', 'slowest, ms'], rows));
await ask('find', { text: rare });
const again = await milliseconds(() => ask('find', { text: common }));
say(`\nFind (Ctrl K), once words are counted: ${again.toFixed(0)} ms`);
say(`Memory of the process: ${Math.round(process.memoryUsage().rss / 2 ** 20)} MB`);
keep('search', figures);
await session.close();
rmSync(folder, { recursive: true, force: true });
