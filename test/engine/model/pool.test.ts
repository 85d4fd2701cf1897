import { describe, expect, it } from 'vitest';
import {
  finishPool,
  fitModel,
  leadingThemes,
  poolRun,
  poolSize,
  prepareFit,
  quickFitSettings,
  type FreshStart,
  type Priors,
} from '../../../engine/model/index.ts';
import { countsOfTable, plantedCorpus } from './planted.ts';

const { counts, theta } = plantedCorpus(150, 200, 4, 40, 6);
const priors: Priors = {
  themes: 4,
  alpha: 0.1,
  eta: 0.1,
  wordPriors: [{ theme: 1, word: 7, value: 3.1 }],
  passagePriors: [{ passage: 3, theme: 0, value: 0 }],
  frozen: [],
};
const start: FreshStart = { kind: 'fresh', seed: 9, leanings: [{ theme: 1, word: 7 }] };
const settings = { ...quickFitSettings, runs: 5, boundEvery: 10 };
const stopped = { progress: () => false };

describe('a pool of runs', () => {
  it('gives the same bits however its runs are shared out', () => {
    const whole = fitModel(counts, priors, start, settings);
    expect(poolSize(priors, start, settings)).toBe(5);
    // Two workers: one with the odd runs, backwards, the other with the even ones; results copied.
    const workers = [prepareFit(counts, priors), prepareFit(counts, priors)];
    const runs = [4, 3, 2, 1, 0]
      .map((number) => ({
        number,
        run: structuredClone(poolRun(workers[number % 2], start, settings, number)),
      }))
      .sort((a, b) => a.number - b.number)
      .map(({ run }) => run);
    expect(finishPool(prepareFit(counts, priors), start, settings, runs)).toEqual(whole);
    expect(finishPool(workers[0], start, settings, runs)).toEqual(whole);
  });

  it('leaves nothing of one run in the next', () => {
    const used = prepareFit(counts, priors);
    poolRun(used, start, settings, 2);
    finishPool(used, start, settings, [poolRun(used, start, settings, 0)]);
    expect(poolRun(used, start, settings, 1)).toEqual(
      poolRun(prepareFit(counts, priors), start, settings, 1),
    );
  });

  it('begins each run elsewhere, and another seed elsewhere again', () => {
    const prepared = prepareFit(counts, priors);
    const phis = [
      poolRun(prepared, start, settings, 0),
      poolRun(prepared, start, settings, 1),
      poolRun(prepared, { ...start, seed: 10 }, settings, 0),
    ].map(({ phi }) => phi);
    expect(phis[0]).not.toEqual(phis[1]);
    expect(phis[0]).not.toEqual(phis[2]);
  });

  it('keeps the bound in its first run only', () => {
    const prepared = prepareFit(counts, priors);
    const bounds = (run: number) =>
      poolRun(prepared, start, settings, run).trace.filter(({ bound }) => bound !== null).length;
    expect([bounds(0), bounds(1)]).toEqual([3, 0]);
  });

  it('averages whole runs alone; a cancelled one is used where there is no other', () => {
    const prepared = prepareFit(counts, priors);
    const run = poolRun(prepared, start, settings, 0);
    const cut = poolRun(prepared, start, settings, 1, stopped);
    expect(cut.sweeps).toBe(1);
    const fit = finishPool(prepared, start, settings, [run, cut]);
    expect(fit.stopReason).toBe('stopped by a person');
    expect(fit.phi).toEqual(finishPool(prepared, start, settings, [run]).phi);
    expect(finishPool(prepared, start, settings, [cut]).stopReason).toBe('stopped by a person');
  });

  it('is not made for a warm start or where every theme is pinned', () => {
    const fit = fitModel(counts, priors, start, settings);
    const { theta, phi } = fit;
    const warm = { kind: 'warm', theta, phi, leanings: [], hold: new Float32Array(4) } as const;
    expect(poolSize(priors, warm, settings)).toBe(0);
    const frozen = [0, 1, 2, 3].map((theme) => ({
      theme,
      phi: phi.slice(theme * 200, (theme + 1) * 200),
    }));
    expect(poolSize({ ...priors, frozen }, start, settings)).toBe(0);
  });

  it('refuses to finish without runs', () => {
    expect(() => finishPool(prepareFit(counts, priors), start, settings, [])).toThrow(
      'finishPool: runs is empty',
    );
  });
});

describe('leadingThemes', () => {
  it('is the theme that the words of a passage speak for, -1 without words', () => {
    const phi = Float32Array.of(0.8, 0.1, 0.1, 0.1, 0.1, 0.8);
    const plain = { ...priors, themes: 2, wordPriors: [], passagePriors: [] };
    const table = countsOfTable([
      [3, 1, 0],
      [0, 1, 2],
      [0, 0, 0],
    ]);
    expect([...leadingThemes(table, plain, phi)]).toEqual([0, 1, -1]);
    const confirmed = { ...plain, passagePriors: [{ passage: 0, theme: 1, value: 4.1 }] };
    expect(leadingThemes(table, confirmed, phi)[0]).toBe(1);
  });

  it('mostly agrees with the theme that a passage was drawn from', () => {
    const fit = fitModel(counts, { ...priors, wordPriors: [] }, start, settings);
    const found = leadingThemes(counts, priors, fit.phi);
    const pairs = new Map<string, number>();
    found.forEach((k, d) => {
      const row = theta.subarray(d * 4, (d + 1) * 4);
      const key = `${k} ${row.indexOf(Math.max(...row))}`;
      pairs.set(key, (pairs.get(key) ?? 0) + 1);
    });
    const largest = [...pairs.values()].sort((a, b) => b - a).slice(0, 4);
    expect(largest.reduce((a, b) => a + b, 0) / 150).toBeGreaterThan(0.8);
  });
});
