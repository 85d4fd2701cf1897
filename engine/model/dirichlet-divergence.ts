import { digamma, lgamma } from '../numbers/index.ts';

/**
 * Kullback-Leibler divergence KL(Dirichlet(a) || Dirichlet(b)) in nats, closed form:
 *
 *     log G(sum a) - log G(sum b) + sum over i of
 *       log G(b_i) - log G(a_i) + (a_i - b_i) (digamma(a_i) - digamma(sum a))
 *
 * Read from `length` places from `offset` on. Places where b is 0 are outside both distributions
 * and count for nothing (a must be 0 there too). From 0; 0 where a equals b.
 */
export function dirichletDivergence(
  a: ArrayLike<number>,
  b: ArrayLike<number>,
  offset = 0,
  length = a.length,
): number {
  let sumA = 0;
  let sumB = 0;
  for (let i = offset; i < offset + length; i++) {
    if (b[i] === 0) continue;
    sumA += a[i];
    sumB += b[i];
  }
  if (sumB === 0) return 0;
  const expected = digamma(sumA);
  let total = lgamma(sumA) - lgamma(sumB);
  for (let i = offset; i < offset + length; i++) {
    // Where a equals b, as for a word that a theme never met, the place adds exactly nothing.
    if (b[i] === 0 || a[i] === b[i]) continue;
    total += lgamma(b[i]) - lgamma(a[i]) + (a[i] - b[i]) * (digamma(a[i]) - expected);
  }
  return total;
}
