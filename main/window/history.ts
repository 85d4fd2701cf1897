import type { Edit, HistoryStep } from '../../engine/study/index.ts';
import { gestureInWords, type Names } from '../sentences/edits.ts';
import { startGroup, type OpenStudy } from './open-study.ts';

export function namesIn({ study, now }: OpenStudy): Names {
  return {
    theme: (id) => now.label(id),
    transcript: (id) => study.transcripts.get(id)?.name ?? 'a transcript that is no more',
    participant: (id) => study.participants.get(id)?.name ?? 'a participant who is no more',
  };
}

/** What undo would take back, in words; null where there is nothing. */
export function undoInWords(open: OpenStudy): string | null {
  return stepInWords(open, open.study.undo);
}

export function redoInWords(open: OpenStudy): string | null {
  return stepInWords(open, open.study.redo);
}

function stepInWords(open: OpenStudy, step: HistoryStep | null): string | null {
  if (step === null || step.group === startGroup) return null;
  return gestureInWords(originals(open, step), namesIn(open));
}

/** The edits as they were first made, in their order: an undo and its redo go by the same words. */
function originals({ now: { trail } }: OpenStudy, { sequences }: HistoryStep): Edit[] {
  const first = sequences.map((sequence) => {
    let entry = trail.get(sequence);
    while (entry?.undoes !== undefined) entry = trail.get(entry.undoes);
    if (entry === undefined) throw new Error(`history: entry ${sequence} is not in the trail`);
    return entry;
  });
  return first.sort((a, b) => a.sequence - b.sequence).map(({ edit }) => edit);
}
