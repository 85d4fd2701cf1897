/**
 * The sum of the values in their order, with the rounding errors carried along (Neumaier 1974,
 * "Rundungsfehleranalyse einiger Verfahren zur Summation endlicher Summen"): as good as exact for
 * sums that do not cancel. 0 for no values.
 */
export function sum(values: ArrayLike<number>): number {
  let total = 0;
  let lost = 0;
  for (let i = 0; i < values.length; i++) {
    const value = values[i];
    const next = total + value;
    lost += Math.abs(total) >= Math.abs(value) ? total - next + value : value - next + total;
    total = next;
  }
  return total + lost;
}
