import { mapSpan, sameSpan, invertReplacements, type Span } from '../../spans/index.ts';
import type { EditOf, TranscriptDescription } from '../edit.ts';
import { done, refused, type Refusal } from '../refusal.ts';
import type { Draw, Identifier, IdentifierId, Memo, MemoId, Study, Transcript } from '../study.ts';
import { sameJson, withEntry, withInner, withoutEntry, type Rules } from './rule.ts';

interface PlacedSpan {
  readonly id: string;
  readonly span: Span;
}

export const transcriptRules: Rules<
  | 'transcriptGathered'
  | 'transcriptRemoved'
  | 'transcriptRenamed'
  | 'speakersAssigned'
  | 'textRevised'
  | 'transcriptDescribed'
> = {
  transcriptGathered: {
    apply(study, { transcript }) {
      if (transcript.name.trim() === '') return refused('empty name', transcript.source.fileName);
      if (study.transcripts.has(transcript.id)) return refused('already there', transcript.name);
      const fault =
        nameFault(study, transcript.name, transcript.id) ??
        turnFault(transcript) ??
        speakerFault(study, transcript);
      if (fault !== null) return fault;
      return done({
        ...study,
        transcripts: withEntry(study.transcripts, transcript.id, transcript),
      });
    },
    inverse: ({ transcript }) => ({ kind: 'transcriptRemoved', transcript }),
  },

  transcriptRemoved: {
    apply(study, { transcript }) {
      const current = study.transcripts.get(transcript.id);
      if (current === undefined) return refused('unknown transcript', transcript.name);
      if (!sameJson(current, transcript)) return refused('changed since', current.name);
      if (hasDecisions(study, transcript.id)) return refused('codings remain', current.name);
      if (hasMemos(study, transcript.id)) return refused('memos remain', current.name);
      if ([...study.fieldNotes.values()].some((note) => note.transcript === transcript.id)) {
        return refused('field notes remain', current.name);
      }
      return done({ ...study, transcripts: withoutEntry(study.transcripts, transcript.id) });
    },
    inverse: ({ transcript }) => ({ kind: 'transcriptGathered', transcript }),
  },

  transcriptRenamed: {
    apply(study, { transcript, from, to }) {
      const current = study.transcripts.get(transcript);
      if (current === undefined) return refused('unknown transcript', from);
      if (to.trim() === '') return refused('empty name', from);
      if (current.name !== from) return refused('changed since', current.name);
      const fault = nameFault(study, to, transcript);
      if (fault !== null) return fault;
      return done(withTranscript(study, { ...current, name: to }));
    },
    inverse: ({ transcript, from, to }) => ({
      kind: 'transcriptRenamed',
      transcript,
      from: to,
      to: from,
    }),
  },

  speakersAssigned: {
    apply(study, { transcript, from, to }) {
      const current = study.transcripts.get(transcript);
      if (current === undefined) return refused('unknown transcript', transcript);
      if (!sameJson(current.speakers, from)) return refused('changed since', current.name);
      const changed = { ...current, speakers: to };
      const fault = speakerFault(study, changed);
      if (fault !== null) return fault;
      return done(withTranscript(study, changed));
    },
    inverse: ({ transcript, from, to }) => ({
      kind: 'speakersAssigned',
      transcript,
      from: to,
      to: from,
    }),
  },

  textRevised: {
    apply(study, edit) {
      const current = study.transcripts.get(edit.transcript);
      if (current === undefined) return refused('unknown transcript', edit.transcript);
      const { text, length, turns } = current;
      if (!sameJson({ text, length, turns }, edit.from)) {
        return refused('changed since', current.name);
      }
      const revised = { ...current, ...edit.to };
      const fault = turnFault(revised) ?? speakerFault(study, revised);
      if (fault !== null) return fault;
      if (!isWithinTexts(edit)) return refused('outside the text', current.name);
      if (!canBeTakenBack(study, edit)) return refused('changed since', current.name);
      return done(reviseText(study, revised, edit));
    },
    inverse: (edit) => ({
      kind: 'textRevised',
      transcript: edit.transcript,
      from: edit.to,
      to: edit.from,
      replacements: invertReplacements(edit.replacements),
      placed: edit.lost,
      lost: edit.placed,
    }),
  },

  transcriptDescribed: {
    apply(study, { transcript, from, to }) {
      const current = study.transcripts.get(transcript);
      if (current === undefined) return refused('unknown transcript', transcript);
      if (!sameJson(descriptionOf(current), from)) return refused('changed since', current.name);
      if (to.fileName.trim() === '') return refused('empty name', current.name);
      const { collected } = to.facts ?? {};
      if (collected !== undefined && !/^\d{4}-\d{2}-\d{2}$/.test(collected)) {
        return refused('unusable value', collected);
      }
      return done(
        withTranscript(study, {
          ...withoutFacts(current),
          source: { ...current.source, fileName: to.fileName },
          details: to.details,
          ...(to.facts === null ? {} : { facts: to.facts }),
        }),
      );
    },
    inverse: ({ transcript, from, to }) => ({
      kind: 'transcriptDescribed',
      transcript,
      from: to,
      to: from,
    }),
  },
};

