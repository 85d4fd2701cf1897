import { setPriors } from './collapsed/state.ts';
import type { DensePriors } from './dense-priors.ts';
import type { Kernel } from './kernel/kernel.ts';
import type { SweepState } from './kernel/state.ts';

/**
 * Finds the proportions of all passages of a state under frozen themes `phi` (K x V by rows), in
 * place: `passes` times over the words of each passage, from its prior on, leaving each occurrence
 * out of its own prediction (CVB0 with phi fixed). Passages do not touch each other, so one
 * passage's answer hangs on its own words and prior alone.
 */
export function foldIn(
  kernel: Kernel,
  state: SweepState,
  priors: DensePriors,
  phi: Float32Array,
  passes: number,
): void {
  const { words } = state;
  const pinned = priors.pinned.map((_, k) => phi.subarray(k * words, (k + 1) * words));
  setPriors(state, { ...priors, pinned });
  kernel.assign(state);
  kernel.recount(state);
  for (let pass = 1; pass < passes; pass++) kernel.sweep(state, 1);
  kernel.recount(state);
}

/** Posterior expected proportions of a state, D x K by rows: (alpha_dk + N_dk) / sum. */
export function proportions(state: SweepState, priors: DensePriors): Float32Array {
  const { passages, themes, stride, passageThemes } = state;
  const theta = new Float32Array(passages * themes);
  for (let d = 0; d < passages; d++) {
    let total = 0;
    for (let k = 0; k < themes; k++) {
      total += priors.alpha[d * themes + k] + Math.max(0, passageThemes[d * stride + k]);
    }
    for (let k = 0; k < themes; k++) {
      const value = priors.alpha[d * themes + k] + Math.max(0, passageThemes[d * stride + k]);
      theta[d * themes + k] = value / total;
    }
  }
  return theta;
}
