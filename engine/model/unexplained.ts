import { log } from '../numbers/index.ts';
import type { Counts } from './types.ts';

/**
 * Below this a word's probability is taken as this: a word that all of a passage's themes shut out
 * has probability 0, and the mean must stay finite. 1e-12 is 27.6 nats.
 */
const least = 1e-12;

/**
 * Mean negative log likelihood a counted word of each passage under its own proportions, in nats;
 * 0 for a passage without counted words. High where the themes explain a passage badly.
 */
export function unexplained(
  counts: Counts,
  themes: number,
  theta: Float32Array,
  phi: Float32Array,
): Float32Array {
  const { passages, words, offsets, indices } = counts;
  const result = new Float32Array(passages);
  for (let d = 0; d < passages; d++) {
    let total = 0;
    let counted = 0;
    for (let j = offsets[d]; j < offsets[d + 1]; j++) {
      let likelihood = 0;
      for (let k = 0; k < themes; k++) {
        likelihood += theta[d * themes + k] * phi[k * words + indices[j]];
      }
      total -= counts.counts[j] * log(Math.max(least, likelihood));
      counted += counts.counts[j];
    }
    result[d] = counted > 0 ? total / counted : 0;
  }
  return result;
}
