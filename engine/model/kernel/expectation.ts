import { expDigamma } from '../../numbers/index.ts';

const { abs } = Math;

/**
 * What mean-field inference keeps, f64, as arrays in one buffer. Themes are the innermost dimension
 * in rows of `stride` lanes: `themes` rounded up to an even number. Padding lanes hold 0.
 */
export interface MeanFieldState {
  /** D. */
  readonly passages: number;
  /** V. */
  readonly words: number;
  /** K. */
  readonly themes: number;
  readonly stride: number;
  /** The counts, as in `Counts`. */
  readonly offsets: Int32Array;
  readonly indices: Int32Array;
  readonly counts: Float64Array;
  /** alpha_dk, a passage a row; 0 keeps the theme out of the passage. */
  readonly alpha: Float64Array;
  /** gamma_dk, a passage a row: the Dirichlet parameters of its proportions. */
  readonly gamma: Float64Array;
  /** exp(E[log phi_kw]), a word a row. */
  readonly expected: Float64Array;
  /** Expected counts of each word by theme, still without the factor `expected`; a word a row. */
  readonly statistics: Float64Array;
  /** Two rows of working space. */
  readonly scratch: Float64Array;
}

/** Keeps a quotient finite where all its factors have run out of range; no other sum notices it. */
const least = 1e-300;

/**
 * The E-step of batch variational inference (Blei, Ng & Jordan 2003; Hoffman, Blei & Bach 2010):
 * for each passage, again and again,
 *
 *     t_k = exp(digamma(gamma_k))
 *     gamma_k = alpha_k + t_k sum over words of count x expected_kw / sum_j t_j expected_jw
 *
 * until the mean absolute change of gamma is below `tolerance` or `limit` steps are done. Then adds
 * t_k count / sum_j t_j expected_jw to the statistics of each word; multiplied by `expected` they
 * are the expected counts. Scaling t by exp(digamma(sum gamma)) would cancel, and is left out.
 *
 * `flat` starts each gamma at 1, else where it stands. Returns the steps made over all passages.
 * Two lanes are summed side by side, then together: the order of the SIMD twin.
 */
export function expectation(
  state: MeanFieldState,
  limit: number,
  tolerance: number,
  flat: boolean,
): number {
  const { themes, stride, offsets, indices, counts } = state;
  const { alpha, gamma, expected, statistics, scratch } = state;
  const sums = stride;
  let steps = 0;
  statistics.fill(0);
  for (let d = 0; d < state.passages; d++) {
    const passage = d * stride;
    for (let k = 0; k < stride; k++) {
      const open = alpha[passage + k] > 0;
      if (flat) gamma[passage + k] = open ? 1 : 0;
      scratch[k] = open ? expDigamma(gamma[passage + k]) : 0;
    }
    for (let step = 0; step < limit; step++) {
      for (let k = 0; k < stride; k++) scratch[sums + k] = 0;
      for (let j = offsets[d]; j < offsets[d + 1]; j++) {
        const word = indices[j] * stride;
        const ratio = counts[j] / (mixture(scratch, expected, word, stride) + least);
        for (let k = 0; k < stride; k++) scratch[sums + k] += ratio * expected[word + k];
      }
      let change0 = 0;
      let change1 = 0;
      for (let k = 0; k < stride; k += 2) {
        const next0 = alpha[passage + k] + scratch[k] * scratch[sums + k];
        const next1 = alpha[passage + k + 1] + scratch[k + 1] * scratch[sums + k + 1];
        change0 += abs(next0 - gamma[passage + k]);
        change1 += abs(next1 - gamma[passage + k + 1]);
        gamma[passage + k] = next0;
        gamma[passage + k + 1] = next1;
      }
      for (let k = 0; k < stride; k++) {
        scratch[k] = alpha[passage + k] > 0 ? expDigamma(gamma[passage + k]) : 0;
      }
      steps++;
      if (change0 + change1 < tolerance * themes) break;
    }
    for (let j = offsets[d]; j < offsets[d + 1]; j++) {
      const word = indices[j] * stride;
      const ratio = counts[j] / (mixture(scratch, expected, word, stride) + least);
      for (let k = 0; k < stride; k++) statistics[word + k] += ratio * scratch[k];
    }
  }
  return steps;
}

function mixture(t: Float64Array, expected: Float64Array, word: number, stride: number): number {
  let s0 = 0;
  let s1 = 0;
  for (let k = 0; k < stride; k += 2) {
    s0 += t[k] * expected[word + k];
    s1 += t[k + 1] * expected[word + k + 1];
  }
  return s0 + s1;
}
