import {
  emptyDefinition,
  emptyStudy,
  type Coding,
  type Draw,
  type Edit,
  type Fit,
  type Memo,
  type MemoSubject,
  type None,
  type Participant,
  type Reader,
  type Study,
  type Theme,
  type Transcript,
} from '../../../engine/study/index.ts';
import type { Span } from '../../../engine/spans/index.ts';
import { applied, nextEntry } from './law.ts';

/** The study after some more edits, all of which have to be accepted. */
export function after(study: Study, ...edits: readonly Edit[]): Study {
  return edits.reduce((current, edit) => applied(current, nextEntry(current, edit)), study);
}

/** A copy of a map with one entry put in, replaced, or (undefined) taken out. */
export function having<Value>(
  map: ReadonlyMap<string, Value>,
  key: string,
  value: Value | undefined,
): Map<string, Value> {
  const copy = new Map(map);
  if (value === undefined) copy.delete(key);
  else copy.set(key, value);
  return copy;
}

export function span(start: number, end: number): Span {
  return { start, end };
}

export const ada: Reader = { id: 'reader-ada', name: 'Ada' };
export const maren: Participant = {
  id: 'maren',
  name: 'Maren',
  attributes: { village: 'Skarvoy', boats: '2' },
};
export const tove: Participant = { id: 'tove', name: 'Tove', attributes: {} };

function turn(start: number, end: number, speaker: string | null) {
  return { start, end, speaker, startTime: null, endTime: null };
}

/** 60 code units: a question, an answer, a question, an answer. */
export const harbour: Transcript = {
  id: 'harbour',
  name: 'Harbour',
  source: { fileName: 'harbour.txt', format: 'text', hash: 'aa11' },
  text: { sequence: 2, bytes: 64 },
  length: 60,
  details: [{ name: 'Date', value: '3 May' }],
  turns: [turn(0, 10, 'INT'), turn(11, 30, 'MAREN'), turn(31, 40, 'INT'), turn(41, 60, 'MAREN')],
  speakers: [
    { label: 'INT', role: 'interviewer', participant: null },
    { label: 'MAREN', role: 'participant', participant: 'maren' },
  ],
};

export const mill: Transcript = {
  id: 'mill',
  name: 'Mill',
  source: { fileName: 'mill.txt', format: 'text', hash: 'bb22' },
  text: { sequence: 5, bytes: 40 },
  length: 40,
  details: [],
  turns: [turn(0, 40, null)],
  speakers: [{ label: null, role: 'participant', participant: 'maren' }],
};

export function theme(id: string, changes: Partial<Theme> = {}): Theme {
  return {
    id,
    name: id,
    origin: 'asked for',
    definition: emptyDefinition,
    version: 1,
    pinned: false,
    setAside: false,
    mergedInto: null,
    seeds: [],
    shutOut: [],
    ...changes,
  };
}

export const sea = theme('sea', { seeds: ['boat', 'tide'], shutOut: ['flour'] });
export const work = theme('work');
export const silence = theme('silence', { origin: 'by hand' });
export const candidate = theme('candidate', { name: null, origin: 'fitted' });

export function fit(id: string, changes: Partial<Fit> = {}): Fit {
  return {
    id,
    name: null,
    themes: ['sea', 'work', 'candidate'],
    basis: 20,
    start: { kind: 'fresh', seed: 1, from: null },
    method: 1,
    preparation: 1,
    settings: { 'model.themes': 3, 'text.stemming': false },
    passages: 4,
    vocabulary: 9,
    countedWords: 31,
    sweeps: 2,
    stopReason: 'converged',
    bound: -120.5,
    boundTerms: { words: -130, themes: 9.5 },
    trace: [
      { sweep: 1, bound: null, likelihood: -140.25, change: 0.5 },
      { sweep: 2, bound: -120.5, likelihood: null, change: 0.001 },
    ],
    hashes: { words: 'cc', priors: 'dd', result: 'ee', previousResult: null },
    words: { sequence: 7, bytes: 90 },
    result: { sequence: 8, bytes: 50 },
    ...changes,
  };
}

export const firstFit = fit('first-fit');

export function coding(id: string, changes: Partial<Coding> = {}): Coding {
  return {
    id,
    transcript: 'harbour',
    span: span(11, 30),
    theme: 'sea',
    standing: 'confirmed',
    under: {
      reader: 'reader-ada',
      at: '2031-04-05T06:07:08.000Z',
      drawnBy: 'in order',
      seenSuggestion: true,
      fit: 'first-fit',
    },
    strength: 0.75,
    codebookVersion: 1,
    memo: '',
    ...changes,
  };
}

export function none(id: string, changes: Partial<None> = {}): None {
  const { transcript, span, under } = coding(id);
  return { id, transcript, span, under, ...changes };
}

export function memo(id: string, subject: MemoSubject = { kind: 'study' }): Memo {
  return { id, subject, text: 'why', reader: 'reader-ada', at: '2031-04-05T06:07:08.000Z' };
}

export function draw(id: string, changes: Partial<Draw> = {}): Draw {
  return {
    id,
    kind: 'random draw',
    name: `random draw ${id}`,
    seed: 7,
    count: 2,
    unreadOnly: true,
    places: [
      { transcript: 'harbour', span: span(41, 60) },
      { transcript: 'mill', span: span(0, 12) },
    ],
    reader: 'reader-ada',
    at: '2031-04-05T06:07:08.000Z',
    scored: null,
    ...changes,
  };
}

export const started = after(emptyStudy, {
  kind: 'studyStarted',
  study: 'island',
  name: 'The island',
});

/** A study in which something of every sort stands, all of it removable but what is referred to. */
export const island = after(
  started,
  { kind: 'readerAdded', reader: ada },
  { kind: 'participantAdded', participant: maren },
  { kind: 'participantAdded', participant: tove },
  { kind: 'transcriptGathered', transcript: harbour },
  { kind: 'transcriptGathered', transcript: mill },
  {
    kind: 'settingsChanged',
    changes: [{ key: 'text.stemming', from: null, to: true }],
  },
  { kind: 'themeAdded', theme: sea },
  { kind: 'themeAdded', theme: silence },
  { kind: 'themeAdded', theme: work },
  { kind: 'modelFitted', fit: firstFit, found: [candidate], before: null },
  { kind: 'codingMade', coding: coding('on-harbour') },
  {
    kind: 'codingMade',
    coding: coding('on-mill', { transcript: 'mill', span: span(0, 12), theme: 'work' }),
  },
  { kind: 'noneMarked', none: none('none-on-harbour', { span: span(41, 60) }) },
  { kind: 'memoWritten', memo: memo('on-study') },
  {
    kind: 'memoWritten',
    memo: memo('on-passage', { kind: 'passage', transcript: 'harbour', span: span(20, 36) }),
  },
);
