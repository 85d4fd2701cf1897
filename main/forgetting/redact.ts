import { overlap, type Detail, type Span, type Turn } from '../../engine/spans/index.ts';
import {
  apply,
  emptyStudy,
  type Edit,
  type EditKind,
  type Entry,
  type FieldNote,
  type FitId,
  type Participant,
  type ParticipantId,
  type Speaker,
  type Study,
  type TranscriptId,
  type TranscriptPlace,
} from '../../engine/study/index.ts';
import {
  nameFinder,
  nameKeyOf,
  searchable,
  withdrawnMark,
  type GoneName,
  type NameFinder,
} from './words.ts';

/** What has to go from the trail. */
export interface Redaction {
  /** A person whose name, attributes and decisions on their turns go; null for nobody. */
  readonly person: ParticipantId | null;
  /** Transcripts whose every edit goes. */
  readonly transcripts: ReadonlySet<TranscriptId>;
  /** In these, labels of the person's turns; null for turns without a label. */
  readonly shared: ReadonlyMap<TranscriptId, ReadonlySet<string | null>>;
  /** Whose evidence goes, since it speaks of people. */
  readonly fits: ReadonlySet<FitId>;
  /** Words that go from everything that people typed. */
  readonly names: readonly GoneName[];
  /** Of these the originals behind stand-ins go. */
  readonly sealed: ReadonlySet<TranscriptId>;
  /** Transcripts and field notes that get other words: their files' hashes would confirm a guess. */
  readonly otherwise: ReadonlySet<string>;
  /** Originals that only the person said, as `nameKeyOf` has them. */
  readonly forms: ReadonlySet<string>;
}

export const nothingRedacted: Redaction = {
  person: null,
  transcripts: new Set(),
  shared: new Map(),
  fits: new Set(),
  names: [],
  sealed: new Set(),
  otherwise: new Set(),
  forms: new Set(),
};

/** What stands for an entry from now on; null for nothing. Entries that stay are not in the map. */
export type Redacted = ReadonlyMap<number, Entry | null>;

/**
 * The trail without what has to go. Entries keep their numbers, and what is left still folds: all that
 * was decided on a thing goes together with the thing, or is reworded in every place alike.
 */
export function redactTrail(entries: readonly Entry[], redaction: Redaction): Redacted {
  const finder = nameFinder(redaction.names);
  const decidedOnThem = idsOnSharedTurns(entries, redaction);
  const changed = new Map<number, Entry | null>();
  for (const entry of entries) {
    if (goes(entry.edit, redaction, decidedOnThem)) {
      changed.set(entry.sequence, null);
      continue;
    }
    let edit = withoutPerson(entry.edit, redaction);
    edit = withoutOriginals(edit, redaction);
    edit = withoutHash(edit, redaction);
    if (finder !== null) edit = reworded(edit, finder);
    if (JSON.stringify(edit) !== JSON.stringify(entry.edit)) {
      changed.set(entry.sequence, { ...entry, edit });
    }
  }
  return changed;
}

/** The trail as it reads afterwards. */
export function afterRedaction(entries: readonly Entry[], redacted: Redacted): Entry[] {
  return entries.flatMap((entry) => {
    const instead = redacted.get(entry.sequence);
    return instead === undefined ? [entry] : instead === null ? [] : [instead];
  });
}

