import { inverse } from './apply.ts';
import type { Edit, Entry } from './edit.ts';
import type { HistoryStep } from './study.ts';

/** An edit that takes back the one at `undoes`. */
export interface TakingBack {
  readonly edit: Edit;
  readonly undoes: number;
}

/**
 * The edits that take back one step of `study.undo` or `study.redo`, the step's last edit first.
 * They must be appended in this order and under one group. `entryAt` finds the trail's entry with
 * a given sequence number.
 */
export function takingBack(
  step: HistoryStep,
  entryAt: (sequence: number) => Entry,
): readonly TakingBack[] {
  return [...step.sequences].reverse().map((sequence) => {
    const edit = inverse(entryAt(sequence).edit);
    if (edit === null) throw new Error(`takingBack: entry ${sequence} cannot be taken back`);
    return { edit, undoes: sequence };
  });
}
