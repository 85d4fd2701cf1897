import { log } from '../../numbers/index.ts';

/**
 * Jensen-Shannon divergence of two distributions in nats (Lin 1991), 0 to ln 2. Its square root is a
 * distance; this is not the root.
 */
export function jensenShannon(p: ArrayLike<number>, q: ArrayLike<number>): number {
  let total = 0;
  for (let i = 0; i < p.length; i++) {
    const middle = (p[i] + q[i]) / 2;
    if (p[i] > 0) total += p[i] * log(p[i] / middle);
    if (q[i] > 0) total += q[i] * log(q[i] / middle);
  }
  return Math.max(0, total / 2);
}

/** Hellinger distance of two distributions, 0 to 1. */
export function hellinger(p: ArrayLike<number>, q: ArrayLike<number>): number {
  let total = 0;
  for (let i = 0; i < p.length; i++) {
    const difference = Math.sqrt(p[i]) - Math.sqrt(q[i]);
    total += difference * difference;
  }
  return Math.min(1, Math.sqrt(total / 2));
}

/** Total variation of two distributions, 0 to 1: half the sum of absolute differences. */
export function totalVariation(p: ArrayLike<number>, q: ArrayLike<number>): number {
  let total = 0;
  for (let i = 0; i < p.length; i++) total += Math.abs(p[i] - q[i]);
  return total / 2;
}
