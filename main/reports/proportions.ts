import { strengthOf, type Fitted } from '../../engine/themes/index.ts';

const million = 1_000_000;

/**
 * A passage's proportions to six decimals, K values that sum to one exactly: what is left after
 * cutting goes to the largest remainders, the first of equals. Every report takes its strengths
 * from here, so that they agree in the last decimal.
 */
export function printedProportions(fitted: Fitted, passage: number): number[] {
  const exact = fitted.fit.themes.map((_, row) => strengthOf(fitted, passage, row) * million);
  const printed = exact.map(Math.floor);
  let left = printed.reduce((rest, value) => rest - value, million);
  const byRemainder = exact
    .map((value, row) => ({ row, remainder: value - printed[row] }))
    .sort((a, b) => b.remainder - a.remainder || a.row - b.row);
  // Rows sum to one within f32: at most a few millionths more than there are rows are left.
  for (let i = 0; left > 0; i++, left--) printed[byRemainder[i % exact.length].row]++;
  for (; left < 0; left++) printed[printed.indexOf(Math.max(...printed))]--;
  return printed.map((value) => value / million);
}

/** To six decimals, as it is printed: what is ordered by a number is ordered by what is seen. */
export function toSixDecimals(value: number): number {
  return Math.round(value * million) / million;
}
