import { prepare } from './collapsed/prepare.ts';
import { setPriors } from './collapsed/state.ts';
import type { Counts, Priors } from './types.ts';

/**
 * The theme that leads each passage, by the first pass of the fold alone: the mean over the counted
 * words of alpha_dk phi_kw, normalised. Steadier from fit to fit than the largest of the converged
 * proportions, which later passes sharpen (README.md). -1 for a passage without counted words.
 */
export function leadingThemes(counts: Counts, priors: Priors, phi: Float32Array): Int32Array {
  const { kernel, state, priors: dense } = prepare('leadingThemes', counts, priors);
  const { words, themes, stride } = state;
  if (phi.length !== themes * words) {
    throw new Error(`leadingThemes: phi.length is ${phi.length}; must be ${themes * words}`);
  }
  const pinned = dense.pinned.map((_, k) => phi.subarray(k * words, (k + 1) * words));
  setPriors(state, { ...dense, pinned });
  kernel.assign(state);
  kernel.recount(state);
  const leading = new Int32Array(counts.passages).fill(-1);
  for (let d = 0; d < counts.passages; d++) {
    let most = 0;
    for (let k = 0; k < themes; k++) {
      const share = state.passageThemes[d * stride + k];
      if (share > most) {
        most = share;
        leading[d] = k;
      }
    }
  }
  return leading;
}
