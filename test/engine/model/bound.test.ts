import { describe, expect, it } from 'vitest';
import {
  boundTerms,
  distributionsTerm,
  expectedDistributions,
  proportionsTerm,
  wordsTerm,
} from '../../../engine/model/bound.ts';
import { densePriors } from '../../../engine/model/dense-priors.ts';
import { dirichletDivergence } from '../../../engine/model/dirichlet-divergence.ts';
import type { Priors } from '../../../engine/model/index.ts';
import values from '../../outside/values/special-functions.json' with { type: 'json' };
import { countsOfTable } from './planted.ts';

const priors: Priors = {
  themes: 2,
  alpha: 0.5,
  eta: 0.1,
  wordPriors: [],
  passagePriors: [],
  frozen: [],
};
const counts = countsOfTable([
  [2, 1, 0],
  [0, 1, 3],
]);
const gamma = Float64Array.of(3, 1, 0.7, 4.3);
const lambda = Float64Array.of(2, 1, 0.5, 0.3, 1.2, 3);

describe('divergence between Dirichlet distributions', () => {
  for (const { a, b, value } of values.dirichletDivergence) {
    it(`of ${a.join(' ')} from ${b.join(' ')} is the closed form by mpmath`, () => {
      expect(dirichletDivergence(a, b)).toBeCloseTo(value, 11);
    });
  }
  for (const { a, b, value } of values.quadrature) {
    it(`of ${a.join(' ')} from ${b.join(' ')} is what quadrature gives`, () => {
      expect(dirichletDivergence(a, b)).toBeCloseTo(value, 9);
    });
  }
  it('leaves out places where the prior is 0, and reads from an offset', () => {
    const whole = dirichletDivergence([1, 2, 3], [1, 1, 1]);
    expect(dirichletDivergence([1, 0, 2, 3], [1, 0, 1, 1])).toBe(whole);
    expect(dirichletDivergence([9, 1, 2, 3, 9], [9, 1, 1, 1, 9], 1, 3)).toBe(whole);
    expect(dirichletDivergence([0], [0])).toBe(0);
  });
});

describe('the terms of the bound', () => {
  const dense = densePriors('test', counts, priors);

  it('proportions: minus the divergence of each passage from its prior', () => {
    const expected =
      -dirichletDivergence([3, 1], [0.5, 0.5]) - dirichletDivergence([0.7, 4.3], [0.5, 0.5]);
    expect(proportionsTerm(dense, gamma, 2)).toBeCloseTo(expected, 12);
  });

  it('distributions: minus the divergence of each theme from its prior, none for a pinned one', () => {
    const one = dirichletDivergence([2, 1, 0.5], [0.1, 0.1, 0.1]);
    const two = dirichletDivergence([0.3, 1.2, 3], [0.1, 0.1, 0.1]);
    expect(distributionsTerm(dense, lambda, 3)).toBeCloseTo(-one - two, 12);
    const frozen = [{ theme: 0, phi: Float32Array.of(0.5, 0.25, 0.25) }];
    const pinned = densePriors('test', counts, { ...priors, frozen });
    expect(distributionsTerm(pinned, lambda, 3)).toBeCloseTo(-two, 12);
  });

  it('words: the log of the themes’ mixture at expected logarithms, a word at a time', () => {
    // By responsibilities instead: sum of c (r (E log theta + E log phi) - r log r).
    const digamma = (x: number): number => {
      let shifted = x;
      let sum = 0;
      while (shifted < 30) sum -= 1 / shifted++;
      return (
        sum +
        Math.log(shifted) -
        1 / (2 * shifted) -
        1 / (12 * shifted ** 2) +
        1 / (120 * shifted ** 4)
      );
    };
    const logTheta = (d: number, k: number) =>
      digamma(gamma[d * 2 + k]) - digamma(gamma[d * 2] + gamma[d * 2 + 1]);
    const logPhi = (k: number, w: number) =>
      digamma(lambda[k * 3 + w]) - digamma(lambda[k * 3] + lambda[k * 3 + 1] + lambda[k * 3 + 2]);
    let expected = 0;
    for (const [d, w, c] of [
      [0, 0, 2],
      [0, 1, 1],
      [1, 1, 1],
      [1, 2, 3],
    ]) {
      const weights = [0, 1].map((k) => Math.exp(logTheta(d, k) + logPhi(k, w)));
      const sum = weights[0] + weights[1];
      [0, 1].forEach((k) => {
        const r = weights[k] / sum;
        expected += c * r * (logTheta(d, k) + logPhi(k, w) - Math.log(r));
      });
    }
    const found = wordsTerm(counts, dense, gamma, expectedDistributions(dense, lambda, 3));
    expect(found).toBeCloseTo(expected, 10);
  });

  it('takes phi as it is where a theme is pinned', () => {
    const frozen = [0, 1].map((theme) => ({ theme, phi: Float32Array.of(0.5, 0.25, 0.25) }));
    const pinned = densePriors('test', counts, { ...priors, frozen });
    const expected = expectedDistributions(pinned, lambda, 3);
    expect([...expected]).toEqual([0.5, 0.25, 0.25, 0.5, 0.25, 0.25]);
  });

  it('is 0 in every term where there is nothing: no passages, nothing learned', () => {
    const none = countsOfTable([]);
    const empty = densePriors('test', none, priors);
    expect(boundTerms(none, empty, new Float64Array(0), new Float64Array(0))).toEqual({
      words: 0,
      proportions: 0,
      distributions: 0,
    });
    const unread = boundTerms(
      countsOfTable([[0, 0]]),
      densePriors('test', countsOfTable([[0, 0]]), priors),
      Float64Array.of(0.5, 0.5),
      new Float64Array(4).fill(0.1),
    );
    expect(Object.values(unread).map(Math.abs)).toEqual([0, 0, 0]);
  });
});
