import { describe, expect, it } from 'vitest';
import { prepare } from '../../../engine/model/collapsed/prepare.ts';
import { startFresh, startWarm } from '../../../engine/model/collapsed/start.ts';
import type { Priors } from '../../../engine/model/index.ts';
import { countsOfTable } from './planted.ts';

const counts = countsOfTable([
  [2, 1, 1],
  [1, 0, 3],
  [0, 1, 1],
]);
const priors: Priors = {
  themes: 3,
  alpha: 0.1,
  eta: 0.1,
  wordPriors: [
    { theme: 1, word: 0, value: 0 },
    { theme: 0, word: 2, value: 2 },
  ],
  passagePriors: [{ passage: 0, theme: 2, value: 0 }],
  frozen: [],
};

/** Responsibilities of an entry, by passage and word. */
function rowsOf({ state }: ReturnType<typeof prepare>): Map<string, number[]> {
  const rows = new Map<string, number[]>();
  for (let d = 0; d < 3; d++) {
    for (let j = state.offsets[d]; j < state.offsets[d + 1]; j++) {
      const row = [...state.responsibilities.slice(j * state.stride, (j + 1) * state.stride)];
      rows.set(`${d} ${state.indices[j]}`, row);
    }
  }
  return rows;
}

describe('a fresh start', () => {
  const begin = (leanings: { theme: number; word: number }[], seed = 1, given = priors) => {
    const prepared = prepare('test', counts, given);
    const { kernel, state, priors: dense } = prepared;
    startFresh(kernel, state, counts, dense, leanings, seed, 0.173, 0.95);
    return prepared;
  };

  it('is nearly even where everything is open, and sums to 1', () => {
    const row = rowsOf(begin([])).get('1 2')!;
    expect(row.slice(0, 3).reduce((a, b) => a + b)).toBeCloseTo(1, 6);
    for (const share of row.slice(0, 3)) {
      expect(share).toBeGreaterThan(0.827 / 1.173 / 3);
      expect(share).toBeLessThan(1.173 / 0.827 / 3);
    }
    expect(row[3]).toBe(0);
    expect(new Set(row).size).toBe(4);
  });

  it('hangs on the seed', () => {
    expect(rowsOf(begin([], 1))).toEqual(rowsOf(begin([], 1)));
    expect(rowsOf(begin([], 1))).not.toEqual(rowsOf(begin([], 2)));
  });

  it('is exactly 0 where a word is shut out or a theme rejected', () => {
    const rows = rowsOf(begin([]));
    expect(rows.get('0 0')!.map((share) => share > 0)).toEqual([true, false, false, false]);
    expect(rows.get('0 1')!.map((share) => share > 0)).toEqual([true, true, false, false]);
    expect(rows.get('1 0')!.map((share) => share > 0)).toEqual([true, false, true, false]);
  });

  it('puts nearly all of a seed word on its theme, in parts where it has two, where it is open', () => {
    expect(rowsOf(begin([{ theme: 0, word: 2 }])).get('1 2')![0]).toBeCloseTo(0.95, 6);
    const two = rowsOf(
      begin([
        { theme: 0, word: 2 },
        { theme: 2, word: 2 },
      ]),
    );
    expect(two.get('1 2')![0]).toBeCloseTo(0.475, 6);
    expect(two.get('1 2')![2]).toBeCloseTo(0.475, 6);
    expect(two.get('0 2')![0]).toBeCloseTo(0.95, 6);
    expect(rowsOf(begin([{ theme: 1, word: 0 }])).get('1 0')![1]).toBe(0);
  });

  it('follows a pinned theme where it makes a word likelier than it is elsewhere', () => {
    const frozen = [{ theme: 1, phi: Float32Array.of(0, 0.9, 0.1) }];
    const rows = rowsOf(begin([], 1, { ...priors, wordPriors: [], frozen }));
    // Word 1 is 2 of 10: the pinned theme makes it 4.5 times likelier.
    expect(rows.get('2 1')![1]).toBeGreaterThan(0.6);
    expect(rows.get('1 0')![1]).toBe(0);
  });
});

describe('a warm start', () => {
  it('is theta x phi, exactly 0 where a word is shut out or a theme rejected now', () => {
    const prepared = prepare('test', counts, priors);
    const theta = Float32Array.of(0.2, 0.2, 0.6, 0.5, 0.25, 0.25, 0, 0, 0);
    const phi = Float32Array.of(0.5, 0.25, 0.25, 0.8, 0.1, 0.1, 0.2, 0.2, 0.6);
    startWarm(prepared.kernel, prepared.state, theta, phi, [], 0.95);
    const rows = rowsOf(prepared);
    expect(rows.get('0 0')).toEqual([1, 0, 0, 0]);
    expect(rows.get('0 1')![0]).toBeCloseTo(0.05 / (0.05 + 0.02), 6);
    expect(rows.get('0 1')![2]).toBe(0);
    expect(rows.get('1 2')![2]).toBeCloseTo(0.15 / (0.125 + 0.025 + 0.15), 6);
    // The fit before did not know passage 2: even proportions.
    expect(rows.get('2 2')![2]).toBeCloseTo(0.6 / 0.95, 6);
  });

  it('lets a word whose old themes are all closed begin wherever it may go', () => {
    const prepared = prepare('test', counts, priors);
    const theta = Float32Array.of(0, 1, 0, 0, 1, 0, 0, 1, 0);
    const phi = Float32Array.of(0, 0.5, 0.5, 1, 0, 0, 0, 0.5, 0.5);
    startWarm(prepared.kernel, prepared.state, theta, phi, [], 0.95);
    expect(rowsOf(prepared).get('1 0')).toEqual([0.5, 0, 0.5, 0]);
  });
});
