import type { Refused, TranscriptView } from '../api.ts';
import { give } from './answers.ts';
import { fieldNoteRows } from './field-notes.ts';
import { memosOnTranscript } from './memos.ts';
import type { OpenStudy } from './open-study.ts';
import { wordsIn } from './overview.ts';
import { passageView } from './passage-view.ts';

/** A transcript as it was understood, with all that was decided in it. */
export function transcriptView(
  open: OpenStudy,
  id: string,
): { readonly value: TranscriptView } | Refused {
  const { study, now, desk } = open;
  const transcript = study.transcripts.get(id);
  if (transcript === undefined) {
    return open.refusal({ ok: false, code: 'unknown transcript', subject: id });
  }
  const roles = new Map(transcript.speakers.map(({ label, role }) => [label, role]));
  const placed = now.passagesIn(id);
  return give({
    id,
    name: transcript.name,
    text: desk.text(id),
    details: transcript.details,
    turns: transcript.turns.map(({ start, end, speaker, startTime }) => ({
      start,
      end,
      speaker,
      role: roles.get(speaker) ?? 'participant',
      time: startTime,
    })),
    passages: placed.map((_, index) => passageView(open, id, index)),
    words: wordsIn(placed),
    fieldNotes: fieldNoteRows(open, id),
    memos: memosOnTranscript(study, id),
  });
}
