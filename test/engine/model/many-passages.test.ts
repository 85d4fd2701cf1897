import { describe, expect, it } from 'vitest';
import { fitModel, quickFitSettings, type Counts } from '../../../engine/model/index.ts';
import { hash32 } from '../../../engine/numbers/index.ts';

const passages = 100_000;
const each = 6;
const words = 400;
const themes = 4;

/** Passage d speaks of one of four hundreds of words, six words each. */
function counts(): Counts {
  const indices = new Int32Array(passages * each);
  const offsets = new Int32Array(passages + 1);
  for (let d = 0; d < passages; d++) {
    const own = new Set<number>();
    for (let i = 0; own.size < each; i++) own.add(100 * (d % themes) + (hash32(d, i, 7) % 100));
    indices.set(Int32Array.from(own).sort(), d * each);
    offsets[d + 1] = (d + 1) * each;
  }
  return { passages, words, offsets, indices, counts: new Float32Array(passages * each).fill(1) };
}

describe('a hundred thousand short passages', () => {
  const all = counts();
  const priors = {
    themes,
    alpha: 0.1,
    eta: 0.1,
    wordPriors: [],
    passagePriors: [{ passage: 99_999, theme: 0, value: 6.1 }],
    frozen: [],
  };
  const settings = {
    ...quickFitSettings,
    runs: 2,
    schedule: [
      { exponent: 0.75, sweeps: 6 },
      { exponent: 1, sweeps: 6 },
    ] as const,
    foldPasses: 3,
  };
  const fit = fitModel(all, priors, { kind: 'fresh', seed: 1, leanings: [] }, settings);

  it('are fitted, each with proportions that are numbers and add to one', () => {
    let worst = 0;
    for (let d = 0; d < passages; d++) {
      let sum = 0;
      for (let k = 0; k < themes; k++) sum += fit.theta[d * themes + k];
      worst = Math.max(worst, Number.isNaN(sum) ? Infinity : Math.abs(sum - 1));
    }
    expect(worst).toBeLessThan(1e-4);
    expect(fit.phi.every(Number.isFinite)).toBe(true);
    expect(fit.unexplained.every(Number.isFinite)).toBe(true);
  });

  it('are fitted again from there', () => {
    const hold = new Float32Array(themes).fill(1);
    const start = { kind: 'warm', theta: fit.theta, phi: fit.phi, leanings: [], hold } as const;
    const again = fitModel(all, priors, start, { ...settings, sweepLimit: 5, sweepsAtLeast: 2 });
    let moved = 0;
    for (let d = 0; d < passages; d++) {
      const lead = (theta: Float32Array): number => {
        const row = [...theta.subarray(d * themes, (d + 1) * themes)];
        return row.indexOf(Math.max(...row));
      };
      if (lead(fit.theta) !== lead(again.theta)) moved++;
    }
    expect(moved).toBeLessThan(passages / 50);
  });
});
