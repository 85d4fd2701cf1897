import type { DensePriors } from '../dense-priors.ts';
import { carve } from '../kernel/carve.ts';
import type { Kernel } from '../kernel/kernel.ts';
import type { SweepState } from '../kernel/state.ts';
import type { Counts } from '../types.ts';

/**
 * A state with its counts and priors in place and nothing expected yet: responsibilities 0. One
 * buffer holds all of it; responsibilities, entries x stride, are nearly the whole bill.
 */
export function createState(kernel: Kernel, counts: Counts, priors: DensePriors): SweepState {
  const { passages, words } = counts;
  const { themes } = priors;
  const stride = (themes + 3) & ~3;
  const entries = counts.indices.length;

  const { integers, singles } = carve(
    kernel,
    4 * (passages + 1 + 3 * entries + stride * (entries + 2 * passages + 2 * words + 4)),
  );
  const state: SweepState = {
    passages,
    words,
    themes,
    stride,
    offsets: integers(passages + 1),
    indices: integers(entries),
    counts: singles(entries),
    responsibilities: singles(entries * stride),
    passageThemes: singles(passages * stride),
    wordThemes: singles(words * stride),
    themeTotals: singles(stride),
    alpha: singles(passages * stride),
    eta: singles(words * stride),
    etaTotals: singles(stride),
    moving: singles(stride),
    normalisers: singles(entries),
    scratch: singles(stride),
  };
  state.offsets.set(counts.offsets);
  state.indices.set(counts.indices);
  state.counts.set(counts.counts);
  layRows(state.alpha, priors.alpha, passages, themes, stride);
  setPriors(state, priors);
  return state;
}

/** Lays eta and the pinned themes, so that a state can be used again with other ones. */
export function setPriors(state: SweepState, priors: DensePriors): void {
  const { words, themes, stride, eta, etaTotals, wordThemes, themeTotals, moving } = state;
  themeTotals.fill(1);
  moving.fill(0);
  etaTotals.fill(0);
  for (let k = 0; k < themes; k++) {
    const phi = priors.pinned[k];
    let total = 0;
    for (let w = 0; w < words; w++) {
      const value = phi ? 0 : priors.eta[k * words + w];
      eta[w * stride + k] = value;
      wordThemes[w * stride + k] = phi ? phi[w] : 0;
      total += value;
    }
    if (phi) continue;
    moving[k] = 1;
    themeTotals[k] = 0;
    // A theme that every word is shut out of has nothing to divide by; its numerators are all 0.
    etaTotals[k] = total > 0 ? total : 1;
  }
}

/** Theme-word distributions of a state, K x V by rows: (N_kw + eta_kw) / (N_k + eta_k), or phi. */
export function distributions(state: SweepState): Float32Array {
  const { words, themes, stride, eta, wordThemes, moving } = state;
  const phi = new Float32Array(themes * words);
  for (let k = 0; k < themes; k++) {
    let total = 0;
    for (let w = 0; w < words; w++) total += wordThemes[w * stride + k] + eta[w * stride + k];
    for (let w = 0; w < words; w++) {
      const value = wordThemes[w * stride + k] + eta[w * stride + k];
      phi[k * words + w] = moving[k] === 0 ? value : total > 0 ? value / total : 0;
    }
  }
  return phi;
}

/** K values: expected counts of each theme over all passages. */
export function themeSizes(state: SweepState): Float64Array {
  const sizes = new Float64Array(state.themes);
  for (let d = 0; d < state.passages; d++) {
    for (let k = 0; k < state.themes; k++) sizes[k] += state.passageThemes[d * state.stride + k];
  }
  return sizes;
}

function layRows(
  target: Float32Array,
  source: Float64Array,
  rows: number,
  width: number,
  stride: number,
): void {
  for (let row = 0; row < rows; row++) {
    for (let k = 0; k < width; k++) target[row * stride + k] = source[row * width + k];
  }
}
