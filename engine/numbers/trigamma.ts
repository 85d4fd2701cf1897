/**
 * The trigamma function: the derivative of digamma.
 *
 * Domain: x > 0 (NaN elsewhere). Method: the recurrence psi1(x) = psi1(x + 1) + 1 / x^2 up to 10,
 * then the asymptotic series (Abramowitz & Stegun 1964, 6.4.11). Relative error below 1e-14.
 */
export function trigamma(x: number): number {
  if (!(x > 0)) return NaN;
  let z = x;
  let sum = 0;
  while (z < 10) {
    sum += 1 / (z * z);
    z += 1;
  }
  const r = 1 / z;
  const q = r * r;
  const series =
    r *
    q *
    (1 / 6 -
      q * (1 / 30 - q * (1 / 42 - q * (1 / 30 - q * (5 / 66 - q * (691 / 2730 - q * (7 / 6)))))));
  return sum + (r + 0.5 * q + series);
}
