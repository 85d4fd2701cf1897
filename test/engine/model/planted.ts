import { createGenerator } from '../../../engine/numbers/index.ts';
import type { Counts } from '../../../engine/model/index.ts';

/** A corpus drawn from the model's own story, and what it was drawn from. */
export interface Planted {
  readonly counts: Counts;
  /** K x V by rows. */
  readonly phi: Float64Array;
  /** D x K by rows. */
  readonly theta: Float64Array;
}

/**
 * Passages of `length` words on one to three of the planted themes. Each theme prefers a random
 * order of the vocabulary, falling off as 1 / rank, over a background that all share: no word
 * belongs to one theme alone.
 */
export function plantedCorpus(
  passages: number,
  words: number,
  themes: number,
  length: number,
  seed: number,
): Planted {
  const chance = createGenerator(seed);
  const phi = new Float64Array(themes * words);
  for (let k = 0; k < themes; k++) {
    const order = chance.shuffle(Array.from({ length: words }, (_, w) => w));
    let sum = 0;
    order.forEach((w, rank) => {
      phi[k * words + w] = 1 / (rank + 2) + 0.3 / (w + 10);
      sum += phi[k * words + w];
    });
    for (let w = 0; w < words; w++) phi[k * words + w] /= sum;
  }
  const theta = new Float64Array(passages * themes);
  const rows: Map<number, number>[] = [];
  for (let d = 0; d < passages; d++) {
    const told = chance.shuffle(Array.from({ length: themes }, (_, k) => k));
    const weights = [0.7, 0.2, 0.1].slice(0, 1 + chance.integer(3));
    const sum = weights.reduce((a, b) => a + b, 0);
    weights.forEach((weight, i) => {
      if (i < themes) theta[d * themes + told[i]] = weight / sum;
    });
    const row = new Map<number, number>();
    for (let n = 0; n < length; n++) {
      const k = draw(theta.subarray(d * themes, (d + 1) * themes), chance.uniform());
      const w = draw(phi.subarray(k * words, (k + 1) * words), chance.uniform());
      row.set(w, (row.get(w) ?? 0) + 1);
    }
    rows.push(row);
  }
  return { counts: countsOf(rows, words), phi, theta };
}

function draw(weights: Float64Array, u: number): number {
  let passed = 0;
  for (let i = 0; i < weights.length; i++) {
    passed += weights[i];
    if (u < passed) return i;
  }
  return weights.length - 1;
}

/** Counts from a map of word to count for each passage. */
export function countsOf(rows: readonly ReadonlyMap<number, number>[], words: number): Counts {
  const offsets = [0];
  const indices: number[] = [];
  const counts: number[] = [];
  for (const row of rows) {
    for (const [w, n] of [...row].sort((a, b) => a[0] - b[0])) {
      indices.push(w);
      counts.push(n);
    }
    offsets.push(indices.length);
  }
  return {
    passages: rows.length,
    words,
    offsets: Int32Array.from(offsets),
    indices: Int32Array.from(indices),
    counts: Float32Array.from(counts),
  };
}

/** Counts from a dense table, a passage a row. */
export function countsOfTable(table: readonly (readonly number[])[]): Counts {
  const rows = table.map((row) => new Map([...row.entries()].filter(([, n]) => n > 0)));
  return countsOf(rows, table.length > 0 ? table[0].length : 0);
}
