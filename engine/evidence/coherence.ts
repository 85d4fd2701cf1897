import { npmi, occurrences, type Counts } from '../model/index.ts';

/** A theme's first so many words are asked whether they meet (common practice, no source). */
export const wordsAsked = 10;

/** NPMI of each theme's first words over the passages, K values from -1 to 1. */
export function coherence(counts: Counts, phi: Float32Array): number[] {
  const found = occurrences(counts);
  const { words } = counts;
  return Array.from({ length: phi.length / words }, (_, k) =>
    npmi(found, firstWords(phi.subarray(k * words, (k + 1) * words), wordsAsked)),
  );
}

/** The likeliest words of a theme, ties in vocabulary order; never one at zero. */
function firstWords(row: Float32Array, count: number): number[] {
  const best: number[] = [];
  for (let w = 0; w < row.length; w++) {
    if (row[w] <= 0 || (best.length === count && row[w] <= row[best[count - 1]])) continue;
    let place = best.length;
    while (place > 0 && row[best[place - 1]] < row[w]) place--;
    best.splice(place, 0, w);
    if (best.length > count) best.pop();
  }
  return best;
}
