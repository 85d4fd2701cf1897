import { log } from '../../numbers/index.ts';
import type { Counts } from '../types.ts';

/** Which passages each word stands in, ascending. */
export interface Occurrences {
  readonly passages: number;
  readonly of: readonly Int32Array[];
}

export function occurrences({ passages, words, offsets, indices }: Counts): Occurrences {
  const sizes = new Int32Array(words);
  for (let j = 0; j < indices.length; j++) sizes[indices[j]]++;
  const of = Array.from(sizes, (size) => new Int32Array(size));
  const filled = new Int32Array(words);
  for (let d = 0; d < passages; d++) {
    for (let j = offsets[d]; j < offsets[d + 1]; j++) {
      of[indices[j]][filled[indices[j]]++] = d;
    }
  }
  return { passages, of };
}

/**
 * Coherence of a theme's first words: mean normalised pointwise mutual information of their pairs
 * over passages (Bouma 2009; Röder, Both & Hinneburg 2015), -1 to 1. A pair that never meets gives
 * -1, one that stands in every passage 1. 0 for fewer than two words.
 */
export function npmi({ passages, of }: Occurrences, words: readonly number[]): number {
  let total = 0;
  let pairs = 0;
  for (let m = 1; m < words.length; m++) {
    for (let l = 0; l < m; l++) {
      const a = of[words[m]];
      const b = of[words[l]];
      const both = common(a, b);
      pairs++;
      if (both === 0) total -= 1;
      else if (both === passages) total += 1;
      else {
        const ratio = (both / a.length) * (passages / b.length);
        total += log(ratio) / -log(both / passages);
      }
    }
  }
  return pairs === 0 ? 0 : total / pairs;
}

/**
 * Coherence of a theme's first words, likeliest first (Mimno, Wallach, Talley, Leenders & McCallum
 * 2011, equation 1): the sum over pairs of ln((passages with both + 1) / passages with the likelier
 * one). The nearer to 0 the better. Words that stand nowhere are passed over.
 */
export function umass({ of }: Occurrences, words: readonly number[]): number {
  let total = 0;
  for (let m = 1; m < words.length; m++) {
    for (let l = 0; l < m; l++) {
      const likelier = of[words[l]];
      if (likelier.length === 0) continue;
      total += log((common(of[words[m]], likelier) + 1) / likelier.length);
    }
  }
  return total;
}

/** How many values two ascending lists share. */
function common(a: Int32Array, b: Int32Array): number {
  let i = 0;
  let j = 0;
  let shared = 0;
  while (i < a.length && j < b.length) {
    if (a[i] === b[j]) {
      shared++;
      i++;
      j++;
    } else if (a[i] < b[j]) i++;
    else j++;
  }
  return shared;
}
