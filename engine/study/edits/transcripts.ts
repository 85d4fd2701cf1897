import { mapSpan, sameSpan, invertReplacements, type Span } from '../../spans/index.ts';
import type { EditOf } from '../edit.ts';
import { done, refused, type Refusal } from '../refusal.ts';
import type { Memo, MemoId, Study, Transcript } from '../study.ts';
import { sameJson, withEntry, withoutEntry, type Rules } from './rule.ts';

export const transcriptRules: Rules<
  | 'transcriptGathered'
  | 'transcriptRemoved'
  | 'transcriptRenamed'
  | 'speakersAssigned'
  | 'textRevised'
> = {
  transcriptGathered: {
    apply(study, { transcript }) {
      if (transcript.name.trim() === '') return refused('empty name', transcript.source.fileName);
      if (study.transcripts.has(transcript.id)) return refused('already there', transcript.name);
      const fault = nameFault(study, transcript.name) ?? speakerFault(study, transcript);
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
      const fault = nameFault(study, to);
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
      if (!keepsWhatIsLost(study, edit)) return refused('changed since', current.name);
      return done(reviseText(study, current, edit));
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
};

/**
 * The spans that mapping back would not restore, as they stand before the edit: what an undo of it
 * must place by hand.
 */
export function spansLost(
  study: Study,
  edit: Pick<EditOf<'textRevised'>, 'transcript' | 'replacements'>,
): { readonly id: string; readonly span: Span }[] {
  const back = invertReplacements(edit.replacements);
  return spansOn(study, edit.transcript).filter(
    ({ span }) => !sameSpan(mapSpan(mapSpan(span, edit.replacements), back), span),
  );
}

/** An edit that forgot a span could not be undone exactly. */
function keepsWhatIsLost(study: Study, edit: EditOf<'textRevised'>): boolean {
  const kept = new Set(edit.lost.map(({ id }) => id));
  const placed = new Set(edit.placed.map(({ id }) => id));
  return spansLost(study, edit).every(({ id }) => kept.has(id) || placed.has(id));
}

function spansOn(study: Study, transcript: string): { id: string; span: Span }[] {
  const memos = [...study.memos.values()].flatMap(({ id, subject }) =>
    subject.kind === 'passage' && subject.transcript === transcript
      ? [{ id, span: subject.span }]
      : [],
  );
  return [
    ...[...(study.codings.get(transcript)?.values() ?? [])].map(({ id, span }) => ({ id, span })),
    ...[...(study.nones.get(transcript)?.values() ?? [])].map(({ id, span }) => ({ id, span })),
    ...memos,
  ].map(({ id, span: { start, end } }) => ({ id, span: { start, end } }));
}

function reviseText(study: Study, current: Transcript, edit: EditOf<'textRevised'>): Study {
  const placed = new Map(edit.placed.map(({ id, span }) => [id, span]));
  const move = (id: string, span: Span): Span => placed.get(id) ?? mapSpan(span, edit.replacements);
  const moveAll = <Item extends { readonly id: string; readonly span: Span }>(
    items: ReadonlyMap<string, Item> | undefined,
  ): ReadonlyMap<string, Item> =>
    new Map([...(items ?? [])].map(([id, item]) => [id, { ...item, span: move(id, item.span) }]));
  const memos = new Map<MemoId, Memo>();
  for (const [id, memo] of study.memos) {
    const { subject } = memo;
    const here = subject.kind === 'passage' && subject.transcript === current.id;
    memos.set(id, here ? { ...memo, subject: { ...subject, span: move(id, subject.span) } } : memo);
  }
  const moved = withTranscript(study, { ...current, ...edit.to });
  return {
    ...moved,
    memos,
    codings: study.codings.has(current.id)
      ? withEntry(study.codings, current.id, moveAll(study.codings.get(current.id)))
      : study.codings,
    nones: study.nones.has(current.id)
      ? withEntry(study.nones, current.id, moveAll(study.nones.get(current.id)))
      : study.nones,
  };
}

function withTranscript(study: Study, transcript: Transcript): Study {
  return { ...study, transcripts: withEntry(study.transcripts, transcript.id, transcript) };
}

function nameFault(study: Study, name: string): Refusal | null {
  for (const other of study.transcripts.values()) {
    if (other.name === name) return refused('name taken', name);
  }
  return null;
}

function speakerFault(study: Study, { speakers, turns }: Transcript): Refusal | null {
  const labels = new Set(speakers.map(({ label }) => label));
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

function hasDecisions(study: Study, transcript: string): boolean {
  return (
    (study.codings.get(transcript)?.size ?? 0) > 0 || (study.nones.get(transcript)?.size ?? 0) > 0
  );
}
