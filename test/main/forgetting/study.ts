import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { afterAll } from 'vitest';
import {
  emptyDefinition,
  type Coding,
  type Edit,
  type Speaker,
} from '../../../engine/study/index.ts';
import { Desk, type Draft } from '../../../main/desk.ts';
import { fit } from '../../../main/fitting.ts';
import { derivedIds } from '../../../main/ids.ts';
import { createStudyFile, openStudyFile, type StudyFile } from '../../../main/project/index.ts';
import { wordLists } from '../../../main/word-lists.ts';
import { Talk, topicNames } from '../commands/material.ts';
import { temporaryFolder } from '../commands/run.ts';

/** Words that nobody but the one person says or is called: they can be looked for in raw bytes. */
export const planted = {
  name: 'Zebedea Quillfeather',
  word: 'xylophonist',
  attribute: 'Ultima-Thule',
  memo: 'vexillology',
  label: 'ZEBEDEA',
} as const;

export const now = (): string => '2031-04-05T06:07:08.000Z';
export const context = { by: 'reader-ada', now, mintId: derivedIds('forgetting') };

const open: StudyFile[] = [];
afterAll(() => {
  for (const file of open) file.close();
});

export interface Planted {
  readonly file: StudyFile;
  readonly desk: Desk;
}

/** A desk on the file as it is now. */
export function deskOn(file: StudyFile): Desk {
  const desk = new Desk(file, context);
  desk.load(file.edits());
  return desk;
}

export function made(desk: Desk, ...drafts: readonly (Edit | Draft)[]): void {
  for (const draft of drafts) {
    const result = desk.make(['kind' in draft ? { edit: draft } : draft]);
    if (!result.ok) throw new Error(`${result.code}`);
  }
}

/** The words of one interview, with where each turn stands. */
function interview(seed: number, labels: readonly string[], unique: Record<string, string>) {
  const talk = new Talk(seed);
  let text = '';
  const turns = talk.turns(['INT', ...labels], 4 * topicNames.length).map(([speaker, said]) => {
    const start = text.length + speaker.length + 2;
    const words = `${said} ${unique[speaker] ?? ''}`.trim();
    text += `${speaker}: ${words}\n\n`;
    return { start, end: start + words.length, speaker, startTime: null, endTime: null };
  });
  return { text, turns };
}

