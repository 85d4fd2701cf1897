import { exp, hash32, log } from '../../numbers/index.ts';
import { checkCounts } from '../check-counts.ts';
import { createState } from '../collapsed/state.ts';
import { densePriors } from '../dense-priors.ts';
import { foldIn, proportions } from '../fold-in.ts';
import { defaultKernel } from '../kernel/index.ts';
import type { Counts, Priors } from '../types.ts';

export interface HeldOut {
  /** Mean log likelihood of a scored word, in nats. */
  readonly likelihood: number;
  /** exp(-likelihood): among how many equally likely words the model is undecided. */
  readonly perplexity: number;
  /** Words scored. */
  readonly words: number;
}

/** A word that no theme of its passage allows is scored as this probability. */
const least = 1e-12;

/**
 * How well fixed themes predict passages that they were not fitted on, by document completion
 * (Wallach, Murray, Salakhutdinov & Mimno 2009): half of each passage's words give its proportions,
 * the other half is scored. `priors` gives the proportions' prior; `phi` is K x V by rows.
 */
export function heldOut(
  counts: Counts,
  priors: Priors,
  phi: Float32Array,
  passes: number,
  seed: number,
): HeldOut {
  checkCounts('heldOut', counts);
  const { themes } = priors;
  const { words } = counts;
  if (phi.length !== themes * words) {
    throw new Error(`heldOut: phi.length is ${phi.length}; must be ${themes * words}`);
  }
  const [seen, scored] = halves(counts, seed);
  const dense = densePriors('heldOut', seen, priors);
  const state = createState(defaultKernel, seen, dense);
  foldIn(defaultKernel, state, dense, phi, passes);
  const theta = proportions(state, dense);

  let total = 0;
  let number = 0;
  for (let d = 0; d < scored.passages; d++) {
    for (let j = scored.offsets[d]; j < scored.offsets[d + 1]; j++) {
      let likelihood = 0;
      for (let k = 0; k < themes; k++) {
        likelihood += theta[d * themes + k] * phi[k * words + scored.indices[j]];
      }
      total += scored.counts[j] * log(Math.max(least, likelihood));
      number += scored.counts[j];
    }
  }
  const likelihood = number > 0 ? total / number : 0;
  return { likelihood, perplexity: exp(-likelihood), words: number };
}

/** Each occurrence of each word goes to one half or the other by a hash of where it stands. */
export function halves(counts: Counts, seed: number): [Counts, Counts] {
  const offsets: [number[], number[]] = [[0], [0]];
  const indices: [number[], number[]] = [[], []];
  const sizes: [number[], number[]] = [[], []];
  for (let d = 0; d < counts.passages; d++) {
    const passage = hash32(seed, d, 0);
    for (let j = counts.offsets[d]; j < counts.offsets[d + 1]; j++) {
      const inHalf: [number, number] = [0, 0];
      for (let n = 0; n < counts.counts[j]; n++) {
        const half = hash32(passage, counts.indices[j], n) & 1;
        inHalf[half] += Math.min(1, counts.counts[j] - n);
      }
      for (const half of [0, 1] as const) {
        if (inHalf[half] === 0) continue;
        indices[half].push(counts.indices[j]);
        sizes[half].push(inHalf[half]);
      }
    }
    for (const half of [0, 1] as const) offsets[half].push(indices[half].length);
  }
  return [0, 1].map((half) => ({
    passages: counts.passages,
    words: counts.words,
    offsets: Int32Array.from(offsets[half]),
    indices: Int32Array.from(indices[half]),
    counts: Float32Array.from(sizes[half]),
  })) as [Counts, Counts];
}
