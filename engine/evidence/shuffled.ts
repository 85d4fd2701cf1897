import { createGenerator } from '../numbers/index.ts';
import type { Counts } from '../model/index.ts';

/**
 * The same study with its counted words dealt out anew: every passage has as many words as before and
 * every word occurs as often as before, but which words stand together is chance. What a method finds
 * here it would find in anything. Takes whole counts.
 */
export function shuffled(counts: Counts, seed: number): Counts {
  const { passages, offsets, indices } = counts;
  const said: number[] = [];
  const lengths = new Int32Array(passages);
  for (let d = 0; d < passages; d++) {
    for (let j = offsets[d]; j < offsets[d + 1]; j++) {
      for (let n = 0; n < counts.counts[j]; n++) said.push(indices[j]);
      lengths[d] += counts.counts[j];
    }
  }
  const dealt = createGenerator(seed, 3).shuffle(Int32Array.from(said));

  const newOffsets = new Int32Array(passages + 1);
  const newIndices: number[] = [];
  const newCounts: number[] = [];
  let at = 0;
  for (let d = 0; d < passages; d++) {
    const passage = dealt.slice(at, at + lengths[d]).sort();
    at += lengths[d];
    passage.forEach((word, i) => {
      if (i > 0 && passage[i - 1] === word) newCounts[newCounts.length - 1]++;
      else {
        newIndices.push(word);
        newCounts.push(1);
      }
    });
    newOffsets[d + 1] = newIndices.length;
  }
  return {
    passages,
    words: counts.words,
    offsets: newOffsets,
    indices: Int32Array.from(newIndices),
    counts: Float32Array.from(newCounts),
  };
}
