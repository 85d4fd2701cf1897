import { mapSpan } from '../../engine/spans/index.ts';
import {
  apply,
  emptyStudy,
  fold,
  spansLost,
  type Edit,
  type Entry,
  type FieldNoteId,
  type FitId,
  type Refusal,
  type Study,
  type TranscriptId,
} from '../../engine/study/index.ts';
import type { FitRefused } from '../../engine/themes/index.ts';
import { Desk, type DeskContext, type Draft } from '../desk.ts';
import { fit, type FitStudyOptions } from '../fitting.ts';
import type { StudyFile, StudyFileFailure } from '../project/index.ts';
import { BufferedStore } from '../store.ts';
import { wordLists } from '../word-lists.ts';
import { redactTrail, afterRedaction, type Redaction } from './redact.ts';
import { marked, nameFinder, namesIn, type Marking } from './words.ts';

/** One act of erasing. */
export interface Erasure {
  readonly because: 'withdrawal' | 'seal';
  /** The decision itself. */
  readonly decision: Edit;
  /** What is put in the place of words in transcripts that stay. */
  readonly markings: ReadonlyMap<TranscriptId, readonly Marking[]>;
  readonly redaction: Omit<Redaction, 'fits' | 'otherwise'>;
}

export interface EraseOptions {
  /**
   * Fit again, from the fit on screen, before that one is erased: named themes keep their words. Else
   * the study is without a fit where the one on screen held what goes.
   */
  readonly refit: boolean;
  readonly fit?: Pick<FitStudyOptions, 'signal' | 'onProgress' | 'workers'>;
}

export type Erased =
  | {
      readonly ok: true;
      readonly value: {
        /** Fits that were erased. */
        readonly fits: number;
        readonly refitted: boolean;
        /** Records that lost their content. */
        readonly records: number;
      };
    }
  | Refusal
  | FitRefused
  | StudyFileFailure
  /** What is left would not be a study; nothing was changed. */
  | { readonly ok: false; readonly code: 'stopped' | 'cannot be taken apart' };

/**
 * Erases from a study file, in one act: the decision, new wordings without the words that go, a re-fit
 * where asked for, and a seal; all content that this leaves without use is taken out of the file. All
 * of it is tried first, and nothing is written where any of it is refused. Whoever has a desk on the
 * file must load it anew afterwards.
 */
export async function erase(
  file: StudyFile,
  context: DeskContext,
  { because, decision, markings, redaction }: Erasure,
  options: EraseOptions,
): Promise<Erased> {
  const store = new BufferedStore(file);
  const desk = new Desk(store, context);
  desk.load(file.edits());
  const group = context.mintId('group');
  // Texts are read before the decision takes their transcripts away.
  const texts = new Map([...markings.keys()].map((id) => [id, desk.text(id)]));
  const decided = desk.make([{ edit: decision }], { group });
  if (!decided.ok) return decided;
  for (const [id, own] of markings) {
    if (own.length === 0) continue;
    const made = desk.make([revision(desk.study, id, texts.get(id) ?? '', own)], { group });
    if (!made.ok) return made;
  }
  const notes = rewordedNotes(desk, redaction);
  for (const draft of notes.drafts) {
    const made = desk.make([draft], { group });
    if (!made.ok) return made;
  }

  const stale = fitsOfOtherWords([...desk.entries], desk.study);
  const onScreen = desk.study.fit;
  let refitted = false;
  if (options.refit && onScreen !== null && stale.has(onScreen)) {
    const made = await fit(desk, 're-fit', wordLists, { ...options.fit, discardStopped: true });
    if (!made.ok) {
      if (made.code === 'no fit to start from' || made.code === 'changed while fitting') {
        throw new Error(`erase: ${made.code}`);
      }
      return made.code === 'stopped' ? { ok: false, code: 'stopped' } : made;
    }
    refitted = true;
  }
  const gone = [...stale].filter((id) => desk.study.fits.has(id));
  // Also where there are none: it closes the trail behind the new wordings and the re-fit.
  const closed = desk.make([{ edit: { kind: 'fitsForgotten', fits: gone } }], { group });
  if (!closed.ok) return closed;

  const entries = [...desk.entries];
  const redacted = redactTrail(entries, {
    ...redaction,
    fits: stale,
    otherwise: new Set([...markings.keys(), ...notes.ids]),
  });
  const after = fold(afterRedaction(entries, redacted));
  if (!after.ok) return { ok: false, code: 'cannot be taken apart' };
  const first = file.nextSequence;
  const used = blobsIn({ ...after.value, takenIn: [] });
  const removed = [
    ...file.records
      .filter(({ kind, removed: already, sequence }) => {
        return kind === 'blob' && !already && !used.has(sequence);
      })
      .map(({ sequence }) => sequence),
    ...[...redacted.keys()].filter((sequence) => sequence < first),
  ];
  const instead = new Map(
    [...redacted].flatMap(([sequence, entry]) =>
      sequence < first && entry !== null ? [[sequence, stored(entry)] as const] : [],
    ),
  );
  const written = await file.erase(
    store.kept.map(({ sequence, blobs, edit }) => {
      const reworded = redacted.get(sequence);
      return { blobs, edit: () => (reworded ? stored(reworded) : edit) };
    }),
    { because, at: context.now(), by: context.by, gone: removed, instead },
  );
  if (!written.ok) return written;
  return { ok: true, value: { fits: gone.length, refitted, records: removed.length } };
}

