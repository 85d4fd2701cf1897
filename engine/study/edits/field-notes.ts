import { done, refused, type Refusal } from '../refusal.ts';
import type { FieldNote, Study } from '../study.ts';
import { sameJson, withEntry, withoutEntry, type Rules } from './rule.ts';

/** Field notes stand beside the transcripts: they are read, and no model ever sees them. */
export const fieldNoteRules: Rules<'fieldNoteKept' | 'fieldNoteLetGo' | 'fieldNoteDescribed'> = {
  fieldNoteKept: {
    apply(study, { note }) {
      if (study.fieldNotes.has(note.id)) return refused('already there', note.name);
      const fault = descriptionFault(study, note);
      if (fault !== null) return fault;
      return done({ ...study, fieldNotes: withEntry(study.fieldNotes, note.id, note) });
    },
    inverse: ({ note }) => ({ kind: 'fieldNoteLetGo', note }),
  },

  fieldNoteLetGo: {
    apply(study, { note }) {
      const current = study.fieldNotes.get(note.id);
      if (current === undefined) return refused('unknown field note', note.name);
      if (!sameJson(current, note)) return refused('changed since', current.name);
      return done({ ...study, fieldNotes: withoutEntry(study.fieldNotes, note.id) });
    },
    inverse: ({ note }) => ({ kind: 'fieldNoteKept', note }),
  },

  fieldNoteDescribed: {
    apply(study, { note: id, from, to }) {
      const current = study.fieldNotes.get(id);
      if (current === undefined) return refused('unknown field note', from.name);
      const { name, transcript } = current;
      if (!sameJson({ name, transcript }, from)) return refused('changed since', name);
      const fault = descriptionFault(study, to);
      if (fault !== null) return fault;
      return done({
        ...study,
        fieldNotes: withEntry(study.fieldNotes, id, { ...current, ...to }),
      });
    },
    inverse: ({ note, from, to }) => ({ kind: 'fieldNoteDescribed', note, from: to, to: from }),
  },
};

function descriptionFault(
  study: Study,
  { name, transcript }: Pick<FieldNote, 'name' | 'transcript'>,
): Refusal | null {
  if (name.trim() === '') return refused('empty name', '');
  if (transcript !== null && !study.transcripts.has(transcript)) {
    return refused('unknown transcript', transcript);
  }
  return null;
}
