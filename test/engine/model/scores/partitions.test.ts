import { describe, expect, it } from 'vitest';
import {
  adjustedRand,
  matching,
  normalisedMutualInformation,
  purity,
  rand,
  variationOfInformation,
} from '../../../../engine/model/index.ts';
import { createGenerator } from '../../../../engine/numbers/index.ts';

describe('comparing partitions', () => {
  it('takes partitions without any choice as equal, not as undefined', () => {
    for (const [a, b] of [
      [[], []],
      [[4], [7]],
      [
        [1, 1, 1],
        [5, 5, 5],
      ],
    ]) {
      expect(rand(a, b)).toBe(1);
      expect(adjustedRand(a, b)).toBe(1);
      expect(normalisedMutualInformation(a, b)).toBe(1);
      expect(variationOfInformation(a, b)).toBe(0);
      expect(purity(a, b)).toBe(1);
    }
  });

  it('keeps negative labels and far-apart labels in groups of their own', () => {
    expect(adjustedRand([-1, -1, 4096, 4096], [0, 0, 1, 1])).toBe(1);
    expect(adjustedRand([-1, -1, 4096, 4096], [0, 1, 0, 1])).toBeCloseTo(-0.5, 12);
  });

  it('is about 0 for unrelated partitions, corrected for chance', () => {
    const chance = createGenerator(9);
    const a = Array.from({ length: 4000 }, () => chance.integer(5));
    const b = Array.from({ length: 4000 }, () => chance.integer(5));
    expect(Math.abs(adjustedRand(a, b))).toBeLessThan(0.01);
  });

  it('refuses partitions of different lengths', () => {
    expect(() => rand([1], [1, 2])).toThrow('contingency: the labels are 1 and 2');
  });
});

describe('matching', () => {
  it('finds the least total of every small random matrix, by trying all assignments', () => {
    const chance = createGenerator(2);
    for (let round = 0; round < 60; round++) {
      const rows = 1 + chance.integer(4);
      const columns = 1 + chance.integer(5);
      const cost = Array.from({ length: rows * columns }, () => chance.integer(20) - 10);
      const found = matching(cost, rows, columns);
      let total = 0;
      found.forEach((c, r) => (total += c < 0 ? 0 : cost[r * columns + c]));
      expect(total).toBe(leastByTrying(cost, rows, columns));
    }
  });

  it('matches nothing to nothing', () => {
    expect([...matching([], 0, 0)]).toEqual([]);
    expect([...matching([], 2, 0)]).toEqual([-1, -1]);
  });

  it('refuses costs that are no numbers or not as many as said', () => {
    expect(() => matching([1, NaN], 1, 2)).toThrow('matching: cost[1] is NaN');
    expect(() => matching([1], 1, 2)).toThrow('matching: cost.length is 1; must be 2');
  });
});

/** The least sum with as many pairs as can be. */
function leastByTrying(cost: readonly number[], rows: number, columns: number): number {
  let least = Infinity;
  const pairs = Math.min(rows, columns);
  const visit = (row: number, used: ReadonlySet<number>, total: number): void => {
    if (used.size === pairs) least = Math.min(least, total);
    if (row === rows) return;
    visit(row + 1, used, total);
    for (let c = 0; c < columns; c++) {
      if (!used.has(c)) visit(row + 1, new Set([...used, c]), total + cost[row * columns + c]);
    }
  };
  visit(0, new Set(), 0);
  return least;
}