function stored({ sequence: _sequence, ...entry }: Entry): Omit<Entry, 'sequence'> {
  return entry;
}

/** A new wording of a transcript, with every span that is left moved along. */
function revision(
  study: Study,
  id: TranscriptId,
  text: string,
  markings: readonly Marking[],
): Draft {
  const transcript = study.transcripts.get(id);
  if (transcript === undefined) throw new Error(`revision: ${id} is no transcript of the study`);
  const { length, turns } = transcript;
  const replacements = markings.map(({ start, end, inserted }) => ({ start, end, inserted }));
  const to = marked(text, markings);
  const lost = spansLost(study, { transcript: id, replacements, placed: [] });
  return {
    blobs: [Buffer.from(to, 'utf8')],
    edit: ([blob]) => ({
      kind: 'textRevised',
      transcript: id,
      from: { text: transcript.text, length, turns },
      to: {
        text: blob,
        length: to.length,
        turns: turns.map((turn) => mapSpan(turn, replacements)),
      },
      replacements,
      placed: [],
      lost,
    }),
  };
}

/**
 * Field notes that say one of the names, kept anew without it under the ids that they had: no edit
 * gives a note other words, since nobody else does.
 */
function rewordedNotes(
  desk: Desk,
  { names }: Pick<Redaction, 'names'>,
): { readonly ids: readonly FieldNoteId[]; readonly drafts: readonly Draft[] } {
  const finder = nameFinder(names);
  if (finder === null) return { ids: [], drafts: [] };
  const found = [...desk.study.fieldNotes.values()].flatMap((note) => {
    const text = desk.noteText(note.id);
    const own = namesIn(text, finder);
    return own.length === 0 ? [] : [{ note, text: marked(text, own) }];
  });
  return {
    ids: found.map(({ note }) => note.id),
    drafts: found.flatMap(({ note, text }): Draft[] => [
      { edit: { kind: 'fieldNoteLetGo', note } },
      {
        blobs: [Buffer.from(text, 'utf8')],
        edit: ([blob]) => ({
          kind: 'fieldNoteKept',
          note: { ...note, text: blob, length: text.length },
        }),
      },
    ]),
  };
}

/** Every fit ever made whose words came from a wording, or a transcript, that is no more. */
export function fitsOfOtherWords(entries: readonly Entry[], now: Study): ReadonlySet<FitId> {
  const fits = entries
    .flatMap(({ edit }) => (edit.kind === 'modelFitted' ? [edit.fit] : []))
    .sort((a, b) => a.basis - b.basis);
  const others = new Set<FitId>();
  let then = emptyStudy;
  let next = 0;
  for (const { id, basis } of fits) {
    for (; next < entries.length && entries[next].sequence <= basis; next++) {
      const applied = apply(then, entries[next]);
      if (!applied.ok) throw new Error(`fitsOfOtherWords: ${applied.code}`);
      then = applied.value;
    }
    for (const { id: transcript, text } of then.transcripts.values()) {
      if (now.transcripts.get(transcript)?.text.sequence !== text.sequence) others.add(id);
    }
  }
  return others;
}

/** The numbers of all blobs that a study refers to, wherever in it. */
function blobsIn(value: unknown, found = new Set<number>()): ReadonlySet<number> {
  if (typeof value !== 'object' || value === null) return found;
  const { sequence, bytes } = value as { readonly sequence?: unknown; readonly bytes?: unknown };
  if (typeof sequence === 'number' && typeof bytes === 'number') found.add(sequence);
  const inner =
    value instanceof Map || value instanceof Set ? value.values() : Object.values(value);
  for (const each of inner) blobsIn(each, found);
  return found;
}
