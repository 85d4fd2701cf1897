import { reciprocalSum } from './digamma.ts';
import { ln2High, ln2Low, log2e, powerOfTwo } from './exp.ts';

/**
 * exp(digamma(x)), which mean-field inference takes of every parameter, without a logarithm.
 *
 * Domain: 1e-8 <= x <= 1e30. Method: digamma(x) = digamma(y + 1/2) - S with y = x + 7.5 and S the
 * sum of 1 / (x + i), i = 0 … 7; exp(digamma(y + 1/2)) = y (1 + q / 24 - 37 q^2 / 5760 + …) with
 * q = 1 / y^2, the exponential of the asymptotic series in Bernoulli numbers (Abramowitz & Stegun
 * 1964, 6.3.18 moved by a half). S is capped at 700, so that the result is 1e-304 at the least and
 * never 0. Relative error below 1e-12.
 *
 * No branch depends on x: the mean-field kernel does the same operations in the same order, two
 * numbers at a time (model/kernel).
 */
export function expDigamma(x: number): number {
  const sum = Math.min(700, reciprocalSum(x));
  const y = x + 7.5;
  const q = 1 / (y * y);
  const factor = y * (1 + q * (c1 + q * (c2 + q * (c3 + q * (c4 + q * (c5 + q * (c6 + q * c7)))))));
  return factor * expOfNegative(sum);
}

const c1 = 1 / 24;
const c2 = -37 / 5760;
const c3 = 10313 / 2903040;
const c4 = -5509121 / 1393459200;
const c5 = 2709398569 / 367873228800;
const c6 = -499769010050743 / 24103053950976000;
const c7 = 47655701498228027 / 578473294823424000;

/** exp(-s) for 0 <= s <= 700. */
function expOfNegative(s: number): number {
  const n = Math.floor(0.5 - s * log2e);
  const r = -s - n * ln2High - n * ln2Low;
  let p = 1 / 479001600;
  p = 1 / 39916800 + r * p;
  p = 1 / 3628800 + r * p;
  p = 1 / 362880 + r * p;
  p = 1 / 40320 + r * p;
  p = 1 / 5040 + r * p;
  p = 1 / 720 + r * p;
  p = 1 / 120 + r * p;
  p = 1 / 24 + r * p;
  p = 1 / 6 + r * p;
  p = 1 / 2 + r * p;
  p = 1 + r * p;
  p = 1 + r * p;
  return p * powerOfTwo(n);
}
