import { ln2High, ln2Low } from './exp.ts';

const word = new Uint32Array(2);
const double = new Float64Array(word.buffer);
double[0] = 1;
const high = word[1] !== 0 ? 1 : 0;

/**
 * The natural logarithm, from + - x / alone, so that its bits are the same everywhere.
 *
 * Domain: x >= 0; -Infinity at 0, NaN below and for NaN. Method: x = 2^e m with m between sqrt(1/2)
 * and sqrt(2), and log m = 2 artanh((m - 1) / (m + 1)) by its series. Relative error below 1e-15.
 */
export function log(x: number): number {
  if (!(x > 0)) return x === 0 ? -Infinity : NaN;
  if (x === Infinity) return x;
  let e = 0;
  if (x < 2.2250738585072014e-308) {
    x *= 18014398509481984;
    e = -54;
  }
  double[0] = x;
  e += (word[high] >>> 20) - 1023;
  word[high] = (word[high] & 0x000fffff) | 0x3ff00000;
  let m = double[0];
  if (m > 1.4142135623730951) {
    m *= 0.5;
    e += 1;
  }
  const d = m - 1;
  const s = d / (m + 1);
  const q = s * s;
  let tail = 2 / 21;
  tail = 2 / 19 + q * tail;
  tail = 2 / 17 + q * tail;
  tail = 2 / 15 + q * tail;
  tail = 2 / 13 + q * tail;
  tail = 2 / 11 + q * tail;
  tail = 2 / 9 + q * tail;
  tail = 2 / 7 + q * tail;
  tail = 2 / 5 + q * tail;
  tail = q * (2 / 3 + q * tail);
  // 2 s = d - s d exactly, and d is exact: the leading term carries no rounding error of its own.
  return e * ln2High + (d - (s * (d - tail) - e * ln2Low));
}
