import { finishHash, mixHash } from '../../numbers/hash.ts';
import type { DensePriors } from '../dense-priors.ts';
import type { Kernel } from '../kernel/kernel.ts';
import type { SweepState } from '../kernel/state.ts';
import { wordTotals } from '../check-counts.ts';
import type { Counts } from '../types.ts';

export type Leanings = readonly { readonly theme: number; readonly word: number }[];

/**
 * Where a run from scratch begins: even responsibilities, moved by a hash of (passage, word, theme,
 * seed) within +- `jitter`; most of each seed word on its themes; a pinned theme by how much
 * likelier than elsewhere it makes the word; exactly 0 wherever a decision says so.
 */
export function startFresh(
  kernel: Kernel,
  state: SweepState,
  counts: Counts,
  priors: DensePriors,
  leanings: Leanings,
  seed: number,
  jitter: number,
  lean: number,
): void {
  const { passages, words, themes, stride, offsets, indices, responsibilities, alpha, eta } = state;
  const totals = wordTotals(counts);
  const all = totals.reduce((a, b) => a + b, 0);
  for (let d = 0; d < passages; d++) {
    const passageHash = mixHash(mixHash(0, seed), d);
    for (let j = offsets[d]; j < offsets[d + 1]; j++) {
      const w = indices[j];
      const entryHash = mixHash(passageHash, w);
      const row = responsibilities.subarray(j * stride, j * stride + themes);
      let sum = 0;
      for (let k = 0; k < themes; k++) {
        const phi = priors.pinned[k];
        const open = alpha[d * stride + k] > 0 && (phi ? phi[w] > 0 : eta[w * stride + k] > 0);
        const chance = finishHash(mixHash(entryHash, k), 16) / 2147483648 - 1;
        const weight = phi ? (phi[w] * all) / totals[w] : 1;
        row[k] = open ? weight * (1 + jitter * chance) : 0;
        sum += row[k];
      }
      if (sum > 0) for (let k = 0; k < themes; k++) row[k] /= sum;
    }
  }
  leanOn(state, words, leanings, lean);
  kernel.recount(state);
}

/**
 * Where a warm run begins: each responsibility from the fit before, theta x phi, moved by new
 * leanings. Passages that the fit before did not know (rows of zeros) begin from their prior.
 */
export function startWarm(
  kernel: Kernel,
  state: SweepState,
  theta: Float32Array,
  phi: Float32Array,
  leanings: Leanings,
  lean: number,
): void {
  const { passages, words, themes, stride, offsets, indices, responsibilities, alpha, eta } = state;
  const { moving, wordThemes } = state;
  for (let d = 0; d < passages; d++) {
    let known = 0;
    for (let k = 0; k < themes; k++) known += theta[d * themes + k];
    for (let j = offsets[d]; j < offsets[d + 1]; j++) {
      const w = indices[j];
      const row = responsibilities.subarray(j * stride, j * stride + themes);
      let sum = 0;
      for (let k = 0; k < themes; k++) {
        const prior = alpha[d * stride + k];
        const share = known > 0 ? theta[d * themes + k] : prior;
        const wordShare =
          moving[k] === 0
            ? wordThemes[w * stride + k]
            : eta[w * stride + k] > 0
              ? phi[k * words + w]
              : 0;
        row[k] = prior > 0 ? share * wordShare : 0;
        sum += row[k];
      }
      if (sum > 0) {
        for (let k = 0; k < themes; k++) row[k] /= sum;
        continue;
      }
      // All that the word had before is closed to it now: it begins wherever it may go.
      let open = 0;
      for (let k = 0; k < themes; k++) {
        const may = moving[k] === 0 ? wordThemes[w * stride + k] : eta[w * stride + k];
        row[k] = alpha[d * stride + k] > 0 && may > 0 ? 1 : 0;
        open += row[k];
      }
      if (open > 0) for (let k = 0; k < themes; k++) row[k] /= open;
    }
  }
  leanOn(state, words, leanings, lean);
  kernel.recount(state);
}

/**
 * Moves the occurrences of seed words so that their themes hold `lean` of them together, in equal
 * parts, wherever the passage and the word are open to the theme.
 */
function leanOn(state: SweepState, words: number, leanings: Leanings, lean: number): void {
  if (leanings.length === 0) return;
  const { passages, themes, stride, offsets, indices, responsibilities, alpha, eta } = state;
  const { moving, wordThemes } = state;
  const themesOf = new Map<number, number[]>();
  for (const { theme, word } of leanings) {
    if (!(theme >= 0 && theme < themes && word >= 0 && word < words)) {
      throw new Error(
        `start.leanings: theme ${theme}, word ${word}; must be below ${themes} and ${words}`,
      );
    }
    const list = themesOf.get(word) ?? [];
    if (!list.includes(theme)) list.push(theme);
    themesOf.set(word, list);
  }
  for (let d = 0; d < passages; d++) {
    for (let j = offsets[d]; j < offsets[d + 1]; j++) {
      const w = indices[j];
      const own = themesOf.get(w)?.filter((k) => {
        const may = moving[k] === 0 ? wordThemes[w * stride + k] : eta[w * stride + k];
        return alpha[d * stride + k] > 0 && may > 0;
      });
      if (!own || own.length === 0) continue;
      const row = responsibilities.subarray(j * stride, j * stride + themes);
      let others = 0;
      for (let k = 0; k < themes; k++) if (!own.includes(k)) others += row[k];
      const left = others > 0 ? 1 - lean : 0;
      for (let k = 0; k < themes; k++) {
        if (own.includes(k)) row[k] = (1 - left) / own.length;
        else if (others > 0) row[k] *= left / others;
      }
    }
  }
}
