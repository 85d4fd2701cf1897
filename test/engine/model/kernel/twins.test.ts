import { describe, expect, it } from 'vitest';
import { createGenerator } from '../../../../engine/numbers/index.ts';
import { fitMeanField, fitModel, quickFitSettings } from '../../../../engine/model/index.ts';
import type { Priors } from '../../../../engine/model/index.ts';
import { prepare } from '../../../../engine/model/collapsed/prepare.ts';
import { startFresh } from '../../../../engine/model/collapsed/start.ts';
import { poolRun } from '../../../../engine/model/collapsed/runs.ts';
import { defaultKernel } from '../../../../engine/model/kernel/index.ts';
import type { Kernel } from '../../../../engine/model/kernel/kernel.ts';
import type { SweepState } from '../../../../engine/model/kernel/state.ts';
import { plainKernel } from '../../../../engine/model/kernel/plain.ts';
import { webAssemblyKernel } from '../../../../engine/model/kernel/webassembly.ts';
import { plantedCorpus } from '../planted.ts';

const simd = webAssemblyKernel()!;
const { counts } = plantedCorpus(60, 120, 5, 40, 4);
const chance = createGenerator(8);

/** Priors with every kind of decision in them. */
function decided(themes: number): Priors {
  const phi = Float32Array.from({ length: 120 }, () => chance.uniform());
  const sum = phi.reduce((a, b) => a + b, 0);
  return {
    themes,
    alpha: 0.1,
    eta: 0.05,
    themeAlpha: [{ theme: 0, value: 0.2 }],
    wordPriors: [
      { theme: 0, word: 3, value: 4 },
      { theme: 0, word: 4, value: 0 },
      { theme: themes - 1, word: 5, value: 0 },
    ],
    passagePriors: [
      { passage: 0, theme: 0, value: 0 },
      { passage: 1, theme: 0, value: 30 },
    ],
    frozen: themes > 2 ? [{ theme: 1, phi: phi.map((value) => value / sum) }] : [],
  };
}

function begun(kernel: Kernel, priors: Priors) {
  const prepared = prepare('test', counts, priors, kernel);
  const leanings = [{ theme: 0, word: 3 }];
  startFresh(kernel, prepared.state, counts, prepared.priors, leanings, 7, 0.173, 0.95);
  return prepared;
}

/** All of a state but its working space, in which the twins leave different things. */
function kept(state: SweepState) {
  return { ...state, scratch: null };
}

describe('the SIMD kernel and its plain twin', () => {
  it('is the default where WebAssembly is there', () => {
    expect(simd).not.toBeNull();
    expect(defaultKernel).not.toBe(plainKernel);
  });

  for (const themes of [1, 2, 3, 4, 5, 8, 13]) {
    it(`sweep, recount and assign leave equal bits with ${themes} themes`, () => {
      const priors = decided(themes);
      const a = begun(simd, priors);
      const b = begun(plainKernel, priors);
      for (const exponent of [0.5, 0.75, 0.875, 1, 1] as const) {
        expect(simd.sweep(a.state, exponent)).toBe(plainKernel.sweep(b.state, exponent));
        expect(kept(a.state)).toEqual(kept(b.state));
      }
      simd.recount(a.state);
      plainKernel.recount(b.state);
      expect(kept(a.state)).toEqual(kept(b.state));
      simd.assign(a.state);
      plainKernel.assign(b.state);
      expect(kept(a.state)).toEqual(kept(b.state));
    });

    it(`the E-step leaves equal bits with ${themes} themes`, () => {
      const priors = decided(themes);
      const lambda = Float64Array.from({ length: themes * 120 }, () => 0.5 + chance.uniform());
      const settings = { steps: 6, innerLimit: 40, innerTolerance: 1e-6, flatSteps: 3 };
      expect(fitMeanField(counts, priors, lambda, settings, simd)).toEqual(
        fitMeanField(counts, priors, lambda, settings, plainKernel),
      );
    });
  }

  it('leaves equal bits where occurrences weigh less than one', () => {
    const light = {
      ...counts,
      counts: counts.counts.map((count, j) => count * (0.1 + (j % 7) / 5)),
    };
    const priors = decided(5);
    const [a, b] = [simd, plainKernel].map((kernel) => {
      const prepared = prepare('test', light, priors, kernel);
      startFresh(kernel, prepared.state, light, prepared.priors, [], 7, 0.173, 0.95);
      for (let i = 0; i < 3; i++) kernel.sweep(prepared.state, 1);
      return prepared.state;
    });
    expect(kept(a)).toEqual(kept(b));
  });

  it('a run of a pool is the same on both', () => {
    const priors = decided(6);
    const start = { kind: 'fresh', seed: 3, leanings: [{ theme: 0, word: 3 }] } as const;
    const run = (kernel: Kernel) =>
      poolRun(prepare('test', counts, priors, kernel), start, quickFitSettings, 0);
    expect(run(simd)).toEqual(run(plainKernel));
  });

  it('refuses a state that another kernel made room for', () => {
    const { state } = begun(plainKernel, decided(3));
    expect(() => simd.sweep(state, 1)).toThrow('allocated by another kernel');
  });

  it('survives many fits one after the other', () => {
    const small = plantedCorpus(5, 10, 2, 10, 1).counts;
    const priors = { ...decided(2), wordPriors: [], passagePriors: [] };
    const fits = Array.from({ length: 200 }, () =>
      fitModel(
        small,
        priors,
        { kind: 'fresh', seed: 1, leanings: [] },
        { ...quickFitSettings, runs: 1 },
      ),
    );
    for (const fit of fits) expect(fit).toEqual(fits[0]);
  });
});