function withoutFacts({ facts: _facts, ...transcript }: Transcript): Transcript {
  return transcript;
}

/** What is said about a transcript besides its words, as it stands. */
export function descriptionOf({ source, details, facts }: Transcript): TranscriptDescription {
  return { fileName: source.fileName, details, facts: facts ?? null };
}

/**
 * The spans that mapping back would not restore, as they stand before the edit: what an undo of it
 * must place by hand.
 */
export function spansLost(
  study: Study,
  edit: Pick<EditOf<'textRevised'>, 'transcript' | 'replacements' | 'placed'>,
): PlacedSpan[] {
  const back = invertReplacements(edit.replacements);
  const move = mover(edit);
  return spansOn(study, edit.transcript).filter(
    ({ id, span }) => !sameSpan(mapSpan(move(id, span), back), span),
  );
}

/** An edit that forgets a span, or remembers it wrongly, could not be undone exactly. */
function canBeTakenBack(study: Study, edit: EditOf<'textRevised'>): boolean {
  const here = spansOn(study, edit.transcript);
  const spans = new Map(here.map(({ id, span }) => [id, span]));
  const lost = new Map(edit.lost.map(({ id, span }) => [id, span]));
  return (
    edit.placed.every(({ id }) => spans.has(id)) &&
    edit.lost.every(({ id, span }) => {
      const current = spans.get(id);
      return current !== undefined && sameSpan(current, span);
    }) &&
    spansLost(study, edit).every(({ id }) => lost.has(id))
  );
}

/** Whether replacements and placed spans fit the two lengths between which they lead. */
function isWithinTexts({ from, to, replacements, placed }: EditOf<'textRevised'>): boolean {
  let reached = 0;
  let length = from.length;
  for (const { start, end, inserted } of replacements) {
    if (!isSpan({ start, end }, from.length) || start < reached) return false;
    if (!Number.isInteger(inserted) || inserted < 0) return false;
    reached = end;
    length += inserted - (end - start);
  }
  return length === to.length && placed.every(({ span }) => isSpan(span, to.length));
}

function isSpan({ start, end }: Span, length: number): boolean {
  return (
    Number.isInteger(start) && Number.isInteger(end) && 0 <= start && start <= end && end <= length
  );
}

function mover(edit: Pick<EditOf<'textRevised'>, 'replacements' | 'placed'>) {
  const placed = new Map(edit.placed.map(({ id, span }) => [id, span]));
  return (id: string, span: Span): Span => placed.get(id) ?? mapSpan(span, edit.replacements);
}

function spansOn(study: Study, transcript: string): PlacedSpan[] {
  const memos = [...study.memos.values()].flatMap(({ id, subject }) =>
    subject.kind === 'passage' && subject.transcript === transcript
      ? [{ id, span: subject.span }]
      : [],
  );
  return [
    ...[...(study.codings.get(transcript)?.values() ?? [])].map(({ id, span }) => ({ id, span })),
    ...[...(study.nones.get(transcript)?.values() ?? [])].map(({ id, span }) => ({ id, span })),
    ...memos,
    ...[...study.identifiers.values()].flatMap((identifier) =>
      (identifier.places ?? []).flatMap((place, index) =>
        place.transcript === transcript
          ? [{ id: placeId(identifier, index), span: place.span }]
          : [],
      ),
    ),
    ...drawnOn(study, transcript),
  ].map(({ id, span: { start, end } }) => ({ id, span: { start, end } }));
}

/** What an edit of a text calls the place of something that stays. */
function placeId({ id }: Identifier, index: number): string {
  return `${id} ${index}`;
}

/** Drawn passages have no id of their own: they go by their draw and their place in it. */
const drawnId = (draw: Draw, index: number): string => `${draw.id} ${index}`;

