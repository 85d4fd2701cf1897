import type { Exponent } from './kernel.ts';
import type { SweepState } from './state.ts';

const { fround, sqrt, abs } = Math;

/**
 * One sweep of collapsed variational inference of order zero (CVB0: Asuncion, Welling, Smyth & Teh
 * 2009), in f32, entry by entry:
 *
 *     gamma_k  proportional to  (N_dk - self + alpha_dk) (N_wk - self + eta_wk) / (N_k - self + eta_k)
 *
 * to the power of the exponent, where self is one occurrence's share of what is being replaced
 * (min(1, count) x gamma_k: entries of a split theme weigh less than one). The expected counts move
 * along at once. A pinned theme's factor for the word is its phi, and only N_dk moves.
 *
 * Zeros are exact: where alpha or eta is 0 and the responsibilities start at 0, every factor stays 0.
 * An entry that no theme may take keeps zero responsibilities everywhere and counts nowhere.
 *
 * Four lanes are summed side by side, then as (0 + 1) + (2 + 3): the order of the SIMD twin.
 */
export function sweep(state: SweepState, exponent: Exponent): number {
  const { stride, offsets, indices, counts, responsibilities, normalisers, scratch } = state;
  const { passageThemes, wordThemes, themeTotals, alpha, eta, etaTotals, moving } = state;
  let changed = 0;
  for (let d = 0; d < state.passages; d++) {
    const passage = d * stride;
    for (let j = offsets[d]; j < offsets[d + 1]; j++) {
      const word = indices[j] * stride;
      const entry = j * stride;
      const count = counts[j];
      const one = count < 1 ? count : 1;

      for (let k = 0; k < stride; k++) {
        const self = fround(one * responsibilities[entry + k]);
        const moved = fround(self * moving[k]);
        const a = fround(positive(fround(passageThemes[passage + k] - self)) + alpha[passage + k]);
        const b = fround(positive(fround(wordThemes[word + k] - moved)) + eta[word + k]);
        const c = fround(positive(fround(themeTotals[k] - moved)) + etaTotals[k]);
        const weight = fround(fround(a * b) / c);
        scratch[k] = exponent === 1 ? weight : tempered(weight, exponent);
      }
      const total = laneSum(scratch, stride);
      normalisers[j] = total;
      const scale = total > 0 ? fround(1 / total) : 0;

      for (let k = 0; k < stride; k++) {
        const share = fround(scratch[k] * scale);
        const change = fround(count * fround(share - responsibilities[entry + k]));
        const moved = fround(change * moving[k]);
        responsibilities[entry + k] = share;
        passageThemes[passage + k] += change;
        wordThemes[word + k] += moved;
        themeTotals[k] += moved;
        scratch[k] = abs(change);
      }
      changed += laneSum(scratch, stride);
    }
  }
  return changed;
}

function positive(x: number): number {
  return x > 0 ? x : 0;
}

/** x to the power of 1/2, 3/4 or 7/8. */
function tempered(x: number, exponent: Exponent): number {
  const half = fround(sqrt(x));
  if (exponent === 0.5) return half;
  const quarter = fround(sqrt(half));
  const threeQuarters = fround(half * quarter);
  return exponent === 0.75 ? threeQuarters : fround(threeQuarters * fround(sqrt(quarter)));
}

function laneSum(row: Float32Array, stride: number): number {
  let s0 = 0;
  let s1 = 0;
  let s2 = 0;
  let s3 = 0;
  for (let k = 0; k < stride; k += 4) {
    s0 = fround(s0 + row[k]);
    s1 = fround(s1 + row[k + 1]);
    s2 = fround(s2 + row[k + 2]);
    s3 = fround(s3 + row[k + 3]);
  }
  return fround(fround(s0 + s1) + fround(s2 + s3));
}

/** gamma_dwk proportional to alpha_dk phi_kw: where a passage stands before its words are weighed. */
export function assign(state: SweepState): void {
  const { stride, offsets, indices, responsibilities, wordThemes, alpha, scratch } = state;
  for (let d = 0; d < state.passages; d++) {
    const passage = d * stride;
    for (let j = offsets[d]; j < offsets[d + 1]; j++) {
      const word = indices[j] * stride;
      const entry = j * stride;
      for (let k = 0; k < stride; k++) {
        scratch[k] = alpha[passage + k] * wordThemes[word + k];
      }
      const total = laneSum(scratch, stride);
      const scale = total > 0 ? fround(1 / total) : 0;
      for (let k = 0; k < stride; k++) responsibilities[entry + k] = scratch[k] * scale;
    }
  }
}

/** Adds N_dk, N_wk and N_k up from the responsibilities; lanes of pinned themes keep phi and 1. */
export function recount(state: SweepState): void {
  const { stride, offsets, indices, counts, responsibilities, moving } = state;
  const { passageThemes, wordThemes, themeTotals } = state;
  passageThemes.fill(0);
  for (let i = 0; i < wordThemes.length; i++) wordThemes[i] *= 1 - moving[i % stride];
  for (let k = 0; k < stride; k++) themeTotals[k] *= 1 - moving[k];
  for (let d = 0; d < state.passages; d++) {
    const passage = d * stride;
    for (let j = offsets[d]; j < offsets[d + 1]; j++) {
      const word = indices[j] * stride;
      const entry = j * stride;
      const count = counts[j];
      for (let k = 0; k < stride; k++) {
        const expected = fround(count * responsibilities[entry + k]);
        passageThemes[passage + k] += expected;
        wordThemes[word + k] += fround(expected * moving[k]);
      }
    }
  }
  for (let w = 0; w < state.words; w++) {
    const word = w * stride;
    for (let k = 0; k < stride; k++) themeTotals[k] += fround(wordThemes[word + k] * moving[k]);
  }
}
