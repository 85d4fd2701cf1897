import { defaultFitSettings, type FitSettings, type Priors } from '../../../engine/model/index.ts';
import { materialOf, type Material } from '../../../engine/evidence/index.ts';
import { plantedCorpus, type Planted } from '../model/planted.ts';

/** Enough for planted themes, and quick. */
export const settings: FitSettings = {
  ...defaultFitSettings,
  runs: 4,
  schedule: [
    { exponent: 0.75, sweeps: 8 },
    { exponent: 0.875, sweeps: 8 },
    { exponent: 1, sweeps: 12 },
  ],
};

export function priors(themes: number, more: Partial<Priors> = {}): Priors {
  return { themes, alpha: 0.1, eta: 0.1, wordPriors: [], passagePriors: [], frozen: [], ...more };
}

/** A planted corpus told by so many people in turn, and material to measure the planted themes. */
export function told(
  corpus: Planted,
  people: number,
  themes: number,
  more: Partial<Priors> = {},
): Material {
  return materialOf(
    {
      counts: corpus.counts,
      phi: Float32Array.from(corpus.phi),
      priors: priors(themes, more),
      leanings: [],
      seed: 1,
      settings,
    },
    Array.from({ length: corpus.counts.passages }, (_, d) => `person ${d % people}`),
  );
}

export const planted = plantedCorpus(240, 150, 4, 40, 11);
