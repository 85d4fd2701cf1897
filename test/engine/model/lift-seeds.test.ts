import { describe, expect, it } from 'vitest';
import { densePriors } from '../../../engine/model/dense-priors.ts';
import { liftSeeds } from '../../../engine/model/lift-seeds.ts';
import type { Priors } from '../../../engine/model/index.ts';
import { countsOfTable } from './planted.ts';

// 30 words, each five times, but word 29 four times.
const counts = countsOfTable([[...new Array<number>(29).fill(5), 4]]);
const falling = Float32Array.from({ length: 30 }, (_, w) => (30 - w) / 465);

function lifted(wordPriors: Priors['wordPriors'], frozen: Priors['frozen'] = []): Float32Array {
  const priors: Priors = { themes: 1, alpha: 0.1, eta: 0.1, wordPriors, passagePriors: [], frozen };
  const phi = falling.slice();
  liftSeeds(phi, counts, densePriors('test', counts, priors));
  return phi;
}

function rank(phi: Float32Array, word: number): number {
  return phi.filter((value) => value > phi[word]).length + 1;
}

describe('lifting seeds', () => {
  it('brings a seed among the first twelve words, and not past the words it need not pass', () => {
    const phi = lifted([{ theme: 0, word: 25, value: 3 }]);
    expect(rank(phi, 25)).toBe(12);
    expect(phi.reduce((a, b) => a + b, 0)).toBeCloseTo(1, 6);
    // The others keep their order and their proportions.
    expect(phi[0] / phi[1]).toBeCloseTo(30 / 29, 5);
  });

  it('leaves a seed alone that is among them already', () => {
    const phi = lifted([{ theme: 0, word: 2, value: 3 }]);
    phi.forEach((value, w) => expect(value).toBeCloseTo(falling[w], 7));
  });

  it('brings many seeds in together, before anything else where they are more than twelve', () => {
    for (const number of [5, 12, 14]) {
      const seeds = Array.from({ length: number }, (_, i) => 28 - i);
      const phi = lifted(seeds.map((word) => ({ theme: 0, word, value: 3 })));
      for (const word of seeds) expect(rank(phi, word)).toBeLessThanOrEqual(Math.max(12, number));
    }
  });

  it('does not lift a word of fewer than five occurrences, one shut out, or one in a pinned theme', () => {
    expect(lifted([{ theme: 0, word: 29, value: 3 }])).toEqual(falling);
    expect(lifted([{ theme: 0, word: 20, value: 0 }])).toEqual(falling);
    const seed = [{ theme: 0, word: 25, value: 3 }];
    expect(lifted(seed, [{ theme: 0, phi: falling }])).toEqual(falling);
  });
});
