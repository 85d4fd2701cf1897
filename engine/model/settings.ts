import type { Exponent } from './kernel/kernel.ts';

/**
 * The version of the numerical method. It goes up with every change after which the same counts,
 * priors, start and settings no longer give the same bits; a stored fit names the number it was
 * made with, and only that method can verify it.
 */
export const methodNumber = 2;

/** A stretch of sweeps at one exponent (below 1: annealed, responsibilities flatter). */
export interface Stage {
  readonly exponent: Exponent;
  readonly sweeps: number;
}

/** Everything that steers a fit besides its data; plain data, stored with the fit. */
export interface FitSettings {
  /** Runs in the pool of a fit from scratch, from 1. */
  readonly runs: number;
  /** The sweeps of each of them; the last stage has exponent 1. */
  readonly schedule: readonly Stage[];
  /** A responsibility starts within this share of an even one, 0 to 1. */
  readonly jitter: number;
  /** The share of a seed word's occurrences that starts on its themes, 0 to 1. */
  readonly lean: number;
  /** Share of the runs whose themes count as a theme's neighbours in the consensus, 0 to 1. */
  readonly neighbours: number;
  /** k-means rounds of the consensus at most. */
  readonly consensusRounds: number;
  /** Sweeps of a warm start at most. */
  readonly sweepLimit: number;
  /** Sweeps of a warm start at least. */
  readonly sweepsAtLeast: number;
  /** A warm start is judged every so many sweeps … */
  readonly judgeEvery: number;
  /** … and stops where the likelihood rose by less than this, in nats a counted word. */
  readonly tolerance: number;
  /** Expected counts are added up afresh every so many sweeps, against rounding in f32. */
  readonly recountEvery: number;
  /** The bound is evaluated every so many sweeps (of a pool: of its first run); 0 for never. */
  readonly boundEvery: number;
  /** Passes over each passage that find its proportions once the themes are frozen, from 1. */
  readonly foldPasses: number;
}

/** The full answer; where each number comes from is said in README.md. */
export const defaultFitSettings: FitSettings = {
  runs: 16,
  schedule: [
    { exponent: 0.75, sweeps: 20 },
    { exponent: 0.875, sweeps: 20 },
    { exponent: 1, sweeps: 30 },
  ],
  jitter: 0.173,
  lean: 0.95,
  neighbours: 0.3,
  consensusRounds: 15,
  sweepLimit: 40,
  sweepsAtLeast: 20,
  judgeEvery: 10,
  tolerance: 5e-4,
  recountEvery: 10,
  boundEvery: 10,
  foldPasses: 10,
};

/** A first answer in about a quarter of the time. */
export const quickFitSettings: FitSettings = {
  ...defaultFitSettings,
  runs: 8,
  schedule: [
    { exponent: 0.75, sweeps: 10 },
    { exponent: 0.875, sweeps: 10 },
    { exponent: 1, sweeps: 15 },
  ],
  boundEvery: 0,
};
