import { describe, expect, it } from 'vitest';
import { prepare } from '../../../../engine/model/collapsed/prepare.ts';
import { startFresh } from '../../../../engine/model/collapsed/start.ts';
import { defaultKernel as kernel } from '../../../../engine/model/kernel/index.ts';
import type { Priors } from '../../../../engine/model/index.ts';
import { countsOfTable, plantedCorpus } from '../planted.ts';

function priors(themes: number, more: Partial<Priors> = {}): Priors {
  return { themes, alpha: 0.1, eta: 0.1, wordPriors: [], passagePriors: [], frozen: [], ...more };
}

describe('one sweep', () => {
  it('does to one entry what the formula says', () => {
    // One passage: word 0 twice, word 1 once. Two themes, responsibilities set by hand.
    const counts = countsOfTable([[2, 1]]);
    const { state } = prepare('test', counts, priors(2), kernel);
    state.responsibilities.set([0.75, 0.25, 0, 0, 0.5, 0.5, 0, 0]);
    kernel.recount(state);
    expect([...state.passageThemes]).toEqual([2, 1, 0, 0]);
    expect([...state.wordThemes]).toEqual([1.5, 0.5, 0, 0, 0.5, 0.5, 0, 0]);
    expect([...state.themeTotals]).toEqual([2, 1, 1, 1]);
    kernel.sweep(state, 1);

    // Entry 0: one of the two occurrences is left out.
    const weight = (n: number, w: number, total: number, self: number) =>
      ((n - self + 0.1) * (w - self + 0.1)) / (total - self + 0.2);
    const a = weight(2, 1.5, 2, 0.75);
    const b = weight(1, 0.5, 1, 0.25);
    expect(state.responsibilities[0]).toBeCloseTo(a / (a + b), 6);
    expect(state.responsibilities[1]).toBeCloseTo(b / (a + b), 6);
    expect(state.normalisers[0]).toBeCloseTo(a + b, 6);
    // Entry 1 sees what entry 0 became.
    const [r0, r1] = state.responsibilities;
    const c = weight(2 * r0 + 0.5, 0.5, 2 * r0 + 0.5, 0.5);
    const d = weight(2 * r1 + 0.5, 0.5, 2 * r1 + 0.5, 0.5);
    expect(state.responsibilities[4]).toBeCloseTo(c / (c + d), 6);
  });

  it('anneals by powers of the same weights', () => {
    const counts = countsOfTable([
      [1, 2],
      [2, 1],
    ]);
    const share = (exponent: 0.5 | 0.75 | 0.875 | 1): number => {
      const { state } = prepare('test', counts, priors(2), kernel);
      state.responsibilities.set([0.7, 0.3, 0, 0, 0.6, 0.4, 0, 0, 0.2, 0.8, 0, 0, 0.5, 0.5, 0, 0]);
      kernel.recount(state);
      kernel.sweep(state, exponent);
      return state.responsibilities[0] / state.responsibilities[1];
    };
    const ratio = share(1);
    for (const exponent of [0.5, 0.75, 0.875] as const) {
      expect(share(exponent)).toBeCloseTo(ratio ** exponent, 5);
    }
  });

  it('lets expected counts drift from their responsibilities by rounding alone', () => {
    const { counts } = plantedCorpus(200, 300, 5, 50, 2);
    const { state, priors: dense } = prepare('test', counts, priors(5), kernel);
    startFresh(kernel, state, counts, dense, [], 1, 0.173, 0.95);
    for (let i = 0; i < 10; i++) kernel.sweep(state, 1);
    const running = [state.passageThemes, state.wordThemes, state.themeTotals].map((a) =>
      a.slice(),
    );
    kernel.recount(state);
    [state.passageThemes, state.wordThemes, state.themeTotals].forEach((exact, i) => {
      exact.forEach((value, j) =>
        expect(Math.abs(value - running[i][j])).toBeLessThan(1e-3 * Math.max(1, value)),
      );
    });
  });

  it('begins so flat that its first changes are tiny: no rule on change may stop it early', () => {
    const { counts } = plantedCorpus(200, 300, 5, 50, 2);
    const { state, priors: dense, countedWords } = prepare('test', counts, priors(5), kernel);
    startFresh(kernel, state, counts, dense, [], 1, 0.173, 0.95);
    const changes = Array.from({ length: 30 }, () => kernel.sweep(state, 0.875) / countedWords);
    expect(changes[1]).toBeLessThan(Math.max(...changes) / 2);
    expect(changes.indexOf(Math.max(...changes))).toBeGreaterThan(2);
  });

  it('keeps zeros exact through a hundred sweeps', () => {
    const { counts } = plantedCorpus(100, 80, 4, 50, 3);
    const decided = priors(4, {
      wordPriors: [{ theme: 1, word: 0, value: 0 }],
      passagePriors: [{ passage: 5, theme: 2, value: 0 }],
    });
    const { state, priors: dense } = prepare('test', counts, decided, kernel);
    startFresh(kernel, state, counts, dense, [], 1, 0.173, 0.95);
    for (let i = 0; i < 100; i++) {
      kernel.sweep(state, i < 50 ? 0.75 : 1);
      if (i % 10 === 9) kernel.recount(state);
      expect(state.wordThemes[1]).toBe(0);
      expect(state.passageThemes[5 * 4 + 2]).toBe(0);
    }
  });

  it('subtracts no more than there is where occurrences weigh less than one', () => {
    const counts = {
      ...countsOfTable([
        [1, 1],
        [1, 0],
      ]),
      counts: Float32Array.of(0.2, 0.05, 0.3),
    };
    const { state, priors: dense } = prepare('test', counts, priors(2, { eta: 1e-6 }), kernel);
    startFresh(kernel, state, counts, dense, [], 1, 0.173, 0.95);
    for (let i = 0; i < 200; i++) kernel.sweep(state, 1);
    expect(state.responsibilities.every((r) => r >= 0 && r <= 1.0001)).toBe(true);
    expect(state.responsibilities[0] + state.responsibilities[1]).toBeCloseTo(1, 5);
  });

  it('gives a word that no theme may take to none, and counts it nowhere', () => {
    const decided = priors(2, {
      wordPriors: [{ theme: 0, word: 0, value: 0 }],
      passagePriors: [{ passage: 0, theme: 1, value: 0 }],
    });
    const counts = countsOfTable([
      [3, 1],
      [1, 1],
    ]);
    const { state, priors: dense } = prepare('test', counts, decided, kernel);
    startFresh(kernel, state, counts, dense, [], 1, 0.173, 0.95);
    for (let i = 0; i < 5; i++) kernel.sweep(state, 1);
    expect([...state.responsibilities.slice(0, 4)]).toEqual([0, 0, 0, 0]);
    expect(state.passageThemes[0]).toBeCloseTo(1, 5);
  });
});
