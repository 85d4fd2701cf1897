import { log } from '../../numbers/index.ts';
import { contingency, type Contingency } from './contingency.ts';

/**
 * Normalised mutual information of two partitions, 0 to 1: mutual information over the arithmetic
 * mean of the two entropies (Manning, Raghavan & Schütze 2008, chapter 16). 1 where both have one
 * group only.
 */
export function normalisedMutualInformation(a: ArrayLike<number>, b: ArrayLike<number>): number {
  const table = contingency(a, b);
  const entropies = entropy(table.first, table.items) + entropy(table.second, table.items);
  return entropies === 0 ? 1 : clamp((2 * mutualInformation(table)) / entropies);
}

/**
 * Variation of information of two partitions in nats (Meilă 2007): what each says that the other
 * does not. A distance, 0 for equal partitions.
 */
export function variationOfInformation(a: ArrayLike<number>, b: ArrayLike<number>): number {
  const table = contingency(a, b);
  const entropies = entropy(table.first, table.items) + entropy(table.second, table.items);
  return Math.max(0, entropies - 2 * mutualInformation(table));
}

/** In nats. */
function mutualInformation({ items, first, second, cells }: Contingency): number {
  let total = 0;
  for (const cell of cells) {
    const expected = (first[cell.first] * second[cell.second]) / items;
    total += (cell.size / items) * log(cell.size / expected);
  }
  return total;
}

/** Entropy of groups of these sizes, in nats. */
function entropy(sizes: readonly number[], items: number): number {
  return sizes.reduce((total, size) => total - (size / items) * log(size / items), 0);
}

function clamp(x: number): number {
  return Math.min(1, Math.max(0, x));
}
