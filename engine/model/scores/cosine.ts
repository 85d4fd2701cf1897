/**
 * Cosine of the angle between two vectors of `length` values, read from their offsets on: 0 to 1 for
 * vectors without negative values. 0 where either has no length.
 */
export function cosine(
  a: ArrayLike<number>,
  b: ArrayLike<number>,
  length = a.length,
  offsetA = 0,
  offsetB = 0,
): number {
  let product = 0;
  let squareA = 0;
  let squareB = 0;
  for (let i = 0; i < length; i++) {
    const x = a[offsetA + i];
    const y = b[offsetB + i];
    product += x * y;
    squareA += x * x;
    squareB += y * y;
  }
  const scale = Math.sqrt(squareA) * Math.sqrt(squareB);
  return scale > 0 ? product / scale : 0;
}
