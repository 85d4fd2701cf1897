import { describe, expect, it } from 'vitest';
import { defaultFitSettings, fitMeanField, fitModel } from '../../engine/model/index.ts';
import type { Counts, Priors } from '../../engine/model/index.ts';
import { boundOf } from '../../engine/model/bound.ts';
import { lgamma } from '../../engine/numbers/index.ts';
import { countsOfTable } from '../engine/model/planted.ts';
import values from './values/lda.json' with { type: 'json' };

// values/lda.json: batch variational inference (Blei, Ng & Jordan 2003; Hoffman, Blei & Bach 2010)
// by scikit-learn 1.2.1, whose digamma is good to 3e-9 only, and by the same algorithm in 30-digit
// arithmetic; exact log evidence by enumeration (Griffiths & Steyvers 2004, PNAS 101, equations 2
// and 3). The script is values/lda.py.

function plainPriors(themes: number, alpha: number, eta: number): Priors {
  return { themes, alpha, eta, wordPriors: [], passagePriors: [], frozen: [] };
}

/** Largest difference relative to the value, or absolute below 1. */
function worst(found: ArrayLike<number>, expected: readonly number[]): number {
  expect(found.length).toBe(expected.length);
  return Math.max(
    ...expected.map((value, i) => Math.abs(found[i] - value) / Math.max(1, Math.abs(value))),
  );
}

describe('batch variational inference against outside values', () => {
  for (const [name, given] of Object.entries(values.cases)) {
    for (const [steps, after] of Object.entries(given.after)) {
      it(`case ${name} after ${steps} outer steps`, () => {
        const fit = fitMeanField(
          countsOfTable(given.counts),
          plainPriors(given.themes, given.alpha, given.eta),
          Float64Array.from(given.lambdaStart.flat()),
          {
            steps: Number(steps),
            innerLimit: given.innerLimit,
            innerTolerance: given.innerTolerance,
            flatSteps: Infinity,
          },
        );
        const bound = boundOf(fit.boundTerms);
        const { exact, sklearn } = after;
        expect(worst(fit.lambda, exact.lam.flat())).toBeLessThan(1e-9);
        expect(worst(fit.gamma, exact.gamma.flat())).toBeLessThan(1e-9);
        expect(Math.abs(bound - exact.elbo)).toBeLessThan(1e-9 * Math.abs(exact.elbo));
        expect(worst(fit.lambda, sklearn.lam.flat())).toBeLessThan(1e-6);
        expect(worst(fit.gamma, sklearn.gamma.flat())).toBeLessThan(1e-6);
        expect(Math.abs(bound - sklearn.bound)).toBeLessThan(1e-6 * Math.abs(sklearn.bound));
      });
    }
  }

  it('traces the same bounds over 51 steps as scikit-learn, and they never fall', () => {
    const given = values.cases.B_tight_tol;
    const { bounds } = fitMeanField(
      countsOfTable(given.counts),
      plainPriors(2, given.alpha, given.eta),
      Float64Array.from(given.lambdaStart.flat()),
      { steps: 50, innerLimit: 5000, innerTolerance: 1e-13, flatSteps: Infinity },
    );
    expect(worst(bounds, values.boundTrace)).toBeLessThan(1e-6);
    for (let i = 1; i < bounds.length; i++) {
      expect(bounds[i]).toBeGreaterThanOrEqual(bounds[i - 1] - 1e-12);
    }
  });
});