function drawnOn(study: Study, transcript: string): PlacedSpan[] {
  return [...study.draws.values()].flatMap((draw) =>
    draw.places.flatMap((place, index) =>
      place.transcript === transcript ? [{ id: drawnId(draw, index), span: place.span }] : [],
    ),
  );
}

function reviseDraws(
  draws: Study['draws'],
  transcript: string,
  move: (id: string, span: Span) => Span,
): Study['draws'] {
  const touched = [...draws.values()].filter(({ places }) =>
    places.some((place) => place.transcript === transcript),
  );
  if (touched.length === 0) return draws;
  const revised = new Map(draws);
  for (const draw of touched) {
    const places = draw.places.map((place, index) =>
      place.transcript === transcript
        ? { ...place, span: move(drawnId(draw, index), place.span) }
        : place,
    );
    revised.set(draw.id, { ...draw, places });
  }
  return revised;
}

function reviseText(study: Study, revised: Transcript, edit: EditOf<'textRevised'>): Study {
  const move = mover(edit);
  const moveAll = <Item extends { readonly id: string; readonly span: Span }>(
    items: ReadonlyMap<string, Item> | undefined,
  ): ReadonlyMap<string, Item> =>
    new Map([...(items ?? [])].map(([id, item]) => [id, { ...item, span: move(id, item.span) }]));
  const memos = new Map<MemoId, Memo>();
  for (const [id, memo] of study.memos) {
    const { subject } = memo;
    const here = subject.kind === 'passage' && subject.transcript === revised.id;
    memos.set(id, here ? { ...memo, subject: { ...subject, span: move(id, subject.span) } } : memo);
  }
  const staysHere = [...study.identifiers.values()].some(({ places }) =>
    places?.some(({ transcript }) => transcript === revised.id),
  );
  return {
    ...withTranscript(study, revised),
    memos,
    identifiers: staysHere ? movedPlaces(study, revised.id, move) : study.identifiers,
    codings: withInner(study.codings, revised.id, moveAll(study.codings.get(revised.id))),
    nones: withInner(study.nones, revised.id, moveAll(study.nones.get(revised.id))),
    draws: reviseDraws(study.draws, revised.id, move),
  };
}

function movedPlaces(
  { identifiers }: Study,
  transcript: string,
  move: ReturnType<typeof mover>,
): ReadonlyMap<IdentifierId, Identifier> {
  return new Map(
    [...identifiers].map(([id, identifier]) => [
      id,
      identifier.places === null
        ? identifier
        : {
            ...identifier,
            places: identifier.places.map((place, index) =>
              place.transcript === transcript
                ? { ...place, span: move(placeId(identifier, index), place.span) }
                : place,
            ),
          },
    ]),
  );
}

function withTranscript(study: Study, transcript: Transcript): Study {
  return { ...study, transcripts: withEntry(study.transcripts, transcript.id, transcript) };
}

function nameFault(study: Study, name: string, except: string): Refusal | null {
  for (const other of study.transcripts.values()) {
    if (other.id !== except && other.name === name) return refused('name taken', name);
  }
  return null;
}

function speakerFault(study: Study, { speakers, turns }: Transcript): Refusal | null {
  const labels = new Set<string | null>();
  for (const { label } of speakers) {
    if (labels.has(label)) return refused('already there', label ?? '');
    labels.add(label);
  }
  for (const { speaker } of turns) {
    if (!labels.has(speaker)) return refused('no speaker', speaker ?? '');
  }
  for (const { label, role, participant } of speakers) {
    if (role !== 'participant') {
      if (participant !== null) return refused('not a participant', label ?? '');
    } else if (participant === null || !study.participants.has(participant)) {
      return refused('unknown participant', participant ?? label ?? '');
    }
  }
  return null;
}

/** Turns are in order, apart, and inside the text. */
function turnFault({ name, turns, length }: Transcript): Refusal | null {
  let reached = 0;
  for (const turn of turns) {
    if (!isSpan(turn, length) || turn.start < reached) return refused('outside the text', name);
    reached = turn.end;
  }
  return null;
}

function hasMemos(study: Study, transcript: string): boolean {
  return [...study.memos.values()].some(
    ({ subject }) =>
      (subject.kind === 'transcript' || subject.kind === 'passage') &&
      subject.transcript === transcript,
  );
}

function hasDecisions(study: Study, transcript: string): boolean {
  return (
    (study.codings.get(transcript)?.size ?? 0) > 0 || (study.nones.get(transcript)?.size ?? 0) > 0
  );
}
