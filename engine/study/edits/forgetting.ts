import { overlap, type Span } from '../../spans/index.ts';
import { done, refused } from '../refusal.ts';
import type { ParticipantId, Study, Transcript } from '../study.ts';
import { withEntry, withInner, withoutEntry, type Rules } from './rule.ts';

/**
 * Edits that close the trail behind them: what they erase cannot come back, so nothing before them can
 * be undone. The records that held it are removed from the file in the same act (main/forgetting), and
 * these rules have to fold with or without them.
 */
export const forgettingRules: Rules<'participantWithdrawn' | 'originalsSealed' | 'fitsForgotten'> =
  {
    participantWithdrawn: {
      closes: true,
      apply(study, { participant, transcripts, shared }) {
        if (!study.participants.has(participant)) {
          return refused('unknown participant', participant);
        }
        const whole = transcripts.reduce(withoutTranscript, study);
        const left = [...whole.transcripts.values()].reduce(
          (current, transcript) => withoutPerson(current, transcript, participant),
          whole,
        );
        return done({
          ...left,
          participants: withoutEntry(left.participants, participant),
          withdrawn: withEntry(left.withdrawn, participant, { transcripts, shared }),
        });
      },
      inverse: () => null,
    },

    originalsSealed: {
      closes: true,
      apply(study, { transcripts }) {
        for (const id of transcripts) {
          if (!study.transcripts.has(id)) return refused('unknown transcript', id);
        }
        return done({ ...study, sealed: new Set([...study.sealed, ...transcripts]) });
      },
      inverse: () => null,
    },

    fitsForgotten: {
      closes: true,
      apply(study, { fits: gone }) {
        const fits = new Map(study.fits);
        for (const id of gone) {
          if (!fits.delete(id)) return refused('unknown fit', id);
        }
        return done({
          ...study,
          fits,
          fit: study.fit !== null && gone.includes(study.fit) ? null : study.fit,
          absentFits: new Set([...study.absentFits, ...gone]),
        });
      },
      inverse: () => null,
    },
  };

/** A transcript goes with all that was decided on it. Absent where its records went already. */
function withoutTranscript(study: Study, id: string): Study {
  if (!study.transcripts.has(id)) return study;
  return {
    ...study,
    transcripts: withoutEntry(study.transcripts, id),
    codings: withoutEntry(study.codings, id),
    nones: withoutEntry(study.nones, id),
    fieldNotes: new Map([...study.fieldNotes].filter(([, { transcript }]) => transcript !== id)),
    memos: new Map(
      [...study.memos].filter(
        ([, { subject }]) =>
          (subject.kind !== 'transcript' && subject.kind !== 'passage') ||
          subject.transcript !== id,
      ),
    ),
  };
}

/**
 * In a transcript that others speak in, too, the person's turns stay as places without words: whose
 * they were is gone, and nothing is modelled there. What was decided on them goes.
 */
function withoutPerson(study: Study, transcript: Transcript, participant: ParticipantId): Study {
  if (!transcript.speakers.some((speaker) => speaker.participant === participant)) return study;
  const theirs = turnsOf(transcript, participant);
  const isTheirs = (span: Span): boolean => theirs.some((turn) => overlap(span, turn) > 0);
  const { id } = transcript;
  const keep = <Item extends { readonly span: Span }>(
    items: ReadonlyMap<string, Item> | undefined,
  ): ReadonlyMap<string, Item> =>
    new Map([...(items ?? [])].filter(([, { span }]) => !isTheirs(span)));
  return {
    ...study,
    transcripts: withEntry(study.transcripts, id, {
      ...transcript,
      speakers: transcript.speakers.map((speaker) =>
        speaker.participant === participant
          ? { ...speaker, role: 'other' as const, participant: null }
          : speaker,
      ),
    }),
    codings: withInner(study.codings, id, keep(study.codings.get(id))),
    nones: withInner(study.nones, id, keep(study.nones.get(id))),
    memos: new Map(
      [...study.memos].filter(
        ([, { subject }]) =>
          subject.kind !== 'passage' || subject.transcript !== id || !isTheirs(subject.span),
      ),
    ),
  };
}

/** The turns of one person in a transcript. */
export function turnsOf(
  { turns, speakers }: Pick<Transcript, 'turns' | 'speakers'>,
  participant: ParticipantId,
): Transcript['turns'] {
  const labels = new Set(
    speakers.flatMap((speaker) => (speaker.participant === participant ? [speaker.label] : [])),
  );
  return turns.filter(({ speaker }) => labels.has(speaker));
}
