import { checkCounts } from '../check-counts.ts';
import { createState } from '../collapsed/state.ts';
import { densePriors } from '../dense-priors.ts';
import { foldIn, proportions } from '../fold-in.ts';
import { defaultKernel } from '../kernel/index.ts';
import type { Counts, Priors } from '../types.ts';

/**
 * Proportions of passages under themes that stay as they are (`phi`, K x V by rows), D x K by rows:
 * what a fit does last with its own themes, for any passages. `priors` gives the proportions' prior.
 */
export function folded(
  counts: Counts,
  priors: Priors,
  phi: Float32Array,
  passes: number,
): Float32Array {
  checkCounts('folded', counts);
  if (phi.length !== priors.themes * counts.words) {
    throw new Error(`folded: phi.length is ${phi.length}; must be ${priors.themes * counts.words}`);
  }
  const dense = densePriors('folded', counts, priors);
  const state = createState(defaultKernel, counts, dense);
  foldIn(defaultKernel, state, dense, phi, passes);
  return proportions(state, dense);
}
