import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  apply,
  emptyStudy,
  fold,
  takingBack,
  type Edit,
  type Entry,
  type HistoryStep,
  type Study,
} from '../../../engine/study/index.ts';
import { applied } from './law.ts';
import { newWorld, tries, worldOf, type World } from './model.ts';
import { frozen, plain, plainToTheLast } from './plain.ts';

type Command =
  | {
      readonly does: 'try';
      readonly way: string;
      readonly choices: { a: number; b: number; c: number; d: number };
      readonly group: string | null;
    }
  | { readonly does: 'undo' }
  | { readonly does: 'redo' };

const small = fc.nat(60);
const anEdit = fc.record<Command & { does: 'try' }>({
  does: fc.constant('try'),
  way: fc.constantFrom(...Object.keys(tries)),
  choices: fc.record({ a: small, b: small, c: small, d: small }),
  group: fc.constantFrom(null, null, 'first', 'second'),
});

/** Without these most attempts would find nothing to change. */
const opening: readonly Command[] = (
  [
    ['addReader', 0],
    ['addParticipant', 0],
    ['gather', 0],
    ['gather', 1],
    ['addTheme', 0],
    ['addTheme', 1],
    ['addTheme', 3],
    ['code', 0],
    ['note', 3],
  ] as const
).map(([way, a]) => ({ does: 'try', way, choices: { a, b: 1, c: 14, d: 0 }, group: null }));

const commands = fc
  .array(
    fc.oneof(
      { weight: 14, arbitrary: anEdit },
      { weight: 4, arbitrary: fc.constant<Command>({ does: 'undo' }) },
      { weight: 2, arbitrary: fc.constant<Command>({ does: 'redo' }) },
    ),
    { maxLength: 60, size: 'max' },
  )
  .map((rest): readonly Command[] => [...opening, ...rest]);

interface Step {
  readonly group: string | null;
  readonly world: World;
}

const start: Entry = {
  sequence: 0,
  at: '2031-04-05T06:07:08.000Z',
  by: 'reader-ada',
  edit: { kind: 'studyStarted', study: 'island', name: 'The island' },
};

/** Leads a study and its model through the same commands. */
class Pair {
  study: Study = frozen(applied(emptyStudy, start));
  trail: Entry[] = [start];
  accepted = new Map<string, number>();
  refused = new Map<string, number>();
  private world = newWorld();
  private undo: Step[] = [];
  private redo: Step[] = [];

  run(command: Command): void {
    if (command.does === 'try') this.try(command);
    else this.takeBack(command.does);
    const view = worldOf(this.study);
    this.world.readers.sort();
    this.world.participants.sort();
    expect(view, JSON.stringify(command)).toEqual(this.world);
    expect([this.study.undo === null, this.study.redo === null]).toEqual([
      this.undo.length === 0,
      this.redo.length === 0,
    ]);
  }

  private try({ way, choices, group }: Command & { does: 'try' }): void {
    const before = structuredClone(this.world);
    const fresh = this.study.sequence + 1;
    const { edit, allowed, act } = tries[way]!(this.world, { ...choices, fresh });
    const entry = this.entry(edit, group === null ? {} : { group });
    const result = apply(this.study, entry);
    expect(result.ok, `${way} ${JSON.stringify(edit)}`).toBe(allowed);
    const counts = allowed ? this.accepted : this.refused;
    counts.set(way, (counts.get(way) ?? 0) + 1);
    if (!result.ok) return;
    act();
    this.append(entry, result.value);
    this.redo = [];
    if (group === null || this.undo.at(-1)?.group !== group) {
      this.undo.push({ group, world: before });
    }
  }

  takeBack(which: 'undo' | 'redo'): void {
    const [from, to] = which === 'undo' ? [this.undo, this.redo] : [this.redo, this.undo];
    const step = this.study[which];
    if (step === null) return;
    const group = `${which} ${this.study.sequence}`;
    for (const { edit, undoes } of takingBack(step, (sequence) => this.at(sequence))) {
      const entry = this.entry(edit, { undoes, group });
      this.append(entry, applied(this.study, entry));
    }
    const { world } = from.pop()!;
    to.push({ group, world: this.world });
    this.world = structuredClone(world);
  }