/** Decided for every kind of edit: a new one is a fault of the types until somebody decides. */
function goes(edit: Edit, { transcripts, fits }: Redaction, decided: ReadonlySet<string>): boolean {
  switch (edit.kind) {
    case 'transcriptGathered':
    case 'transcriptRemoved':
      return transcripts.has(edit.transcript.id);
    case 'codingMade':
    case 'codingRemoved':
      return transcripts.has(edit.coding.transcript) || decided.has(edit.coding.id);
    case 'codingRevised':
    case 'codingLookedAtAgain':
      return transcripts.has(edit.transcript) || decided.has(edit.coding);
    case 'noneMarked':
    case 'noneCleared':
      return transcripts.has(edit.none.transcript) || decided.has(edit.none.id);
    case 'memoWritten':
    case 'memoErased': {
      const { subject, id } = edit.memo;
      return decided.has(id) || ('transcript' in subject && transcripts.has(subject.transcript));
    }
    case 'memoRevised':
      return decided.has(edit.memo);
    case 'fieldNoteKept':
    case 'fieldNoteLetGo':
      return decided.has(edit.note.id);
    case 'fieldNoteDescribed':
      return decided.has(edit.note);
    case 'evidenceGathered':
      return fits.has(edit.fit);
    case 'transcriptRenamed':
    case 'transcriptDescribed':
    case 'speakersAssigned':
    case 'textRevised':
    case 'turnsTagged':
      return transcripts.has(edit.transcript);
    case 'studyStarted':
    case 'studyRenamed':
    case 'settingsChanged':
    case 'readerAdded':
    case 'readerRemoved':
    case 'guideRevised':
    // What is left of these is in withoutPerson and withoutOriginals.
    case 'identifierSettled':
    case 'participantAdded':
    case 'participantRemoved':
    case 'participantDescribed':
    case 'drawMade':
    case 'drawRemoved':
    case 'drawScored':
    case 'themeAdded':
    case 'themeRemoved':
    case 'themeRenamed':
    case 'themeDefined':
    case 'themePinned':
    case 'themeUnpinned':
    case 'themeSetAside':
    case 'themeBroughtBack':
    case 'themesMerged':
    case 'themesUnmerged':
    case 'themesOrdered':
    case 'headingAdded':
    case 'headingRemoved':
    case 'headingRenamed':
    case 'themePutUnder':
    case 'wordSeeded':
    case 'wordUnseeded':
    case 'wordShutOut':
    case 'wordLetIn':
    // Their words and results are blobs, and go as such.
    case 'modelFitted':
    case 'fitRemoved':
    case 'fitChosen':
    case 'fitRenamed':
    // They say that something went, or where words went, in ids.
    case 'participantWithdrawn':
    case 'originalsSealed':
    case 'fitsForgotten':
    case 'copyTakenIn':
    case 'copyLetGo':
    case 'reportExported':
      return false;
  }
}

/**
 * Codings, nones and memos that ever lay on the person's turns of a shared transcript, and memos and
 * field notes on transcripts that go: later edits name these by their ids alone.
 */
function idsOnSharedTurns(
  entries: readonly Entry[],
  { shared, transcripts }: Redaction,
): ReadonlySet<string> {
  const ids = new Set<string>();
  let study: Study = emptyStudy;
  const look = (transcript: TranscriptId, span: Span, id: string): void => {
    const labels = shared.get(transcript);
    if (labels === undefined) return;
    const turns = study.transcripts.get(transcript)?.turns ?? [];
    if (turns.some((turn) => labels.has(turn.speaker) && overlap(turn, span) > 0)) ids.add(id);
  };
  for (const entry of entries) {
    const { edit } = entry;
    const next = apply(study, entry);
    if (!next.ok) throw new Error(`redactTrail: entry ${entry.sequence}: ${next.code}`);
    study = next.value;
    if (edit.kind === 'codingMade') {
      look(edit.coding.transcript, edit.coding.span, edit.coding.id);
    } else if (edit.kind === 'codingRevised') {
      look(edit.transcript, edit.to.span, edit.coding);
    } else if (edit.kind === 'noneMarked') {
      look(edit.none.transcript, edit.none.span, edit.none.id);
    } else if (edit.kind === 'memoWritten') {
      const { subject, id } = edit.memo;
      if (subject.kind === 'passage') look(subject.transcript, subject.span, id);
      if ('transcript' in subject && transcripts.has(subject.transcript)) ids.add(id);
    } else if (edit.kind === 'fieldNoteKept') {
      if (transcripts.has(edit.note.transcript ?? '')) ids.add(edit.note.id);
    } else if (edit.kind === 'fieldNoteDescribed') {
      if (transcripts.has(edit.to.transcript ?? '')) ids.add(edit.note);
      else ids.delete(edit.note);
    }
  }
  return ids;
}

