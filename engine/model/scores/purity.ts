import { contingency } from './contingency.ts';

/**
 * Purity of a partition against known classes (Manning, Raghavan & Schütze 2008, chapter 16): the
 * share of items that belong to the commonest class of their group, 0 to 1. It rises with the number
 * of groups. 1 for no items.
 */
export function purity(groups: ArrayLike<number>, classes: ArrayLike<number>): number {
  const table = contingency(groups, classes);
  const commonest = table.first.map(() => 0);
  for (const { first, size } of table.cells) commonest[first] = Math.max(commonest[first], size);
  return table.items === 0 ? 1 : commonest.reduce((a, b) => a + b, 0) / table.items;
}
