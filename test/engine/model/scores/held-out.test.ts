import { describe, expect, it } from 'vitest';
import { halves, heldOut } from '../../../../engine/model/index.ts';
import { countsOfTable, plantedCorpus } from '../planted.ts';

const priors = (themes: number) => ({
  themes,
  alpha: 0.1,
  eta: 0.1,
  wordPriors: [],
  passagePriors: [],
  frozen: [],
});

describe('held-out score by document completion', () => {
  it('splits every occurrence into one half or the other', () => {
    const { counts } = plantedCorpus(30, 50, 3, 40, 1);
    const [seen, scored] = halves(counts, 1);
    const dense = (c: typeof counts) => {
      const table = new Float64Array(c.passages * c.words);
      for (let d = 0; d < c.passages; d++) {
        for (let j = c.offsets[d]; j < c.offsets[d + 1]; j++) {
          table[d * c.words + c.indices[j]] += c.counts[j];
        }
      }
      return table;
    };
    const [a, b, all] = [dense(seen), dense(scored), dense(counts)];
    expect([...a].map((value, i) => value + b[i])).toEqual([...all]);
    const share = a.reduce((x, y) => x + y, 0) / all.reduce((x, y) => x + y, 0);
    expect(share).toBeGreaterThan(0.45);
    expect(share).toBeLessThan(0.55);
  });

  it('is the size of the vocabulary for one even theme', () => {
    const { counts } = plantedCorpus(30, 50, 3, 40, 1);
    const score = heldOut(counts, priors(1), new Float32Array(50).fill(1 / 50), 5, 1);
    expect(score.perplexity).toBeCloseTo(50, 3);
  });

  it('is better under the themes the passages were drawn from than under their average', () => {
    const { counts, phi } = plantedCorpus(200, 300, 4, 60, 3);
    const average = new Float32Array(300);
    for (let i = 0; i < phi.length; i++) average[i % 300] += phi[i] / 4;
    const told = heldOut(counts, priors(4), Float32Array.from(phi), 10, 1);
    const flat = heldOut(counts, priors(1), average, 10, 1);
    expect(told.words).toBe(flat.words);
    expect(told.likelihood).toBeGreaterThan(flat.likelihood + 0.1);
  });

  it('stays finite for empty passages and words that no theme knows', () => {
    const none = heldOut(countsOfTable([[0, 0]]), priors(1), Float32Array.of(0.5, 0.5), 5, 1);
    expect(none).toEqual({ likelihood: 0, perplexity: 1, words: 0 });
    const unknown = heldOut(countsOfTable([[0, 9]]), priors(1), Float32Array.of(1, 0), 5, 1);
    expect(unknown.likelihood).toBeCloseTo(Math.log(1e-12), 9);
  });
});
