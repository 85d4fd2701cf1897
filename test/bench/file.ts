import { randomBytes } from 'node:crypto';
import * as fs from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { Answer, Api, Method } from '../../main/api.ts';
import { Desk } from '../../main/desk.ts';
import { fit, recordFit } from '../../main/fitting.ts';
import { randomIds } from '../../main/ids.ts';
import { openStudyFile, type OpenOptions, type StudyFile } from '../../main/project/index.ts';
import { createSession } from '../../main/window/index.ts';
import { wordLists } from '../../main/word-lists.ts';
import { spoken } from './corpora.ts';
import { keep, machine, median, say, table } from './machine.ts';

// The study file beside what any program would need: reading its bytes, one fdatasync, the text and
// the fits that are in it. A generated study of a million words; every figure is a ratio of one run.

const quick = process.argv.includes('--quick');
const size = quick
  ? { words: 100_000, codings: 2_000, fits: 20 }
  : { words: 1_000_000, codings: 20_000, fits: 200 };
const themes = 12;
const rounds = quick ? 5 : 7;
const edits = quick ? 50 : 200;
// Deriving a key is made dear on purpose and depends on nothing in the study: not what is asked here.
const work = { n: 1024, r: 8, p: 1 };
const password = 'moss after four rains';

const folder = fs.mkdtempSync(join(tmpdir(), 'understory-bench-'));
const now = (): string => new Date().toISOString();

/** The study with its transcripts, as a window gathers them; its path. */
async function gathered(): Promise<string> {
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
    now,
    readerName: 'Bench',
  });
  const ask = async <Name extends Method>(
    method: Name,
    takes: Api[Name]['takes'],
  ): Promise<Api[Name]['gives']> => {
    const answer: Answer<Api[Name]['gives']> = await session.handlers[method](takes, {
      onProgress: () => {},
      signal: new AbortController().signal,
    });
    if ('refused' in answer) throw new Error(`${method}: ${answer.refused}`);
    return answer.value;
  };
  const started = await ask('startStudy', { name: 'Bench', path: null });
  const files = spoken(size.words, 15, Math.ceil(size.words / 25_000)).map(({ text }, index) => ({
    name: `P${index + 1}.txt`,
    // People of their own, or no word would be counted: each has to be said by two.
    bytes: new TextEncoder().encode(text.replaceAll('\nP:', `\nP${index + 1}:`)),
  }));
  const { skipped } = await ask('addTranscripts', { files });
  if (skipped.length > 0) throw new Error(`addTranscripts: skipped ${skipped.length}`);
  await ask('changeSettings', {
    settings: { 'text.passageMinimumWords': 20, 'text.passageMaximumWords': 60 },
  });
  await session.close();
  return started?.study.path ?? '';
}

async function opened(path: string, options: OpenOptions = {}): Promise<StudyFile> {
  const file = await openStudyFile(path, { work, ...options });
  if (!file.ok) throw new Error(`openStudyFile: ${file.code}`);
  return file.value;
}

function deskOf(file: StudyFile): Desk {
  const desk = new Desk(file, { by: 'command line', now, mintId: randomIds });
  desk.load(file.edits());
  return desk;
}

/** Fits once and keeps its numbers many times over; then codes by hand, all over the study. */
async function filled(path: string) {
  const file = await opened(path);
  const desk = deskOf(file);
  const first = await fit(desk, 'from scratch', wordLists, { themes, answer: 'quick' });
  if (!first.ok) throw new Error(`fit: ${first.code}`);
  const { done, fit: made } = first.value;
  const fitted = desk.fitted(made.id);
  const { start, settings, counting } = made;
  for (let last = made, n = 1; n < size.fits; n++) {
    const record = {
      ...{ themes: made.themes, basis: desk.study.sequence, start, settings },
      ...(counting === undefined ? {} : { counting }),
    };
    const again = recordFit(desk, record, { ...done, words: null }, [], { ...fitted, fit: last });
    if (!again.ok) throw new Error(`recordFit: ${again.code}`);
    last = again.value;
  }
  const { passages } = fitted.words;
  for (let from = 0; from < size.codings; from += 500) {
    const count = Math.min(500, size.codings - from);
    const drafts = Array.from({ length: count }, (_, n) => coding(desk, passages, from + n));
    const coded = desk.make(drafts);
    if (!coded.ok) throw new Error(`coding: ${coded.code}`);
  }
  const { transcripts, fits } = desk.study;
  const texts = [...transcripts.values()].map(({ text }) => text);
  const blobs = [...fits.values()].flatMap(({ words, result }) => [words, result]);
  const distinct = new Map([...texts, ...blobs].map(({ sequence, bytes }) => [sequence, bytes]));
  const held = [...distinct.values()].reduce((sum, bytes) => sum + bytes, 0);
  const counted = { passages: passages.length, fits: fits.size, held };
  file.close();
  return counted;
}

