import { beforeEach, describe, expect, test } from 'vitest';
import { Desk, transcriptsInOrder } from '../../main/desk.ts';
import { derivedIds } from '../../main/ids.ts';
import { BufferedStore } from '../../main/store.ts';
import type { Act } from '../../main/project/index.ts';
import { ada, harbour, maren, mill, theme } from '../engine/study/scene.ts';

const context = {
  by: 'reader-ada',
  now: () => '2026-02-03T04:05:06.000Z',
  mintId: derivedIds('test'),
};
const start = { edit: { kind: 'studyStarted', study: 'island', name: 'The island' } } as const;
const add = (id: string) => ({ edit: { kind: 'themeAdded', theme: theme(id) } }) as const;

/** Remembers what was appended, as a file would have it. */
class Recording extends BufferedStore {
  readonly stored: { sequence: number; json: unknown }[] = [];
  override appendAll(acts: readonly Act[]) {
    return super.appendAll(
      acts.map(({ blobs = [], edit }) => ({
        blobs,
        edit: (own, sequence) => {
          const json = JSON.parse(JSON.stringify(edit(own, sequence)));
          this.stored.push({ sequence, json });
          return json;
        },
      })),
    );
  }
}

let store: Recording;
let desk: Desk;

beforeEach(() => {
  store = new Recording(null);
  desk = new Desk(store, context);
  desk.make([start]);
});

describe('the desk', () => {
  test('makes decisions on the study and in the store', () => {
    expect(desk.make([add('sea'), add('work')])).toEqual({ ok: true, value: [2, 3] });
    expect([...desk.study.themes.keys()]).toEqual(['sea', 'work']);
    expect(store.stored.map(({ sequence }) => sequence)).toEqual([1, 2, 3]);
    expect(store.stored[1].json).toEqual({
      at: '2026-02-03T04:05:06.000Z',
      by: 'reader-ada',
      edit: add('sea').edit,
    });
  });

  test('makes all of a gesture or none of it', () => {
    const before = desk.study;
    expect(desk.make([add('sea'), add('sea')])).toMatchObject({ ok: false, code: 'already there' });
    expect(desk.study).toBe(before);
    expect(store.stored).toHaveLength(1);
    expect(store.nextSequence).toBe(2);
  });

  test('keeps the study as it was where the store fails', () => {
    const failure = { ok: false, code: 'no space', path: 'a' } as const;
    const broken = new Desk(
      {
        nextSequence: 1,
        readOnly: false,
        appendAll: () => failure,
        readBlob: () => new Uint8Array(),
      },
      context,
    );
    const before = broken.study;
    expect(broken.make([start])).toBe(failure);
    expect(broken.study).toBe(before);
  });

  test('tells an edit where its blobs stand, and reads texts back from there', () => {
    const text = 'A question, and then nineteen letters é of an answer.……';
    const made = desk.make([
      { edit: { kind: 'readerAdded', reader: ada } },
      { edit: { kind: 'participantAdded', participant: maren } },
      {
        blobs: [Buffer.from(text, 'utf8')],
        edit: ([blob]) => ({
          kind: 'transcriptGathered',
          transcript: { ...mill, text: blob, length: text.length, turns: [] },
        }),
      },
    ]);
    expect(made).toEqual({ ok: true, value: [2, 3, 5] });
    expect(desk.text('mill')).toBe(text);
    expect(desk.study.transcripts.get('mill')?.text).toEqual({
      sequence: 4,
      bytes: Buffer.byteLength(text),
    });
    expect(() => desk.text('harbour')).toThrow('harbour is no transcript');
  });

  test('takes back the last gesture whole, and takes that back again', () => {
    desk.make([add('sea'), add('work')], { group: 'both' });
    const both = desk.study.themes;
    expect(desk.undo()).toMatchObject({ ok: true });
    expect(desk.study.themes.size).toBe(0);
    expect(desk.redo()).toMatchObject({ ok: true });
    expect(desk.study.themes).toEqual(both);
    expect(desk.redo()).toBeNull();
  });

  test('an undo is an entry that names what it takes back', () => {
    desk.make([add('sea')]);
    desk.undo();
    expect([...desk.entries].at(-1)).toMatchObject({ undoes: 2, edit: { kind: 'themeRemoved' } });
  });

  test('folds a stored trail into the same study, with undo where it was', () => {
    desk.make([add('sea')]);
    desk.make([add('work')]);
    desk.undo();
    const again = new Desk(store, context);
    again.load(store.stored);
    expect(again.study).toEqual(desk.study);
    again.undo();
    expect(again.study.themes.size).toBe(0);
  });

  test('refuses a trail that does not follow from itself', () => {
    const again = new Desk(store, context);
    const twice = store.stored.map(({ json }) => ({ sequence: 2, json }));
    expect(() => again.load([...store.stored, ...twice])).toThrow(
      'Desk.load: entry 2 (studyStarted): study already started',
    );
  });

  test('gives transcripts in the order of their names', () => {
    const study = {
      ...desk.study,
      transcripts: new Map(
        [mill, harbour, { ...mill, id: 'x', name: 'Zoo' }].map((one) => [one.id, one]),
      ),
    };
    expect(transcriptsInOrder(study).map(({ name }) => name)).toEqual(['Harbour', 'Mill', 'Zoo']);
  });

  test('an unknown fit is a mistake of the caller, none is null', () => {
    expect(desk.fitted(null)).toBeNull();
    expect(() => desk.fitted('x')).toThrow('x is no fit of this study');
  });
});

describe('ids', () => {
  test('derived ones follow from what went in, and differ from each other', () => {
    const [one, same, other] = [derivedIds(['a', 1]), derivedIds(['a', 1]), derivedIds(['a', 2])];
    const three = [one('theme'), one('theme'), one('fit')];
    expect([same('theme'), same('theme'), same('fit')]).toEqual(three);
    expect(new Set([...three, other('theme')]).size).toBe(4);
    for (const id of three) expect(id).toMatch(/^[0-9a-f]{32}$/u);
  });
});
