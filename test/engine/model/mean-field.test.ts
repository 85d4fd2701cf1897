import { describe, expect, it } from 'vitest';
import {
  defaultMeanFieldSettings,
  fitMeanField,
  foldInMeanField,
  matchThemes,
  type Counts,
  type MeanFieldSettings,
  type Priors,
} from '../../../engine/model/index.ts';
import { createGenerator } from '../../../engine/numbers/index.ts';
import { countsOfTable, plantedCorpus } from './planted.ts';

const tight: MeanFieldSettings = {
  steps: 40,
  innerLimit: 2000,
  innerTolerance: 1e-12,
  flatSteps: 20,
};

function priors(themes: number, more: Partial<Priors> = {}): Priors {
  return { themes, alpha: 0.3, eta: 0.1, wordPriors: [], passagePriors: [], frozen: [], ...more };
}

function lambdaOf(length: number, seed: number): Float64Array {
  const chance = createGenerator(seed);
  return Float64Array.from({ length }, () => 0.8 + 0.4 * chance.uniform());
}

function expectNeverFalling(bounds: readonly number[]): void {
  for (let i = 1; i < bounds.length; i++) {
    expect(bounds[i]).toBeGreaterThanOrEqual(bounds[i - 1] - 1e-9 * Math.abs(bounds[i]));
  }
}

const { counts } = plantedCorpus(60, 80, 3, 40, 5);

/** Priors with every kind of decision. */
const phi = new Float32Array(80).fill(1 / 80);
const decided = priors(4, {
  themeAlpha: [{ theme: 3, value: 0.6 }],
  wordPriors: [
    { theme: 0, word: 2, value: 5 },
    { theme: 1, word: 3, value: 0 },
    { theme: 3, word: 3, value: 0 },
  ],
  passagePriors: [
    { passage: 0, theme: 0, value: 0 },
    { passage: 4, theme: 1, value: 20 },
  ],
  frozen: [{ theme: 2, phi }],
});

describe('mean-field inference', () => {
  it('never lets the bound fall while its inner loop is tight (a forgotten factor in lambda would)', () => {
    for (const seed of [1, 2, 3]) {
      expectNeverFalling(fitMeanField(counts, priors(3), lambdaOf(240, seed), tight).bounds);
    }
  });

  it('never lets it fall under asymmetric priors, zeros and pinned themes either', () => {
    const fit = fitMeanField(counts, decided, lambdaOf(320, 4), tight);
    expectNeverFalling(fit.bounds);
    expect(fit.gamma[0]).toBe(0);
    expect(fit.theta[0]).toBe(0);
    expect([fit.lambda[80 + 3], fit.phi[80 + 3], fit.phi[240 + 3]]).toEqual([0, 0, 0]);
    expect(Float32Array.from(fit.phi.slice(160, 240))).toEqual(phi);
  });

  it('starts passages flat while themes form: a warm start from the first step on ends lower', () => {
    const corpus = plantedCorpus(200, 300, 6, 40, 9).counts;
    const bound = (flatSteps: number, seed: number): number => {
      const settings = { ...defaultMeanFieldSettings, steps: 60, innerLimit: 20, flatSteps };
      const { bounds } = fitMeanField(
        corpus,
        priors(6, { alpha: 0.1 }),
        lambdaOf(1800, seed),
        settings,
      );
      return bounds[bounds.length - 1];
    };
    const seeds = [1, 2, 3, 4];
    const mean = (flatSteps: number): number =>
      seeds.reduce((total, seed) => total + bound(flatSteps, seed), 0) / seeds.length;
    expect(defaultMeanFieldSettings.flatSteps).toBe(20);
    expect(mean(20)).toBeGreaterThan(mean(1));
  });

  it('keeps every word: gamma sums to the prior and the words of its passage, lambda to all words', () => {
    const fit = fitMeanField(counts, priors(3), lambdaOf(240, 1), tight);
    for (let d = 0; d < 60; d++) {
      const row = fit.gamma.subarray(d * 3, d * 3 + 3);
      expect(row.reduce((a, b) => a + b, 0)).toBeCloseTo(3 * 0.3 + 40, 8);
    }
    expect(fit.lambda.reduce((a, b) => a + b, 0)).toBeCloseTo(240 * 0.1 + 60 * 40, 7);
  });

  it('finds planted themes', () => {
    const planted = plantedCorpus(300, 200, 3, 60, 8);
    const fit = fitMeanField(planted.counts, priors(3, { alpha: 0.1 }), lambdaOf(600, 2), {
      ...defaultMeanFieldSettings,
      steps: 60,
    });
    for (const cosine of matchThemes(planted.phi, fit.phi, 200).cosines) {
      expect(cosine).toBeGreaterThan(0.9);
    }
  });

  it('folds a passage in as it was fitted', () => {
    const fit = fitMeanField(counts, priors(3), lambdaOf(240, 1), { ...tight, flatSteps: 99 });
    const gamma = foldInMeanField(counts, priors(3), fit.lambda, 2000, 1e-12);
    expect(gamma).toEqual(fit.gamma);
  });

  it('stays a number in small and strange studies', () => {
    const cases: [Counts, number][] = [
      [countsOfTable([]), 2],
      [
        countsOfTable([
          [0, 0],
          [1, 2],
        ]),
        2,
      ],
      [countsOfTable([[1]]), 1],
      [
        countsOfTable([
          [1, 0],
          [0, 1],
        ]),
        7,
      ],
      [countsOfTable([[1e6, 1]]), 2],
    ];
    for (const [strange, themes] of cases) {
      for (const [alpha, eta] of [
        [0.1, 0.1],
        [1e-3, 1e-3],
        [50, 50],
      ]) {
        const fit = fitMeanField(
          strange,
          priors(themes, { alpha, eta }),
          lambdaOf(themes * strange.words, 3),
          defaultMeanFieldSettings,
        );
        for (const array of [fit.gamma, fit.lambda, fit.theta, fit.phi, fit.bounds]) {
          expect(Array.from(array).every(Number.isFinite)).toBe(true);
        }
        for (let d = 0; d < strange.passages; d++) {
          const row = fit.theta.subarray(d * themes, (d + 1) * themes);
          expect(row.reduce((a, b) => a + b, 0)).toBeCloseTo(1, 9);
        }
      }
    }
  });

  it('refuses a lambda of the wrong size or not above 0', () => {
    expect(() => fitMeanField(counts, priors(3), lambdaOf(3, 1), tight)).toThrow(
      'fitMeanField: lambda.length is 3; must be 240',
    );
    const bad = lambdaOf(240, 1);
    bad[7] = 0;
    expect(() => fitMeanField(counts, priors(3), bad, tight)).toThrow(
      'fitMeanField: lambda[7] is 0; must be above 0',
    );
  });
});