type Passages = readonly { readonly transcript: string; readonly start: number; readonly end: number }[];

function coding(desk: Desk, passages: Passages, n: number) {
  const rows = desk.fitted(desk.study.fit)?.fit.themes ?? [];
  const { transcript, start, end } = passages[n % passages.length];
  const theme = rows[(n + Math.floor(n / passages.length)) % rows.length];
  const by = [...desk.study.readers.keys()][0];
  return {
    edit: {
      kind: 'codingMade',
      coding: {
        id: randomIds('coding'),
        transcript,
        span: { start, end },
        theme,
        standing: 'by hand',
        under: {
          ...{ reader: by, at: now(), drawnBy: 'in order', seenSuggestion: true },
          fit: desk.study.fit,
        },
        strength: 0.5,
        codebookVersion: desk.study.themes.get(theme)?.version ?? 1,
        memo: '',
      },
    },
  } as const;
}

function readAlone(path: string): void {
  const handle = fs.openSync(path, 'r');
  const piece = new Uint8Array(1 << 20);
  while (fs.readSync(handle, piece) > 0);
  fs.closeSync(handle);
}

async function milliseconds(doing: () => unknown): Promise<number> {
  const began = performance.now();
  await doing();
  return performance.now() - began;
}

/** By turns, so that a busy moment meets all alike; medians. */
async function byTurns(times: number, jobs: Readonly<Record<string, () => unknown>>) {
  const taken: Record<string, number[]> = {};
  for (let round = 0; round <= times; round++) {
    for (const [name, job] of Object.entries(jobs)) {
      const one = await milliseconds(job);
      // The first warms the caches of the system and the code.
      if (round > 0) (taken[name] ??= []).push(one);
    }
  }
  return (name: string): number => median(taken[name]);
}

async function openAndClose(path: string, given?: string): Promise<void> {
  (await opened(path, { readOnly: true, ...(given === undefined ? {} : { password: given }) })).close();
}

async function openAndFold(path: string): Promise<void> {
  const file = await opened(path, { readOnly: true });
  deskOf(file);
  file.close();
}

say(machine());
const path = await gathered();
const { passages, fits, held } = await filled(path);
const locked = join(folder, 'locked.understory');
fs.copyFileSync(path, locked);
const changing = await opened(locked);
const set = await changing.setPassword(password);
if (!set.ok) throw new Error(`setPassword: ${set.code}`);
changing.close();
const bytes = fs.statSync(path).size;
say(
  `${size.words} words, ${passages} passages, ${size.codings} codings, ${fits} fits of ${themes} themes: ${(bytes / 2 ** 20).toFixed(0)} MiB\n`,
);

const opening = await byTurns(rounds, {
  read: () => readAlone(path),
  open: () => openAndClose(path),
  fold: () => openAndFold(path),
  locked: () => openAndClose(locked, password),
});

const plainFile = await opened(path);
const lockedFile = await opened(locked, { password });
const [plain, secret] = [deskOf(plainFile), deskOf(lockedFile)];
const words = plain.fitted(plain.study.fit)?.words.passages ?? [];
const bare = fs.openSync(join(folder, 'bare'), 'w');
const record = randomBytes(600);
let next = size.codings;
const decide = (desk: Desk): void => {
  const made = desk.make([coding(desk, words, next++)]);
  if (!made.ok) throw new Error(`coding: ${made.code}`);
};
decide(secret);
const deciding = await byTurns(edits, {
  bare: () => {
    fs.writeSync(bare, record);
    fs.fdatasyncSync(bare);
  },
  plain: () => decide(plain),
  locked: () => decide(secret),
});
fs.closeSync(bare);
plainFile.close();
lockedFile.close();

const rows: [string, number, string, number][] = [
  ['open, every byte checked', opening('open'), 'reading the bytes', opening('read')],
  ['open and fold the trail', opening('fold'), 'reading the bytes', opening('read')],
  ['open with a password', opening('locked'), 'open without', opening('open')],
  ['one edit on the drive', deciding('plain'), 'one bare fdatasync', deciding('bare')],
  ['one edit with a password', deciding('locked'), 'one edit without', deciding('plain')],
];
say(
  table(
    ['what', 'ms', 'ratio', 'beside', 'ms'],
    rows.map(([what, ms, beside, other]) => [
      ...[what, ms.toFixed(2), (ms / other).toFixed(2), beside, other.toFixed(2)],
    ]),
  ),
);
say(`\nSize of the file against text, words and fits in it: ${(bytes / held).toFixed(4)}`);
keep('file', {
  ...{ ...size, passages, bytes, held, size: bytes / held },
  ...Object.fromEntries(rows.map(([what, ms, , other]) => [what, { ms, ratio: ms / other }])),
});
fs.rmSync(folder, { recursive: true, force: true });
