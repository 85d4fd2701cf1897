import type { Counts } from '../model/index.ts';

/**
 * What sets each theme apart: its word distribution less the shares that words have in all counted
 * words, K x V by rows. Rows sum to 0.
 *
 * Themes are compared by this. By their plain distributions any two themes are alike, because they
 * share the common words, and shuffled words give the most alike of all (README.md).
 */
export function departures(phi: Float32Array, counts: Counts): Float32Array {
  const shares = new Float64Array(counts.words);
  let all = 0;
  for (let j = 0; j < counts.indices.length; j++) {
    shares[counts.indices[j]] += counts.counts[j];
    all += counts.counts[j];
  }
  return phi.map((share, i) => share - (all > 0 ? shares[i % counts.words] / all : 0));
}
