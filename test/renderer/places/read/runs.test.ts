import { describe, expect, it } from 'vitest';
import type { CodingView } from '../../../../main/api.ts';
import { runsOf, stretchesOf } from '../../../../renderer/places/read/runs.ts';

const coding = (id: string, start: number, end: number): CodingView => ({
  id,
  span: { start, end },
  theme: 't',
  themeName: 'Weather',
  standing: 'by hand',
  memo: '',
  reader: 'R',
  at: '',
  strengthAtDecision: null,
  strengthWithout: null,
  together: null,
});

const text = 'Shona took me in the end,\n  in the small boat 👩‍👩‍👧.';
const whole = { start: 0, end: text.length };

describe('coded stretches of a passage', () => {
  it('are numbered in reading order; a coding of the whole passage is none', () => {
    const stretches = stretchesOf(whole, [
      coding('late', 17, 24),
      coding('all', 0, text.length),
      coding('early', 0, 5),
    ]);
    expect(stretches.map(({ coding: { id }, number }) => [id, number])).toEqual([
      ['early', 1],
      ['late', 2],
    ]);
  });

  it('run below each other where they overlap, and side by side where they do not', () => {
    const stretches = stretchesOf(whole, [
      coding('a', 0, 10),
      coding('b', 5, 16),
      coding('c', 6, 8),
      coding('d', 7, 9),
      coding('e', 20, 24),
    ]);
    expect(stretches.map(({ level }) => level)).toEqual([0, 1, 2, 2, 0]);
    expect(new Set(stretches.slice(0, 4).map(({ pattern }) => pattern)).size).toBe(4);
  });

  it('reach over the edge of the passage without leaving it', () => {
    const [stretch] = stretchesOf({ start: 6, end: 10 }, [coding('a', 0, 8)]);
    const runs = runsOf(text, { start: 6, end: 10 }, [], [stretch!]);
    expect(runs.map((run) => [run.text, run.lines.length])).toEqual([
      ['to', 1],
      ['ok', 0],
    ]);
  });
});

describe('runs of text', () => {
  it('are the text again, whatever is drawn below it', () => {
    const stretches = stretchesOf(whole, [coding('a', 0, 10), coding('b', 5, 30)]);
    const runs = runsOf(text, whole, [{ start: 17, end: 20 }], stretches);
    expect(runs.map((run) => run.text).join('')).toBe(text);
    expect(runs.find(({ carries }) => carries)?.text).toBe('the');
  });

  it('carry a stretch’s number where it ends, once', () => {
    const stretches = stretchesOf(whole, [coding('a', 0, 10), coding('b', 5, 10)]);
    const notes = runsOf(text, whole, [], stretches).map((run) => run.notes);
    expect(notes).toEqual(['', '1 2', '']);
  });
});