/** log p(w | alpha, eta): the sum over every assignment of the ordered words to themes. */
function logEvidence(counts: Counts, themes: number, alpha: number, eta: number): number {
  const { passages, words, offsets, indices } = counts;
  const tokens: [number, number][] = [];
  for (let d = 0; d < passages; d++) {
    for (let j = offsets[d]; j < offsets[d + 1]; j++) {
      for (let n = 0; n < counts.counts[j]; n++) tokens.push([d, indices[j]]);
    }
  }
  const terms: number[] = [];
  for (let code = 0; code < themes ** tokens.length; code++) {
    const inPassage = new Float64Array(passages * themes);
    const ofWord = new Float64Array(themes * words);
    let left = code;
    for (const [d, w] of tokens) {
      inPassage[d * themes + (left % themes)]++;
      ofWord[(left % themes) * words + w]++;
      left = Math.floor(left / themes);
    }
    terms.push(logRows(inPassage, themes, alpha) + logRows(ofWord, words, eta));
  }
  const most = terms.reduce((a, b) => Math.max(a, b), -Infinity);
  return most + Math.log(terms.reduce((total, term) => total + Math.exp(term - most), 0));
}

/** Sum over rows of the log of the Dirichlet-multinomial normaliser with a symmetric prior. */
function logRows(counts: Float64Array, width: number, prior: number): number {
  let total = 0;
  for (let start = 0; start < counts.length; start += width) {
    let n = 0;
    for (let i = start; i < start + width; i++) {
      n += counts[i];
      total += lgamma(counts[i] + prior) - lgamma(prior);
    }
    total += lgamma(width * prior) - lgamma(width * prior + n);
  }
  return total;
}

describe('exact log evidence by enumeration', () => {
  for (const given of values.evidence) {
    const { alpha, eta } = given;
    it(`alpha ${alpha}, eta ${eta}: no bound of either fit exceeds it`, () => {
      const counts = countsOfTable(given.counts);
      const evidence = logEvidence(counts, 2, alpha, eta);
      expect(Math.abs(evidence - given.logEvidence)).toBeLessThan(1e-9 * Math.abs(evidence));
      const priors = plainPriors(2, alpha, eta);

      let best = -Infinity;
      for (let seed = 1; seed <= 20; seed++) {
        const lambda = Float64Array.from(
          { length: 10 },
          (_, i) => 1 + 0.3 * Math.sin(seed * (i + 1)),
        );
        const { bounds } = fitMeanField(counts, priors, lambda, {
          steps: 200,
          innerLimit: 500,
          innerTolerance: 1e-10,
          flatSteps: Infinity,
        });
        for (const bound of bounds) expect(bound).toBeLessThan(evidence);
        best = Math.max(best, bounds[bounds.length - 1]);
      }
      // The best of many starts comes as near as the best of the outside reference's 40.
      expect(best).toBeGreaterThan(given.bestBound - 1e-6);

      const start = { kind: 'fresh', seed: 1, leanings: [] } as const;
      const { trace } = fitModel(counts, priors, start, { ...defaultFitSettings, boundEvery: 1 });
      const bounds = trace.flatMap(({ bound }) => (bound === null ? [] : [bound]));
      expect(bounds.length).toBeGreaterThan(70);
      for (const bound of bounds) expect(bound).toBeLessThan(evidence);
    });
  }

  // To check by hand: 7/36, 11/36, 5/24, 0.09375.
  const byHand = [Math.log(7 / 36), Math.log(11 / 36), Math.log(5 / 24), Math.log(0.09375)];
  values.byHand.forEach((given, i) => {
    it(`micro case ${given.name}`, () => {
      const counts = countsOfTable(given.counts);
      const evidence = logEvidence(counts, 2, given.alpha, given.eta);
      expect(evidence).toBeCloseTo(byHand[i], 12);
      expect(given.logEvidence).toBeCloseTo(byHand[i], 12);
      const priors = plainPriors(2, given.alpha, given.eta);
      const lambda = Float64Array.from({ length: 4 }, (_, j) => 1 + 0.1 * j);
      const settings = { steps: 100, innerLimit: 500, innerTolerance: 1e-12, flatSteps: Infinity };
      const { bounds } = fitMeanField(counts, priors, lambda, settings);
      for (const bound of bounds) expect(bound).toBeLessThanOrEqual(evidence + 1e-12);
    });
  });
});
