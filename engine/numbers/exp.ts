const word = new Uint32Array(2);
const double = new Float64Array(word.buffer);
double[0] = 1;
/** Which of the two words carries the exponent: 1 on every machine that Node and Electron run on. */
const high = word[1] !== 0 ? 1 : 0;

/** ln 2 in two parts; the first has trailing zeros, so that its product with an exponent is exact. */
export const ln2High = 6.9314718036912381649e-1;
export const ln2Low = 1.90821492927058770002e-10;
export const log2e = 1.4426950408889634;

/**
 * The exponential function, from + - x / alone, so that its bits are the same everywhere.
 *
 * Domain: all numbers. Method: x = n ln 2 + r with |r| <= 0.35, the Taylor polynomial of degree 13
 * in r, and 2^n put together from its bits. Relative error below 4e-16 where the result is normal.
 * 0 below -745.2, Infinity above 709.79; NaN for NaN.
 */
export function exp(x: number): number {
  if (!(x > -746)) return x !== x ? x : 0;
  if (x > 710) return Infinity;
  const n = Math.floor(x * log2e + 0.5);
  const r = x - n * ln2High - n * ln2Low;
  let p = 1 / 6227020800;
  p = 1 / 479001600 + r * p;
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
  // Two steps, since 2^n itself may leave the range where the product does not.
  const half = n >> 1;
  return p * powerOfTwo(half) * powerOfTwo(n - half);
}

/** 2^n for an integer n, -1022 <= n <= 1023. */
export function powerOfTwo(n: number): number {
  word[high] = (n + 1023) << 20;
  word[1 - high] = 0;
  return double[0];
}
