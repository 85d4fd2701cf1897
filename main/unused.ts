import type { Entry, HistoryStep, Study } from '../engine/study/index.ts';
import { closesTrail, inverse } from '../engine/study/index.ts';
import type { StudyRecord } from './project/index.ts';

/** Records whose content nothing can ask for any more. */
export interface Unused {
  readonly records: readonly StudyRecord[];
  /** The decisions that brought them; they stay in the trail. */
  readonly entries: readonly Entry[];
}

/**
 * Blobs of decisions that were taken back and can no longer be done again: neither the study nor any
 * undo or redo from here leads to them.
 */
export function unusedRecords(
  study: Study,
  trail: Iterable<Entry>,
  records: readonly StudyRecord[],
): Unused {
  const entries = [...trail];
  const reachable = new Set([...sequencesOf(study.undo), ...sequencesOf(study.redo)]);
  const wanted = new Set<number>();
  blobsIn([study.transcripts, study.fits, study.takenIn], (sequence) => wanted.add(sequence));
  // What an erasing closed off can't be undone, and its records are the erasing's business.
  const closed = entries.findLastIndex(({ edit }) => closesTrail(edit.kind));
  const idle: Entry[] = [];
  entries.forEach((entry, index) => {
    const counts = index <= closed || inverse(entry.edit) === null || reachable.has(entry.sequence);
    if (counts) blobsIn(entry.edit, (sequence) => wanted.add(sequence));
    else idle.push(entry);
  });
  const unused = records.filter(
    ({ kind, removed, sequence }) => kind === 'blob' && !removed && !wanted.has(sequence),
  );
  const numbers = new Set(unused.map(({ sequence }) => sequence));
  const bringers = idle.filter(({ sequence, edit, undoes }) => {
    if (undoes !== undefined) return false;
    let brought = false;
    blobsIn(edit, (blob) => (brought ||= numbers.has(blob) && blob < sequence));
    return brought;
  });
  return { records: unused, entries: bringers };
}

function* sequencesOf(step: HistoryStep | null): Generator<number> {
  for (let one = step; one !== null; one = one.below) yield* one.sequences;
}

/** Every reference to a blob in plain data: an object of `sequence` and `bytes` alone. */
export function blobsIn(value: unknown, tell: (sequence: number) => void): void {
  if (typeof value !== 'object' || value === null) return;
  if (value instanceof Map) {
    for (const one of value.values()) blobsIn(one, tell);
    return;
  }
  const { sequence, bytes } = value as { sequence?: unknown; bytes?: unknown };
  if (typeof sequence === 'number' && typeof bytes === 'number') {
    tell(sequence);
    return;
  }
  for (const one of Object.values(value)) blobsIn(one, tell);
}
