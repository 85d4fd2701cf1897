import { compareCodeUnits } from '../../engine/numbers/index.ts';
import type { FieldNote } from '../../engine/study/index.ts';
import type { Api, FieldNoteRow, FieldNotesOutcome, Refused } from '../api.ts';
import { fieldNoteDrafts } from '../gather/beside.ts';
import { sentenceForSkipped, type FileRefusal } from '../sentences/sentences.ts';
import { give, isRefused, refuse } from './answers.ts';
import type { OpenStudy } from './open-study.ts';
import type { Room } from './room.ts';
import type { Handlers } from './session-types.ts';

export function fieldNoteHandlers(
  room: Room,
): Pick<Handlers, 'addFieldNotes' | 'fieldNoteView' | 'describeFieldNote' | 'removeFieldNote'> {
  return {
    addFieldNotes: room.look<Api['addFieldNotes']['takes'], FieldNotesOutcome>(
      async (open, { files, transcript }) => {
        if (files.length === 0) return refuse('no files');
        const { drafts, kept, skipped } = await fieldNoteDrafts(open.desk, files, transcript);
        const refused = open.decide(drafts);
        if (refused !== null) return refused;
        const after = await room.afterwards(open);
        if (isRefused(after)) return after;
        return give({
          kept,
          skipped: skipped.map(({ file, refusal }) => ({
            file,
            sentence: sentenceForSkipped(refusal as FileRefusal),
          })),
        });
      },
    ),

    fieldNoteView: room.look((open, { note: id }: Api['fieldNoteView']['takes']) => {
      const note = open.study.fieldNotes.get(id);
      if (note === undefined) return unknown(open, id);
      return give({ ...rowOf(open, note), text: open.desk.noteText(id) });
    }),

    describeFieldNote: room.decide(
      (open, { note: id, name, transcript }: Api['describeFieldNote']['takes']) => {
        const note = open.study.fieldNotes.get(id);
        if (note === undefined) return unknown(open, id);
        const from = { name: note.name, transcript: note.transcript };
        const to = { name: name.trim(), transcript };
        if (from.name === to.name && from.transcript === to.transcript) return null;
        return open.decide([{ kind: 'fieldNoteDescribed', note: id, from, to }]);
      },
    ),

    removeFieldNote: room.decide((open, { note: id }: Api['removeFieldNote']['takes']) => {
      const note = open.study.fieldNotes.get(id);
      if (note === undefined) return unknown(open, id);
      return open.decide([{ kind: 'fieldNoteLetGo', note }]);
    }),
  };
}

/** Field notes by name: all, or those of one transcript. */
export function fieldNoteRows(open: OpenStudy, transcript?: string): FieldNoteRow[] {
  return [...open.study.fieldNotes.values()]
    .filter((note) => transcript === undefined || note.transcript === transcript)
    .map((note) => rowOf(open, note))
    .sort((a, b) => compareCodeUnits(a.name, b.name) || compareCodeUnits(a.id, b.id));
}

function rowOf({ study, desk }: OpenStudy, note: FieldNote): FieldNoteRow {
  const transcript = note.transcript === null ? undefined : study.transcripts.get(note.transcript);
  return {
    id: note.id,
    name: note.name,
    fileName: note.source.fileName,
    transcript: transcript === undefined ? null : { id: transcript.id, name: transcript.name },
    words: desk.noteText(note.id).match(/\S+/gu)?.length ?? 0,
  };
}

function unknown(open: OpenStudy, id: string): Refused {
  return open.refusal({ ok: false, code: 'unknown field note', subject: id });
}
