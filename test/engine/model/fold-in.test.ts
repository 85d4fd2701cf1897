import { describe, expect, it } from 'vitest';
import { prepare } from '../../../engine/model/collapsed/prepare.ts';
import { foldIn, proportions } from '../../../engine/model/fold-in.ts';
import type { Counts, Priors } from '../../../engine/model/index.ts';
import { countsOfTable } from './planted.ts';

const priors: Priors = {
  themes: 2,
  alpha: 0.1,
  eta: 0.1,
  wordPriors: [],
  passagePriors: [{ passage: 1, theme: 0, value: 0.4 }],
  frozen: [],
};
const phi = Float32Array.of(0.5, 0.3, 0.2, 0.1, 0.2, 0.7);
const counts = countsOfTable([
  [3, 0, 1],
  [1, 2, 2],
  [0, 0, 0],
]);

function folded(given: Counts, passes: number): number[] {
  const { kernel, state, priors: dense } = prepare('test', given, priors);
  foldIn(kernel, state, dense, phi, passes);
  return [...proportions(state, dense)];
}

/** The same in f64, as it is said: word after word, each occurrence left out of its prediction. */
function byHand(passes: number): number[] {
  return [0, 1, 2].flatMap((d) => {
    const alpha = [d === 1 ? 0.4 : 0.1, 0.1];
    const entries: { word: number; count: number; shares: number[] }[] = [];
    for (let j = counts.offsets[d]; j < counts.offsets[d + 1]; j++) {
      const word = counts.indices[j];
      const weights = [0, 1].map((k) => alpha[k] * phi[k * 3 + word]);
      const sum = weights[0] + weights[1];
      entries.push({ word, count: counts.counts[j], shares: weights.map((w) => w / sum) });
    }
    const expected = () =>
      [0, 1].map((k) => entries.reduce((n, entry) => n + entry.count * entry.shares[k], 0));
    for (let pass = 1; pass < passes; pass++) {
      for (const entry of entries) {
        const n = expected();
        const weights = [0, 1].map(
          (k) => (n[k] - entry.shares[k] + alpha[k]) * phi[k * 3 + entry.word],
        );
        const sum = weights[0] + weights[1];
        entry.shares = weights.map((w) => w / sum);
      }
    }
    const n = expected();
    const total = n[0] + n[1] + alpha[0] + alpha[1];
    return [0, 1].map((k) => (n[k] + alpha[k]) / total);
  });
}

describe('folding passages in under frozen themes', () => {
  for (const passes of [1, 2, 10]) {
    it(`does in ${passes} passes what the formula says`, () => {
      folded(counts, passes).forEach((share, i) => expect(share).toBeCloseTo(byHand(passes)[i], 5));
    });
  }

  it('hangs on the passage alone: others may come or go', () => {
    const all = folded(counts, 10);
    const first = folded({ ...counts, passages: 2, offsets: counts.offsets.slice(0, 3) }, 10);
    expect(first).toEqual(all.slice(0, 4));
  });
});
