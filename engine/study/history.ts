import type { Entry } from './edit.ts';
import { done, refused, type Result } from './refusal.ts';
import type { HistoryStep, Study } from './study.ts';

type History = Pick<Study, 'undo' | 'redo'>;

/**
 * What undo and redo reach after one more entry. An ordinary edit joins the newest step where it
 * shares its group, else starts one, and ends what could be redone. An entry that undoes must take
 * back the newest sequence number of one of the two chains; it moves to the other chain.
 */
export function historyAfter(study: Study, entry: Entry, canBeUndone: boolean): Result<History> {
  const { undo, redo } = study;
  const { sequence, undoes } = entry;
  const group = entry.group ?? null;
  if (undoes === undefined) {
    return done(canBeUndone ? { undo: pushed(undo, sequence, group), redo: null } : { undo, redo });
  }
  if (newest(undo) === undoes) {
    return done({ undo: popped(undo), redo: pushed(redo, sequence, group) });
  }
  if (newest(redo) === undoes) {
    return done({ undo: pushed(undo, sequence, group), redo: popped(redo) });
  }
  return refused('nothing to undo', String(undoes));
}

function newest(step: HistoryStep | null): number | undefined {
  return step?.sequences.at(-1);
}

function pushed(step: HistoryStep | null, sequence: number, group: string | null): HistoryStep {
  if (step !== null && group !== null && step.group === group) {
    return { ...step, sequences: [...step.sequences, sequence] };
  }
  return { sequences: [sequence], group, below: step };
}

function popped(step: HistoryStep | null): HistoryStep | null {
  if (step === null || step.sequences.length === 1) return step?.below ?? null;
  return { ...step, sequences: step.sequences.slice(0, -1) };
}
