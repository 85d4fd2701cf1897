import { cosine } from './cosine.ts';
import { matching } from './matching.ts';

export interface ThemeMatch {
  /** For each theme of the first set its partner in the second, -1 where none is left for it. */
  readonly partner: Int32Array;
  /** The cosine of each pair, 0 without a partner. */
  readonly cosines: Float64Array;
}

/** Pairs the themes of two fits (rows of `words` values) so that their cosines are largest in sum. */
export function matchThemes(a: ArrayLike<number>, b: ArrayLike<number>, words: number): ThemeMatch {
  const rows = a.length / words;
  const columns = b.length / words;
  const cost = new Float64Array(rows * columns);
  for (let i = 0; i < rows; i++) {
    for (let j = 0; j < columns; j++) {
      cost[i * columns + j] = -cosine(a, b, words, i * words, j * words);
    }
  }
  const partner = matching(cost, rows, columns);
  const cosines = Float64Array.from(partner, (j, i) => (j < 0 ? 0 : -cost[i * columns + j]));
  return { partner, cosines };
}