function withoutPerson(edit: Edit, { person, shared, transcripts, forms }: Redaction): Edit {
  if (person === null) return edit;
  switch (edit.kind) {
    case 'participantAdded':
    case 'participantRemoved':
      return edit.participant.id === person
        ? { ...edit, participant: { id: person, ...nobody(person) } }
        : edit;
    case 'participantDescribed':
      return edit.participant === person
        ? { ...edit, from: nobody(person), to: nobody(person) }
        : edit;
    case 'transcriptGathered':
    case 'transcriptRemoved': {
      const labels = shared.get(edit.transcript.id);
      if (labels === undefined) return edit;
      const { turns, speakers } = edit.transcript;
      return {
        ...edit,
        transcript: {
          ...edit.transcript,
          turns: unnamedTurns(turns, labels),
          speakers: unnamedSpeakers(speakers, labels),
          details: unnamedDetails(edit.transcript.details, labels),
          // A hash of the file would confirm a guess at it.
          source: { ...edit.transcript.source, hash: '' },
        },
      };
    }
    case 'transcriptDescribed': {
      const labels = shared.get(edit.transcript);
      if (labels === undefined) return edit;
      return {
        ...edit,
        from: { ...edit.from, details: unnamedDetails(edit.from.details, labels) },
        to: { ...edit.to, details: unnamedDetails(edit.to.details, labels) },
      };
    }
    case 'speakersAssigned': {
      const labels = shared.get(edit.transcript);
      if (labels === undefined) return edit;
      return {
        ...edit,
        from: unnamedSpeakers(edit.from, labels),
        to: unnamedSpeakers(edit.to, labels),
      };
    }
    case 'textRevised': {
      const labels = shared.get(edit.transcript);
      if (labels === undefined) return edit;
      return {
        ...edit,
        from: { ...edit.from, turns: unnamedTurns(edit.from.turns, labels) },
        to: { ...edit.to, turns: unnamedTurns(edit.to.turns, labels) },
      };
    }
    case 'identifierSettled': {
      const kept = (identifier: typeof edit.from): typeof edit.from =>
        identifier === null
          ? null
          : {
              ...identifier,
              forms: identifier.forms.filter((form) => !forms.has(nameKeyOf(form))),
              putIn: identifier.putIn.filter((id) => !transcripts.has(id)),
              places: identifier.places?.map((place) => emptied(place, transcripts)) ?? null,
            };
      return { ...edit, from: kept(edit.from), to: kept(edit.to) };
    }
    // A note that was tied to another transcript since, or to none, stays.
    case 'fieldNoteKept':
    case 'fieldNoteLetGo':
      return { ...edit, note: untied(edit.note, transcripts) };
    case 'fieldNoteDescribed':
      return {
        ...edit,
        from: untied(edit.from, transcripts),
        to: untied(edit.to, transcripts),
      };
    case 'drawMade':
    case 'drawRemoved': {
      const places = edit.draw.places.map((place) => emptied(place, transcripts));
      return { ...edit, draw: { ...edit.draw, places } };
    }
    default:
      return edit;
  }
}

/**
 * A place in a transcript that went says nothing but that it was one. Places keep their order, by which
 * edits of texts name them; new wordings of a transcript that went move nothing any more, so where it
 * stood has to be the same in all edits.
 */
function emptied<Place extends TranscriptPlace>(
  place: Place,
  transcripts: ReadonlySet<TranscriptId>,
): Place {
  return transcripts.has(place.transcript) ? { ...place, span: { start: 0, end: 1 } } : place;
}

function untied<Note extends Pick<FieldNote, 'transcript'>>(
  note: Note,
  transcripts: ReadonlySet<TranscriptId>,
): Note {
  return transcripts.has(note.transcript ?? '') ? { ...note, transcript: null } : note;
}

function nobody(id: ParticipantId): Omit<Participant, 'id'> {
  // Names are unique, so two people who withdrew are told apart by their ids.
  return { name: `withdrawn ${id}`, attributes: {} };
}

/** Lines before the first turn call people as their turns do. */
function unnamedDetails(
  details: readonly Detail[],
  labels: ReadonlySet<string | null>,
): readonly Detail[] {
  const called = searchable([...labels].filter((label) => label !== null));
  const finder = nameFinder(called.map((name) => ({ name, mark: withdrawnMark })));
  return finder === null ? details : reworded(details, finder);
}

function unnamedTurns(turns: readonly Turn[], labels: ReadonlySet<string | null>): readonly Turn[] {
  return turns.map((turn) =>
    turn.speaker !== null && labels.has(turn.speaker)
      ? { ...turn, speaker: unnamed(turn.speaker, labels) }
      : turn,
  );
}

