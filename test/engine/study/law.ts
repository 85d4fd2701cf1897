import { expect } from 'vitest';
import {
  apply,
  closesTrail,
  inverse,
  takingBack,
  type Edit,
  type Entry,
  type HistoryStep,
  type Study,
} from '../../../engine/study/index.ts';
import { frozen, plain, plainToTheLast } from './plain.ts';

/** What an edit is to change; everything else has to stay as it was. */
export type Expectation = Partial<Omit<Study, 'sequence' | 'undo' | 'redo'>>;

/**
 * Checks one edit against everything that holds for all of them: it does what is expected and
 * nothing else; the study before is not touched; its entry survives JSON; undo restores the study
 * exactly, redo the result, and both again. Returns the study after the edit.
 */
export function holdsLaw(before: Study, edit: Edit, expectation: Expectation): Study {
  frozen(before);
  frozen(edit);
  const untouched = plainToTheLast(before);
  const trail = new Map<number, Entry>();

  const entry = nextEntry(before, edit);
  trail.set(entry.sequence, entry);
  const after = frozen(applied(before, entry));

  expect(plainToTheLast(before), 'the study before stays as it was').toEqual(untouched);
  expect(plain(after), 'result').toEqual(plain({ ...before, ...expectation }));
  expect(after.sequence).toBe(entry.sequence);
  expectSharing(before, after, expectation);

  const fromFile = JSON.parse(JSON.stringify(entry)) as Entry;
  expect(fromFile, 'the entry survives JSON').toEqual(entry);
  expect(plainToTheLast(applied(before, fromFile))).toEqual(plainToTheLast(after));

  if (inverse(edit) === null) {
    const left = closesTrail(edit.kind) ? [null, null] : [before.undo, before.redo];
    expect([after.undo, after.redo], 'leaves nothing to undo').toEqual(left);
    return after;
  }
  expect(after.undo?.sequences.at(-1)).toBe(entry.sequence);
  expect(after.redo, 'a new edit ends what could be redone').toBeNull();

  const takeBack = (study: Study, step: HistoryStep | null): Study => {
    expect(step?.sequences).toHaveLength(1);
    const [back] = takingBack(step!, (sequence) => trail.get(sequence)!);
    const undoing = { ...nextEntry(study, back!.edit), undoes: back!.undoes };
    trail.set(undoing.sequence, JSON.parse(JSON.stringify(undoing)) as Entry);
    return frozen(applied(study, undoing));
  };

  let study = after;
  for (const time of ['first', 'second']) {
    study = takeBack(study, study.undo);
    expect(plain(study), `${time} undo restores`).toEqual(plain(before));
    expect(study.undo, 'what was to undo before is so again').toEqual(before.undo);
    study = takeBack(study, study.redo);
    expect(plain(study), `${time} redo does it again`).toEqual(plain(after));
    expect(study.redo).toBeNull();
  }
  return after;
}

/** The study after an entry that has to be accepted. */
export function applied(study: Study, entry: Entry): Study {
  const result = apply(study, entry);
  if (!result.ok) {
    throw new Error(`${entry.edit.kind} was refused: ${result.code} (${result.subject})`);
  }
  return result.value;
}

/** An entry for an edit; numbers leave gaps, as blobs do in a file. */
export function nextEntry(study: Study, edit: Edit): Entry {
  return { sequence: study.sequence + 3, at: '2031-04-05T06:07:08.000Z', by: 'reader-ada', edit };
}

/** What an edit leaves alone is the very same object, so that an edit is cheap. */
function expectSharing(before: Study, after: Study, expectation: Expectation): void {
  const fields = [
    'readers',
    'transcripts',
    'participants',
    'themes',
    'fits',
    'draws',
    'settings',
  ] as const;
  for (const field of fields) {
    if (!(field in expectation)) expect(after[field] === before[field], field).toBe(true);
  }
  for (const field of ['codings', 'nones'] as const) {
    for (const [transcript, inner] of before[field]) {
      const expected = (expectation[field] ?? before[field]).get(transcript);
      if (expected === inner) {
        expect(after[field].get(transcript) === inner, `${field} of ${transcript}`).toBe(true);
      }
    }
  }
}
