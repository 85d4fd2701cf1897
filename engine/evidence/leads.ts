import type { Counts } from '../model/index.ts';

/** The theme that leads each passage (the first of equals), or -1 where nothing was counted. */
export function leads(counts: Counts, themes: number, theta: Float32Array): Int32Array {
  const found = new Int32Array(counts.passages).fill(-1);
  for (let d = 0; d < counts.passages; d++) {
    if (counts.offsets[d + 1] === counts.offsets[d]) continue;
    let best = 0;
    for (let k = 1; k < themes; k++) {
      if (theta[d * themes + k] > theta[d * themes + best]) best = k;
    }
    found[d] = best;
  }
  return found;
}

/** How strong the leading theme of each passage is, for passages with enough counted words. */
export function leadingStrengths(
  counts: Counts,
  themes: number,
  theta: Float32Array,
  countedWords: number,
): number[] {
  const strengths: number[] = [];
  leads(counts, themes, theta).forEach((row, d) => {
    let words = 0;
    for (let j = counts.offsets[d]; j < counts.offsets[d + 1]; j++) words += counts.counts[j];
    if (row >= 0 && words >= countedWords) strengths.push(theta[d * themes + row]);
  });
  return strengths;
}
