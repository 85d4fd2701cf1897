import type { Edit, Fit, SettingValue, Theme } from '../../engine/study/index.ts';
import { emptyDefinition } from '../../engine/study/index.ts';
import { refitFromStored, type FitDone } from '../../engine/themes/index.ts';
import { Desk } from '../../main/desk.ts';
import { fit, type FitKind, type FitStudyOptions } from '../../main/fitting.ts';
import { gather } from '../../main/gather/gather.ts';
import { derivedIds } from '../../main/ids.ts';
import { BufferedStore } from '../../main/store.ts';
import { wordLists } from '../../main/word-lists.ts';
import { Talk, topicNames } from './commands/material.ts';

/** A study in memory: people who talk about four things, and the settings of a quick, small fit. */
export async function talkingDesk(
  people = 4,
  settings: Readonly<Record<string, SettingValue>> = {},
): Promise<Desk> {
  const talk = new Talk(5);
  const desk = new Desk(new BufferedStore(null), {
    by: 'reader-ada',
    now: () => '2026-02-03T04:05:06.000Z',
    mintId: derivedIds('fitted desk'),
  });
  const files = Array.from({ length: people }, (_, i) => ({
    name: `P${i + 1}.txt`,
    bytes: new TextEncoder().encode(
      talk
        .turns(['INT', `P${i + 1}`], 6 * topicNames.length)
        .map(([speaker, text]) => `${speaker}: ${text}\n\n`)
        .join(''),
    ),
  }));
  const all = { themes: 4, answer: 'quick', ...settings };
  must(
    desk.make([
      { edit: { kind: 'studyStarted', study: 'talk', name: 'Talk' } },
      { edit: { kind: 'readerAdded', reader: { id: 'reader-ada', name: 'Ada' } } },
      {
        edit: {
          kind: 'settingsChanged',
          changes: Object.entries(all).map(([key, to]) => ({ key, from: null, to })),
        },
      },
    ]),
  );
  must(await gather(desk, files, { interviewers: [] }));
  return desk;
}

export async function fitAt(
  desk: Desk,
  kind: FitKind,
  options: FitStudyOptions = {},
): Promise<Fit> {
  return must(await fit(desk, kind, wordLists, { workers: 1, ...options })).fit;
}

export function decide(desk: Desk, ...edits: readonly Edit[]): void {
  must(
    desk.make(
      edits.map((edit) => ({ edit })),
      { group: desk.context.mintId('group') },
    ),
  );
}

export function askedFor(id: string, name: string): Theme {
  return {
    id,
    name,
    origin: 'asked for',
    definition: emptyDefinition,
    version: 1,
    pinned: false,
    setAside: false,
    mergedInto: null,
    seeds: [],
    shutOut: [],
  };
}

/** A decision of Ada's on a passage of the fit on screen. */
export function codingOn(
  desk: Desk,
  passage: number,
  theme: string,
  standing: 'confirmed' | 'rejected' | 'by hand' = 'confirmed',
): Edit {
  const place = desk.fitted(desk.study.fit)!.words.passages[passage];
  return {
    kind: 'codingMade',
    coding: {
      id: desk.context.mintId('coding'),
      transcript: place.transcript,
      span: { start: place.start, end: place.end },
      theme,
      standing,
      under: {
        reader: 'reader-ada',
        at: '2026-02-03T04:05:06.000Z',
        drawnBy: 'in order',
        seenSuggestion: true,
        fit: desk.study.fit,
      },
      strength: 0.5,
      codebookVersion: 1,
      memo: '',
    },
  };
}

/** The hashes of a stored fit, and those of the same fit made again from what is stored. */
export function madeAgain(
  desk: Desk,
  { id }: Fit,
  changes: Partial<Fit> = {},
): { stored: object; again: object } {
  const stored = desk.study.fits.get(id)!;
  const done = refitFromStored(
    desk.studyAt(stored.basis),
    { ...stored, ...changes },
    ({ sequence }) => desk.store.readBlob(sequence),
  ) as FitDone;
  const { words, priors, result } = stored.hashes;
  return { stored: { words, priors, result }, again: done.hashes };
}

function must<Value>(
  result:
    { readonly ok: true; readonly value: Value } | { readonly ok: false; readonly code: string },
): Value {
  if (!result.ok) throw new Error(`refused: ${result.code}`);
  return result.value;
}
