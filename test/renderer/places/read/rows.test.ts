import { describe, expect, it } from 'vitest';
import type { PassageView, Span, TurnView } from '../../../../main/api.ts';
import { itemsAround, itemsOf } from '../../../../renderer/places/read/items.ts';
import { rowAt, rowOfPassage, rowsOf } from '../../../../renderer/places/read/rows.ts';

const turn = (start: number, end: number, speaker: string, role: TurnView['role']): TurnView => ({
  start,
  end,
  speaker,
  role,
  time: start * 1000,
});

const passage = (number: number, segments: readonly Span[]): PassageView => ({
  start: segments[0]!.start,
  end: segments[segments.length - 1]!.end,
  number,
  speaker: 'P',
  participant: 'P',
  time: null,
  segments,
  question: null,
  words: 10,
  countedWords: 10,
  suggestions: [],
  strongest: [],
  codings: [],
  heldBack: false,
  none: null,
  memos: [],
});

const text = 'I: How?\n\nP: One. Two.\n\nI: Mm.\n\nP: Three. Four.\n';
const question = turn(3, 7, 'I', 'interviewer');
const first = turn(12, 21, 'P', 'participant');
const hum = turn(26, 29, 'I', 'interviewer');
const second = turn(34, 46, 'P', 'participant');
const turns = [question, first, hum, second];

const said = (rows: ReturnType<typeof rowsOf>): string[] =>
  rows.map(({ pieces }) => pieces.map(({ start, end }) => text.slice(start, end)).join(' / '));

describe('rows of a transcript', () => {
  it('keep a short turn of the interviewer inside the passage that it interrupts', () => {
    const whole = passage(1, [first, second]);
    const rows = rowsOf({ text, turns, passages: [whole] });
    expect(said(rows)).toEqual(['How?', 'One. Two. / Mm. / Three. Four.']);
    expect(rows[1]!.pieces.map(({ own }) => own)).toEqual([true, false, true]);
    expect(rows.map(({ ends }) => ends)).toEqual([false, true]);
  });

  it('part a turn where one passage ends and the next begins, and label it once', () => {
    const passages = [passage(1, [{ start: 12, end: 16 }]), passage(2, [{ start: 17, end: 21 }])];
    const rows = rowsOf({ text, turns: [first], passages });
    expect(said(rows)).toEqual(['One.', 'Two.']);
    expect(rows.map(({ pieces }) => pieces[0]!.opensTurn)).toEqual([true, false]);
    expect(rows.map(({ pieces }) => pieces[0]!.time)).toEqual([12_000, null]);
  });

  it('show talk that no passage holds', () => {
    const rows = rowsOf({ text, turns, passages: [passage(1, [{ start: 12, end: 16 }])] });
    expect(said(rows)).toEqual(['How?', 'One.', 'Two.', 'Mm.', 'Three. Four.']);
    expect(rows.map((row) => row.passage)).toEqual([-1, 0, -1, -1, -1]);
  });

  it('end a passage once where two people’s passages alternate', () => {
    const passages = [passage(1, [first, second]), passage(2, [hum])];
    const rows = rowsOf({ text, turns, passages });
    expect(rows.map((row) => [row.passage, row.ends])).toEqual([
      [-1, false],
      [0, false],
      [1, true],
      [0, true],
    ]);
  });

  it('are found by passage and by offset', () => {
    const rows = rowsOf({ text, turns, passages: [passage(1, [second])] });
    expect(rowOfPassage(rows, 0)).toBe(3);
    expect(rowAt(rows, question.start)).toBe(0);
    expect(rowAt(rows, 8)).toBe(-1);
  });
});

describe('what the reading column shows', () => {
  const passages = [passage(1, [first]), passage(2, [second])];
  const rows = rowsOf({ text, turns, passages });

  it('is the whole transcript between its details and its end', () => {
    expect(itemsOf(rows).map(({ kind }) => kind)).toEqual([
      'head',
      'row',
      'row',
      'row',
      'row',
      'tail',
    ]);
  });

  it('is one passage with its neighbours quieter, the question before it first', () => {
    const items = itemsAround(rows, 1, question.start);
    expect(items.map((item) => (item.kind === 'row' ? item.quiet : item.kind))).toEqual([
      false,
      true,
      false,
      false,
    ]);
  });

  it('says how many turns lie between a far question and the passage', () => {
    const many = Array.from({ length: 8 }, (_, index) =>
      turn(index * 4, index * 4 + 3, index === 0 ? 'I' : 'P', 'participant'),
    );
    const long = rowsOf({
      text: 'abc '.repeat(8),
      turns: many,
      passages: [passage(1, [many[7]!])],
    });
    expect(itemsAround(long, 0, 0)[1]).toMatchObject({ kind: 'left out', count: 4 });
  });
});
