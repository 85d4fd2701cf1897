import * as fs from 'node:fs';
import { tmpdir } from 'node:os';
import * as path from 'node:path';
import { fileURLToPath } from 'node:url';
import { afterEach } from 'vitest';
import type { Api, Answer, FitProgress, Method, PassagePlace } from '../../../main/api.ts';
import { createSession, type Session, type Surroundings } from '../../../main/window/index.ts';

const folders: string[] = [];
const sessions: Session[] = [];

afterEach(async () => {
  for (const session of sessions.splice(0)) await session.close();
  for (const folder of folders.splice(0)) fs.rmSync(folder, { recursive: true, force: true });
});

export const demoFolder = fileURLToPath(new URL('../../../resources/demo', import.meta.url));

export function newFolder(): string {
  const folder = fs.mkdtempSync(path.join(tmpdir(), 'understory-window-'));
  folders.push(folder);
  return folder;
}

/** A clock that goes a second further at each look. */
export function steadyClock(): () => string {
  let seconds = 0;
  return () => new Date(Date.UTC(2026, 2, 1) + 1000 * seconds++).toISOString();
}

export interface Table {
  readonly session: Session;
  readonly folder: string;
  readonly recent: string[];
  /** Calls a method that must answer. */
  ask<Name extends Method>(
    method: Name,
    takes: Api[Name]['takes'],
    options?: {
      readonly onProgress?: (progress: FitProgress) => void;
      readonly signal?: AbortSignal;
    },
  ): Promise<Api[Name]['gives']>;
  /** Calls a method that must refuse: the code, once the sentence was found to be one. */
  refused<Name extends Method>(method: Name, takes: Api[Name]['takes']): Promise<string>;
  answer<Name extends Method>(
    method: Name,
    takes: Api[Name]['takes'],
  ): Promise<Answer<Api[Name]['gives']>>;
}

/** A session in a folder of its own, and short ways to call it. */
export function newTable(given: Partial<Surroundings> & { readonly folder?: string } = {}): Table {
  const { folder = newFolder(), ...rest } = given;
  const recent: string[] = [];
  const session = createSession({
    about: {
      version: '0',
      shell: 'browser',
      dialogs: false,
      studiesFolder: folder,
      platform: 'linux',
      locale: 'en',
    },
    dialogs: null,
    recent: {
      list: async () => recent,
      add: async (one) => {
        recent.unshift(one);
      },
      remove: async (one) => {
        recent.splice(0, recent.length, ...recent.filter((each) => each !== one));
      },
    },
    demoFolder,
    now: steadyClock(),
    readerName: 'Ada',
    keyWork: { n: 1024, r: 8, p: 1 },
    ...rest,
  });
  sessions.push(session);
  const answer: Table['answer'] = (method, takes) => call(method, takes);
  const call = <Name extends Method>(
    method: Name,
    takes: Api[Name]['takes'],
    {
      onProgress = () => {},
      signal = new AbortController().signal,
    }: Parameters<Table['ask']>[2] = {},
  ): Promise<Answer<Api[Name]['gives']>> => session.handlers[method](takes, { onProgress, signal });
  return {
    session,
    folder,
    recent,
    answer,
    ask: async (method, takes, options) => {
      const got = await call(method, takes, options);
      if ('refused' in got) throw new Error(`${method} was refused: ${got.refused}`);
      return got.value;
    },
    refused: async (method, takes) => {
      const got = await call(method, takes);
      if (!('refused' in got)) throw new Error(`${method} was not refused`);
      if (!/^\S.*[.!]$/su.test(got.refused)) throw new Error(`no sentence: ${got.refused}`);
      return got.code;
    },
  };
}

export function file(name: string, text: string): { name: string; bytes: Uint8Array } {
  return { name, bytes: new TextEncoder().encode(text) };
}

/** How a decision comes about where a test does not care. */
export const seen = { drawnBy: 'in order', seenSuggestion: true } as const;

export function placeOf(
  transcript: string,
  { start, end }: { start: number; end: number },
): PassagePlace {
  return { transcript, start, end };
}

// Made up: two people, each on two subjects, in sentences long enough for passages of their own.
const ferry = [
  'The ferry was cancelled again and the harbour was empty when I came down with my ticket.',
  'You wait at the pier for the ferry and the skipper shakes his head at the swell in the harbour.',
  'My ticket was for the morning ferry but the crossing was cancelled because of the swell.',
  'When the crossing is cancelled the skipper rings the harbour office and we all go home.',
];
const school = [
  'The school bus leaves at seven and the teacher waits for the children by the gate.',
  'The children do their homework at the kitchen table and the teacher marks it on Friday.',
  'A small school means one teacher for all the children and lessons in the same room.',
  'Homework and lessons go on when the teacher is ill because the children look after it.',
];

/** Transcripts of one interviewer and one participant each, on the two subjects by turns. */
export function interviews(count: number): { name: string; bytes: Uint8Array }[] {
  return Array.from({ length: count }, (_, index) => {
    const turns = Array.from({ length: 8 }, (_, turn) => {
      const subject = turn % 2 === 0 ? ferry : school;
      const said = [0, 1, 2].map((step) => subject[(index + turn + step) % subject.length]);
      const question = turn % 2 === 0 ? 'How do you travel in winter?' : 'How is the school week?';
      return `Interviewer: ${question}\nP${index + 1}: ${said.join(' ')}`;
    });
    return file(`P${index + 1}.txt`, `${turns.join('\n')}\n`);
  });
}

/** A study with transcripts and, where asked for, a quick fit of two themes. */
export async function newStudy(
  count = 3,
  { fitted = false, ...given }: Parameters<typeof newTable>[0] & { readonly fitted?: boolean } = {},
): Promise<Table> {
  const table = newTable(given);
  await table.ask('startStudy', { name: 'Crossings', path: null });
  if (count > 0) await table.ask('addTranscripts', { files: interviews(count) });
  await table.ask('changeSettings', {
    settings: {
      themes: 2,
      answer: 'quick',
      // Each of the short answers is a passage, and nothing is too short to be suggested for.
      'text.passageMinimumWords': 10,
      'text.passageMaximumWords': 60,
      'text.maximumPassageShare': 1,
      suggestionCountedWords: 3,
    },
  });
  if (fitted) await table.ask('fit', { kind: 'from scratch', themes: null });
  return table;
}

/** The transcripts of a study by name. */
export async function transcriptsOf(
  table: Table,
): Promise<ReadonlyMap<string, Api['transcriptView']['gives']>> {
  const { transcripts } = await table.ask('gatherView', null);
  const views = new Map<string, Api['transcriptView']['gives']>();
  for (const { id, name } of transcripts) {
    views.set(name, await table.ask('transcriptView', { transcript: id }));
  }
  return views;
}

/** The first passage of a transcript as it stands now. */
export async function passageOf(
  table: Table,
  name = 'P1',
  index = 0,
): Promise<{ readonly place: PassagePlace; readonly view: Api['passageView']['gives'] }> {
  const transcript = (await transcriptsOf(table)).get(name);
  if (transcript === undefined) throw new Error(`no transcript ${name}`);
  const place = placeOf(transcript.id, transcript.passages[index]);
  return { place, view: await table.ask('passageView', { place }) };
}