/** Someone alone, someone else alone, and the two together in a third transcript. */
export async function plantedStudy(): Promise<Planted> {
  const path = join(temporaryFolder(), 'planted.understory');
  const created = await createStudyFile(path, { studyId: 'planted' });
  if (!created.ok) throw new Error(created.code);
  const file = created.value;
  open.push(file);
  const desk = new Desk(file, context);
  made(
    desk,
    { kind: 'studyStarted', study: 'planted', name: 'Planted' },
    { kind: 'readerAdded', reader: { id: 'reader-ada', name: 'Ada' } },
    {
      kind: 'settingsChanged',
      changes: [
        { key: 'answer', from: null, to: 'quick' },
        { key: 'text.minimumParticipants', from: null, to: 1 },
        { key: 'text.minimumPassages', from: null, to: 1 },
      ],
    },
    {
      kind: 'participantAdded',
      participant: { id: 'person-z', name: planted.name, attributes: {} },
    },
    {
      kind: 'participantDescribed',
      participant: 'person-z',
      from: { name: planted.name, attributes: {} },
      to: { name: planted.name, attributes: { home: planted.attribute } },
    },
    ...['b', 'c'].map((letter): Edit => ({
      kind: 'participantAdded',
      participant: { id: `person-${letter}`, name: `P-${letter}`, attributes: {} },
    })),
  );
  const gather = (id: string, seed: number, who: Record<string, string>): void => {
    const { text, turns } = interview(seed, Object.keys(who), {
      [planted.label]: `I am a ${planted.word}.`,
      B: id === 'other' ? `I know Zebedea  Quillfeather well, the ${id}.` : '',
    });
    const speakers: Speaker[] = [
      { label: 'INT', role: 'interviewer', participant: null },
      ...Object.entries(who).map(([label, participant]): Speaker => ({
        label,
        role: 'participant',
        participant,
      })),
    ];
    const source = { fileName: `${id}.txt`, format: 'text', hash: `hash-of-${id}` };
    made(desk, {
      blobs: [Buffer.from(text, 'utf8')],
      edit: ([blob]) => ({
        kind: 'transcriptGathered',
        transcript: {
          id,
          name: id,
          source,
          text: blob,
          length: text.length,
          details: [],
          turns,
          speakers,
        },
      }),
    });
  };
  gather('alone', 11, { [planted.label]: 'person-z' });
  gather('other', 12, { B: 'person-b' });
  gather('both', 13, { [planted.label]: 'person-z', C: 'person-c' });
  made(desk, { kind: 'transcriptRenamed', transcript: 'alone', from: 'alone', to: planted.name });
  const fitted = await fit(desk, 'from scratch', wordLists, { themes: 3 });
  if (!fitted.ok) throw new Error(fitted.code);
  made(
    desk,
    {
      kind: 'themeAdded',
      theme: {
        id: 'by-hand',
        name: 'Silence of Zebedea Quillfeather',
        origin: 'by hand',
        definition: { ...emptyDefinition, brief: 'As ZEBEDEA QUILLFEATHER said' },
        version: 1,
        pinned: false,
        setAside: false,
        mergedInto: null,
        seeds: [],
        shutOut: [],
      },
    },
    { kind: 'themeRenamed', theme: fitted.value.fit.themes[0]!, from: null, to: 'Kept by name' },
    codingOn(desk, 'coding-1', 'alone', 1),
    codingOn(desk, 'coding-2', 'both', 1),
    codingOn(desk, 'coding-3', 'both', 3),
    codingOn(desk, 'coding-4', 'other', 1),
    {
      kind: 'memoWritten',
      memo: {
        id: 'memo-1',
        subject: { kind: 'transcript', transcript: 'alone' },
        text: planted.memo,
        reader: 'reader-ada',
        at: now(),
      },
    },
    {
      kind: 'memoWritten',
      memo: {
        id: 'memo-2',
        subject: { kind: 'study' },
        text: 'Ring zebedea quillfeather again',
        reader: 'reader-ada',
        at: now(),
      },
    },
    {
      kind: 'reportExported',
      report: {
        what: 'docx',
        fileName: 'Planted excerpts.docx',
        transcripts: ['alone'],
        participants: ['person-z'],
        at: now(),
        reader: 'reader-ada',
      },
    },
  );
  return { file, desk };
}

function codingOn(desk: Desk, id: string, transcript: string, turn: number): Edit {
  const { start, end } = desk.study.transcripts.get(transcript)!.turns[turn]!;
  const coding: Coding = {
    id,
    transcript,
    span: { start, end },
    theme: 'by-hand',
    standing: 'by hand',
    under: {
      reader: 'reader-ada',
      at: now(),
      drawnBy: 'in order',
      seenSuggestion: false,
      fit: desk.study.fit,
    },
    strength: null,
    codebookVersion: 1,
    memo: transcript === 'other' || turn === 3 ? '' : `${planted.memo} in a coding`,
  };
  return { kind: 'codingMade', coding };
}

/** What of these can be found in the file: in its raw bytes, as one or two bytes a letter. */
export function foundIn(path: string, words: readonly string[]): string[] {
  const raw = readFileSync(path);
  const texts = [
    raw.toString('utf8'),
    raw.toString('utf16le'),
    raw.subarray(1).toString('utf16le'),
  ];
  return words.filter((word) =>
    texts.some((text) => text.toLowerCase().includes(word.toLowerCase())),
  );
}

/** The study read from the drive by somebody else. */
export async function readAgain(file: StudyFile): Promise<Desk> {
  const opened = await openStudyFile(file.path, { readOnly: true });
  if (!opened.ok) throw new Error(opened.code);
  open.push(opened.value);
  return deskOn(opened.value);
}
