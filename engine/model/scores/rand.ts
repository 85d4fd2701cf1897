import { contingency } from './contingency.ts';

/**
 * The Rand index of two partitions (Rand 1971): the share of pairs of items on which they agree, 0
 * to 1; 1 for fewer than two items.
 */
export function rand(a: ArrayLike<number>, b: ArrayLike<number>): number {
  const { together, first, second, all } = pairs(a, b);
  return all === 0 ? 1 : (all + 2 * together - first - second) / all;
}

/**
 * The Rand index corrected for chance (Hubert & Arabie 1985): 1 for equal partitions, about 0 for
 * unrelated ones, at times below. Two partitions that are equal for want of any choice (one group
 * each, or single items) give 1.
 */
export function adjustedRand(a: ArrayLike<number>, b: ArrayLike<number>): number {
  const { together, first, second, all } = pairs(a, b);
  const expected = all === 0 ? 0 : (first * second) / all;
  const most = (first + second) / 2;
  return most === expected ? 1 : (together - expected) / (most - expected);
}

/** Pairs of items in one group: of both partitions, of each, and pairs at all. */
function pairs(a: ArrayLike<number>, b: ArrayLike<number>) {
  const table = contingency(a, b);
  const count = (sizes: readonly number[]): number =>
    sizes.reduce((total, size) => total + (size * (size - 1)) / 2, 0);
  return {
    together: count(table.cells.map(({ size }) => size)),
    first: count(table.first),
    second: count(table.second),
    all: count([table.items]),
  };
}
