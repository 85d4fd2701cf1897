import { expDigamma, log } from '../numbers/index.ts';
import type { DensePriors } from './dense-priors.ts';
import { dirichletDivergence } from './dirichlet-divergence.ts';
import type { BoundTerms, Counts } from './types.ts';

/**
 * The evidence lower bound of latent Dirichlet allocation at the Dirichlet parameters `gamma`
 * (D x K, proportions) and `lambda` (K x V, distributions), in nats, with the responsibilities that
 * are best for them (Blei, Ng & Jordan 2003; Hoffman, Blei & Bach 2010). It carries no multinomial
 * coefficient: perplexity is exp(-bound / counted words). It never exceeds the log evidence.
 */
export function boundTerms(
  counts: Counts,
  priors: DensePriors,
  gamma: Float64Array,
  lambda: Float64Array,
): BoundTerms {
  return {
    words: wordsTerm(counts, priors, gamma, expectedDistributions(priors, lambda, counts.words)),
    proportions: proportionsTerm(priors, gamma, counts.passages),
    distributions: distributionsTerm(priors, lambda, counts.words),
  };
}

export function boundOf(terms: BoundTerms): number {
  return terms.words + terms.proportions + terms.distributions;
}

/**
 * The sum over counted words of log sum_k exp(E[log theta_dk] + E[log phi_kw]): the expected log
 * likelihood and the entropy of the responsibilities together. A word that no theme may take in its
 * passage counts for nothing.
 */
export function wordsTerm(
  counts: Counts,
  priors: DensePriors,
  gamma: Float64Array,
  expected: Float64Array,
): number {
  const { themes } = priors;
  const { passages, words, offsets, indices } = counts;
  const weights = new Float64Array(themes);
  let total = 0;
  for (let d = 0; d < passages; d++) {
    if (offsets[d] === offsets[d + 1]) continue;
    expectedProportions(priors, gamma, d, weights);
    for (let j = offsets[d]; j < offsets[d + 1]; j++) {
      let mixed = 0;
      for (let k = 0; k < themes; k++) mixed += weights[k] * expected[k * words + indices[j]];
      if (mixed > 0) total += counts.counts[j] * log(mixed);
    }
  }
  return total;
}

/** - KL(q(theta) || p(theta)), summed over passages: never above 0. */
export function proportionsTerm(
  priors: DensePriors,
  gamma: Float64Array,
  passages: number,
): number {
  const { themes, alpha } = priors;
  let total = 0;
  for (let d = 0; d < passages; d++) total -= dirichletDivergence(gamma, alpha, d * themes, themes);
  return total;
}

/** - KL(q(phi) || p(phi)), summed over the themes whose words move: never above 0. */
export function distributionsTerm(
  priors: DensePriors,
  lambda: Float64Array,
  words: number,
): number {
  let total = 0;
  for (let k = 0; k < priors.themes; k++) {
    if (!priors.pinned[k]) total -= dirichletDivergence(lambda, priors.eta, k * words, words);
  }
  return total;
}

/** exp(E[log theta_dk]) of passage d into `weights`; 0 where alpha is 0. */
export function expectedProportions(
  priors: DensePriors,
  gamma: Float64Array,
  d: number,
  weights: Float64Array,
): void {
  const { themes, alpha } = priors;
  let sum = 0;
  for (let k = 0; k < themes; k++) if (alpha[d * themes + k] > 0) sum += gamma[d * themes + k];
  const scale = sum > 0 ? 1 / expDigamma(sum) : 0;
  for (let k = 0; k < themes; k++) {
    const i = d * themes + k;
    weights[k] = alpha[i] > 0 ? expDigamma(gamma[i]) * scale : 0;
  }
}

/** exp(E[log phi_kw]), K x V; phi itself where a theme is pinned; 0 where a word is shut out. */
export function expectedDistributions(
  priors: DensePriors,
  lambda: Float64Array,
  words: number,
): Float64Array {
  const { themes, eta, pinned } = priors;
  const expected = new Float64Array(themes * words);
  for (let k = 0; k < themes; k++) {
    const phi = pinned[k];
    if (phi) {
      expected.set(phi, k * words);
      continue;
    }
    let sum = 0;
    for (let w = 0; w < words; w++) if (eta[k * words + w] > 0) sum += lambda[k * words + w];
    const scale = sum > 0 ? 1 / expDigamma(sum) : 0;
    for (let w = 0; w < words; w++) {
      const i = k * words + w;
      expected[i] = eta[i] > 0 ? expDigamma(lambda[i]) * scale : 0;
    }
  }
  return expected;
}