  steps(which: 'undo' | 'redo'): number {
    let count = 0;
    for (let step: HistoryStep | null = this.study[which]; step !== null; step = step.below) {
      count += 1;
    }
    return count;
  }

  private at(sequence: number): Entry {
    return this.trail.find((entry) => entry.sequence === sequence)!;
  }

  private entry(edit: Edit, more: Partial<Entry>): Entry {
    const sequence = this.study.sequence + 1 + (this.study.sequence % 3);
    // What the trail keeps is what a file would give back.
    const entry = { ...start, sequence, edit, ...more };
    return frozen(JSON.parse(JSON.stringify(entry)) as Entry);
  }

  private append(entry: Entry, study: Study): void {
    expectUntouchedTranscriptsShared(this.study, study, entry.edit);
    this.trail.push(entry);
    this.study = frozen(study);
  }
}

function transcriptOf(edit: Edit): string | null {
  switch (edit.kind) {
    case 'codingMade':
    case 'codingRemoved':
      return edit.coding.transcript;
    case 'codingRevised':
    case 'textRevised':
      return edit.transcript;
    case 'noneMarked':
    case 'noneCleared':
      return edit.none.transcript;
    default:
      return null;
  }
}

/** One big map copied for every decision was measured to be far too slow. */
function expectUntouchedTranscriptsShared(before: Study, after: Study, edit: Edit): void {
  const touched = transcriptOf(edit);
  for (const field of ['codings', 'nones'] as const) {
    for (const [transcript, inner] of before[field]) {
      if (transcript !== touched) expect(after[field].get(transcript) === inner).toBe(true);
    }
  }
}

function led(sequence: readonly Command[]): Pair {
  const pair = new Pair();
  for (const command of sequence) pair.run(command);
  return pair;
}

describe('any sequence of edits, undos and redos', () => {
  it('leads a study where it leads a plainer model that keeps a copy for every undo', () => {
    fc.assert(
      fc.property(commands, (sequence) => {
        led(sequence);
      }),
      { numRuns: 250 },
    );
  });

  it('folds from its trail into the very study that it led to', () => {
    fc.assert(
      fc.property(commands, (sequence) => {
        const { study, trail } = led(sequence);
        const folded = fold(JSON.parse(JSON.stringify(trail)) as Entry[]);
        expect(folded.ok && plainToTheLast(folded.value)).toEqual(plainToTheLast(study));
      }),
      { numRuns: 60 },
    );
  });

  it('can be undone to the start, and redone to where it was', () => {
    fc.assert(
      fc.property(commands, (sequence) => {
        const pair = led(sequence);
        while (pair.study.redo !== null) pair.run({ does: 'redo' });
        const end = plain(pair.study);
        const steps = pair.steps('undo');
        while (pair.study.undo !== null) pair.run({ does: 'undo' });
        expect(plain(pair.study)).toEqual(plain(applied(emptyStudy, start)));
        expect(pair.steps('redo')).toBe(steps);
        while (pair.study.redo !== null) pair.run({ does: 'redo' });
        expect(plain(pair.study)).toEqual(end);
      }),
      { numRuns: 60 },
    );
  });

  it('meets every kind of attempt both where it is allowed and where it is not', () => {
    const accepted = new Set<string>();
    const refused = new Set<string>();
    for (const sequence of fc.sample(commands, { numRuns: 250, seed: 7 })) {
      const pair = led(sequence);
      for (const way of pair.accepted.keys()) accepted.add(way);
      for (const way of pair.refused.keys()) refused.add(way);
    }
    const always = ['set', 'order'];
    expect([...accepted].sort()).toEqual(Object.keys(tries).sort());
    expect([...refused, ...always].sort()).toEqual(Object.keys(tries).sort());
  });
});