function unnamedSpeakers(
  speakers: readonly Speaker[],
  labels: ReadonlySet<string | null>,
): readonly Speaker[] {
  return speakers.map((speaker) =>
    speaker.label !== null && labels.has(speaker.label)
      ? { ...speaker, label: unnamed(speaker.label, labels) }
      : speaker,
  );
}

/** Labels of one transcript stay apart. */
function unnamed(label: string, labels: ReadonlySet<string | null>): string {
  const place = [...labels].filter((one) => one !== null).indexOf(label);
  return place <= 0 ? withdrawnMark : `${withdrawnMark} ${place + 1}`;
}

/**
 * What a person decided about a name stays, and what stands in its place; the name goes. So does the
 * hash of a file, which would confirm a guess at it.
 */
function withoutOriginals(edit: Edit, { sealed }: Redaction): Edit {
  if (sealed.size === 0) return edit;
  if (edit.kind === 'transcriptGathered' || edit.kind === 'transcriptRemoved') {
    const { transcript } = edit;
    return sealed.has(transcript.id)
      ? { ...edit, transcript: { ...transcript, source: { ...transcript.source, hash: '' } } }
      : edit;
  }
  if (edit.kind !== 'identifierSettled') return edit;
  const without = (identifier: typeof edit.from): typeof edit.from =>
    identifier === null || identifier.replacement === null
      ? identifier
      : { ...identifier, forms: [] };
  return { ...edit, from: without(edit.from), to: without(edit.to) };
}

/** Of what got other words, the hash of the file goes. */
function withoutHash(edit: Edit, { otherwise }: Redaction): Edit {
  const unhashed = <Kept extends { readonly id: string; readonly source: FieldNote['source'] }>(
    kept: Kept,
  ): Kept => (otherwise.has(kept.id) ? { ...kept, source: { ...kept.source, hash: '' } } : kept);
  switch (edit.kind) {
    case 'transcriptGathered':
    case 'transcriptRemoved':
      return { ...edit, transcript: unhashed(edit.transcript) };
    case 'fieldNoteKept':
    case 'fieldNoteLetGo':
      return { ...edit, note: unhashed(edit.note) };
    default:
      return edit;
  }
}

/** Edits that name things by ids and codes alone: a name that looks like one is left there. */
const idsAlone: ReadonlySet<string> = new Set<EditKind>([
  ...(['turnsTagged', 'themesMerged', 'themesUnmerged', 'themesOrdered', 'themePutUnder'] as const),
  ...(['themePinned', 'themeUnpinned', 'themeSetAside', 'themeBroughtBack', 'fitChosen'] as const),
  ...(['codingLookedAtAgain', 'drawScored', 'participantWithdrawn', 'originalsSealed'] as const),
  ...(['fitsForgotten', 'copyTakenIn', 'copyLetGo'] as const),
]);

/** Keys whose strings people typed, or files brought along; ids and codes stand elsewhere. */
const typed: ReadonlySet<string> = new Set([
  ...['name', 'from', 'to', 'label', 'speaker', 'code', 'brief', 'full', 'whenToUse'],
  ...['whenNotToUse', 'examples', 'text', 'memo', 'word', 'seeds', 'shutOut', 'fileName'],
  ...[
    'value',
    'forms',
    'replacement',
    'interviewer',
    'interviewedBy',
    'drawnBy',
    'question',
    'wording',
  ],
]);

/** The same with names gone from everything that was typed, keys of attributes included. */
export function reworded<Value>(value: Value, finder: NameFinder, key = '', inside = false): Value {
  const put = (text: string): string => text.replaceAll(finder.pattern, finder.markOf);
  if (typeof value === 'string') return (inside || typed.has(key) ? put(value) : value) as Value;
  if (Array.isArray(value)) {
    return value.map((each: unknown) => reworded(each, finder, key, inside)) as Value;
  }
  if (typeof value !== 'object' || value === null) return value;
  if ('kind' in value && typeof value.kind === 'string' && idsAlone.has(value.kind)) return value;
  const attributes = inside || key === 'attributes';
  // Values of settings are lists of words, too; their keys are codes.
  const settings = key === 'settings';
  return Object.fromEntries(
    Object.entries(value).map(([inner, each]) => [
      attributes ? put(inner) : inner,
      reworded(each as unknown, finder, settings ? 'to' : inner, attributes),
    ]),
  ) as Value;
}
