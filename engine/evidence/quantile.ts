/**
 * The value below which a share of the values lies: the smallest value with at least that share of
 * all at or below it (Hyndman & Fan 1996, definition 1). 0 for no values.
 */
export function quantile(values: ArrayLike<number>, share: number): number {
  if (values.length === 0) return 0;
  const ascending = Float64Array.from(values).sort();
  const rank = Math.ceil(share * ascending.length - 1e-9);
  return ascending[Math.min(ascending.length, Math.max(1, rank)) - 1];
}

/** 0 for no values. */
export function mean(values: ArrayLike<number>): number {
  let total = 0;
  for (let i = 0; i < values.length; i++) total += values[i];
  return values.length === 0 ? 0 : total / values.length;
}

/** Standard error of a mean, from the spread of its values; 0 for fewer than two. */
export function standardError(values: ArrayLike<number>): number {
  const n = values.length;
  if (n < 2) return 0;
  const middle = mean(values);
  let squares = 0;
  for (let i = 0; i < n; i++) squares += (values[i] - middle) * (values[i] - middle);
  return Math.sqrt(squares / (n - 1) / n);
}
