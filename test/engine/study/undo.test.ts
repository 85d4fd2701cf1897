import { describe, expect, it } from 'vitest';
import {
  apply,
  emptyStudy,
  fold,
  inverse,
  takingBack,
  type Edit,
  type Entry,
  type HistoryStep,
  type Study,
} from '../../../engine/study/index.ts';
import { applied } from './law.ts';
import { plain } from './plain.ts';
import { started } from './scene.ts';

const at = '2031-04-05T06:07:08.000Z';

function renamed(from: string, to: string): Edit {
  return { kind: 'studyRenamed', from, to };
}

function entry(sequence: number, edit: Edit, more: Partial<Entry> = {}): Entry {
  return { sequence, at, by: 'reader-ada', edit, ...more };
}

/** Takes a whole step back, as one group, and records what that took. */
function takeBack(study: Study, step: HistoryStep | null, trail: Entry[], group: string): Study {
  return takingBack(step!, (sequence) => trail.find((one) => one.sequence === sequence)!).reduce(
    (current, { edit, undoes }) => {
      const next = entry(current.sequence + 1, edit, { undoes, group });
      trail.push(next);
      return applied(current, next);
    },
    study,
  );
}

const first = 'The island';

describe('undo', () => {
  it('takes the edits of one group back together, the last one first', () => {
    const trail = [
      entry(10, renamed(first, 'a')),
      entry(11, renamed('a', 'b'), { group: 'gesture' }),
      entry(12, renamed('b', 'c'), { group: 'gesture' }),
    ];
    const study = trail.reduce(applied, started);
    expect(study.undo?.sequences).toEqual([11, 12]);
    const undone = takeBack(study, study.undo, trail, 'undo 1');
    expect(undone.name).toBe('a');
    expect(trail.slice(3).map(({ undoes }) => undoes)).toEqual([12, 11]);
    expect(undone.undo?.sequences).toEqual([10]);
    expect(undone.redo?.sequences).toEqual([13, 14]);

    const redone = takeBack(undone, undone.redo, trail, 'redo 1');
    expect(plain(redone)).toEqual(plain(study));
    expect(redone.redo).toBeNull();
    const again = takeBack(redone, redone.undo, trail, 'undo 2');
    expect(plain(again)).toEqual(plain(undone));
  });

  it('tells apart groups that only follow each other, and edits without a group', () => {
    const study = [
      entry(10, renamed(first, 'a'), { group: 'one' }),
      entry(11, renamed('a', 'b'), { group: 'two' }),
      entry(12, renamed('b', 'c')),
      entry(13, renamed('c', 'd')),
    ].reduce(applied, started);
    const steps: (readonly number[])[] = [];
    for (let step = study.undo; step !== null; step = step.below) steps.push(step.sequences);
    expect(steps).toEqual([[13], [12], [11], [10]]);
  });

  it('may take back a part of a group, the last edit only', () => {
    const study = [
      entry(10, renamed(first, 'a'), { group: 'one' }),
      entry(11, renamed('a', 'b'), { group: 'one' }),
      entry(12, renamed('b', 'a'), { undoes: 11 }),
    ].reduce(applied, started);
    expect(study.undo?.sequences).toEqual([10]);
    expect(study.redo?.sequences).toEqual([12]);
  });

  it('refuses an entry that takes back anything but the newest', () => {
    const study = [entry(10, renamed(first, 'a')), entry(11, renamed('a', 'b'))].reduce(
      applied,
      started,
    );
    for (const undoes of [10, 12, 0, -1]) {
      expect(apply(study, entry(12, renamed('b', 'a'), { undoes }))).toEqual({
        ok: false,
        code: 'nothing to undo',
        subject: String(undoes),
      });
    }
  });

  it('refuses to take anything back twice', () => {
    const study = [
      entry(10, renamed(first, 'a')),
      entry(11, renamed('a', first), { undoes: 10 }),
    ].reduce(applied, started);
    expect(apply(study, entry(12, renamed(first, 'z'), { undoes: 10 }))).toMatchObject({
      code: 'nothing to undo',
    });
  });

  it('cannot be had of the start of a study', () => {
    expect(inverse({ kind: 'studyStarted', study: 'id', name: 'x' })).toBeNull();
    expect(started.undo).toBeNull();
    const step = { sequences: [2], group: null, below: null };
    const start = entry(2, { kind: 'studyStarted', study: 'id', name: 'x' });
    expect(() => takingBack(step, () => start)).toThrow('entry 2 cannot be taken back');
  });

  it('leaves nothing to redo once another edit was made', () => {
    const study = [
      entry(10, renamed(first, 'a')),
      entry(11, renamed('a', first), { undoes: 10 }),
      entry(12, renamed(first, 'b')),
    ].reduce(applied, started);
    expect(study.redo).toBeNull();
    expect(study.undo?.sequences).toEqual([12]);
  });
});

describe('the trail', () => {
  const start = entry(0, { kind: 'studyStarted', study: 'island', name: first });

  it('folds into the study that stepwise edits lead to', () => {
    const trail = [start, entry(4, renamed(first, 'a')), entry(9, renamed('a', 'b'))];
    expect(fold(trail)).toEqual({ ok: true, value: trail.reduce(applied, emptyStudy) });
  });

  it('folds into the empty study where nothing was recorded', () => {
    expect(fold([])).toEqual({ ok: true, value: emptyStudy });
  });

  it('stops at the first entry that cannot be applied, with its reason', () => {
    const trail = [start, entry(4, renamed('x', 'a')), entry(9, renamed(first, 'b'))];
    expect(fold(trail)).toEqual({ ok: false, code: 'changed since', subject: first });
  });

  it('has to ascend: anything else is a mistake of the program', () => {
    for (const sequence of [started.sequence, started.sequence - 1, 5.5, NaN]) {
      expect(() => apply(started, entry(sequence, renamed(first, 'a')))).toThrow(
        `entry.sequence is ${sequence}`,
      );
    }
  });

  it('knows no edits but its own: anything else is a mistake of the program', () => {
    for (const kind of ['shredded', 'toString', '__proto__']) {
      const edit = { kind } as unknown as Edit;
      expect(() => apply(started, entry(9, edit))).toThrow(JSON.stringify(kind));
    }
  });
});

describe('what erased something for good', () => {
  it('can neither be taken back nor anything before it', () => {
    const person = { id: 'maren', name: 'Maren', attributes: {} };
    const before = [
      entry(10, { kind: 'participantAdded', participant: person }),
      entry(11, renamed(first, 'a')),
    ].reduce(applied, started);
    const withdrawn: Edit = {
      kind: 'participantWithdrawn',
      participant: 'maren',
      transcripts: [],
      shared: [],
    };
    const study = applied(before, entry(12, withdrawn));
    expect([study.undo, study.redo]).toEqual([null, null]);
    expect(inverse(withdrawn)).toBeNull();
    const back = entry(13, renamed('a', first), { undoes: 11 });
    expect(apply(study, back)).toMatchObject({ ok: false, code: 'nothing to undo' });
    expect(applied(study, entry(13, renamed('a', 'b'))).undo?.sequences).toEqual([13]);
  });
});
