import { log } from '../../numbers/index.ts';
import { boundTerms } from '../bound.ts';
import { passageLengths } from '../check-counts.ts';
import type { SweepState } from '../kernel/state.ts';
import type { BoundTerms } from '../types.ts';
import type { Prepared } from './prepare.ts';

/**
 * Mean predictive log likelihood a counted word in the sweep just made (exponent 1), in nats: each
 * entry's normaliser is its predictive weight given all the others, less what the passage's
 * proportions are normalised by. Entries that no theme may take are left out.
 */
export function predictiveLikelihood({ counts, state }: Prepared): number {
  const { passages, themes, stride, offsets, normalisers, alpha } = state;
  const lengths = passageLengths(counts);
  let total = 0;
  let counted = 0;
  for (let d = 0; d < passages; d++) {
    let prior = 0;
    for (let k = 0; k < themes; k++) prior += alpha[d * stride + k];
    for (let j = offsets[d]; j < offsets[d + 1]; j++) {
      if (!(normalisers[j] > 0)) continue;
      const count = counts.counts[j];
      const others = Math.max(0, lengths[d] - Math.min(1, count)) + prior;
      total += count * (log(normalisers[j]) - log(others));
      counted += count;
    }
  }
  return counted > 0 ? total / counted : 0;
}

/**
 * The bound's terms where a collapsed fit stands: its expected counts, read as mean-field
 * parameters gamma = alpha + N_dk and lambda = eta + N_kw, give a valid bound. It rises from sweep
 * to sweep in practice but need not.
 */
export function collapsedBound({ counts, priors, state }: Prepared): BoundTerms {
  const { passages, themes, stride } = state;
  const gamma = priors.alpha.slice();
  for (let d = 0; d < passages; d++) {
    for (let k = 0; k < themes; k++) {
      // Rounding in f32 can leave a count a hair below 0.
      gamma[d * themes + k] += Math.max(0, state.passageThemes[d * stride + k]);
    }
  }
  const lambda = expectedWordCounts(state);
  for (let i = 0; i < lambda.length; i++) lambda[i] += priors.eta[i];
  return boundTerms(counts, priors, gamma, lambda);
}

/** N_kw from the responsibilities, K x V by rows, for pinned themes too. */
export function expectedWordCounts(state: SweepState): Float64Array {
  const { passages, words, themes, stride, offsets, indices, counts, responsibilities } = state;
  const expected = new Float64Array(themes * words);
  for (let j = offsets[0]; j < offsets[passages]; j++) {
    for (let k = 0; k < themes; k++) {
      expected[k * words + indices[j]] += counts[j] * responsibilities[j * stride + k];
    }
  }
  return expected;
}
