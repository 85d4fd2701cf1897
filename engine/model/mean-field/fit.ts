import { carve } from '../kernel/carve.ts';
import { boundOf, boundTerms, expectedDistributions } from '../bound.ts';
import { checkCounts } from '../check-counts.ts';
import { densePriors, type DensePriors } from '../dense-priors.ts';
import type { MeanFieldState } from '../kernel/expectation.ts';
import { defaultKernel } from '../kernel/index.ts';
import type { Kernel } from '../kernel/kernel.ts';
import type { BoundTerms, Counts, Priors } from '../types.ts';

export interface MeanFieldSettings {
  /** Outer steps, from 0: each an E-step over all passages and an M-step. */
  readonly steps: number;
  /** Steps of the E-step in one passage at most. */
  readonly innerLimit: number;
  /** A passage is done where its mean absolute change of gamma is below this. */
  readonly innerTolerance: number;
  /**
   * Outer steps in which each passage starts flat (gamma = 1). Starting where the step before ended
   * is faster, but from the first step on it commits passages before there are themes: the bound
   * was 10 % worse.
   */
  readonly flatSteps: number;
}

export const defaultMeanFieldSettings: MeanFieldSettings = {
  steps: 100,
  innerLimit: 100,
  innerTolerance: 1e-3,
  flatSteps: 20,
};

export interface MeanFieldFit {
  /** Dirichlet parameters of the proportions, D x K by rows. */
  readonly gamma: Float64Array;
  /** Dirichlet parameters of the distributions, K x V by rows; 0 for pinned themes. */
  readonly lambda: Float64Array;
  /** Posterior expected proportions, D x K by rows. */
  readonly theta: Float64Array;
  /** Posterior expected distributions, K x V by rows. */
  readonly phi: Float64Array;
  readonly boundTerms: BoundTerms;
  /** The bound after 0, 1, 2 … outer steps; never falls where the inner loop is tight. */
  readonly bounds: readonly number[];
  /** Steps of the E-step over all passages and outer steps. */
  readonly innerSteps: number;
}

/**
 * Batch variational inference with the exact bound (Blei, Ng & Jordan 2003; Hoffman, Blei & Bach
 * 2010), in f64, from the given lambda (K x V by rows, above 0). Ends with one more E-step, so that
 * gamma belongs to the lambda returned.
 */
export function fitMeanField(
  counts: Counts,
  priors: Priors,
  lambda: Float64Array,
  settings: MeanFieldSettings,
  kernel: Kernel = defaultKernel,
): MeanFieldFit {
  const caller = 'fitMeanField';
  checkCounts(caller, counts);
  const dense = densePriors(caller, counts, priors);
  const { themes } = dense;
  const { words } = counts;
  if (lambda.length !== themes * words) {
    throw new Error(`${caller}: lambda.length is ${lambda.length}; must be ${themes * words}`);
  }
  let current: Float64Array = lambda.map((value, i) => (dense.eta[i] > 0 ? value : 0));
  const bad = current.findIndex((value, i) => dense.eta[i] > 0 && !(value > 0 && value < Infinity));
  if (bad >= 0) throw new Error(`${caller}: lambda[${bad}] is ${lambda[bad]}; must be above 0`);

  const state = createMeanFieldState(kernel, counts, dense);
  const bounds: number[] = [];
  let innerSteps = 0;
  let terms: BoundTerms = { words: 0, proportions: 0, distributions: 0 };
  for (let step = 0; step <= settings.steps; step++) {
    layWords(state.expected, expectedDistributions(dense, current, words), state);
    const flat = step < Math.max(1, settings.flatSteps);
    innerSteps += kernel.expectation(state, settings.innerLimit, settings.innerTolerance, flat);
    terms = boundTerms(counts, dense, gammaOf(state), current);
    bounds.push(boundOf(terms));
    if (step < settings.steps) current = nextLambda(dense, state);
  }
  const gamma = gammaOf(state);
  return {
    gamma,
    lambda: current,
    theta: normalised(gamma, themes),
    phi: expectedPhi(dense, current, words),
    boundTerms: terms,
    bounds,
    innerSteps,
  };
}

/** Proportions of passages that were not fitted, under fixed lambda: gamma, D x K by rows. */
export function foldInMeanField(
  counts: Counts,
  priors: Priors,
  lambda: Float64Array,
  innerLimit: number,
  innerTolerance: number,
): Float64Array {
  const settings = { steps: 0, innerLimit, innerTolerance, flatSteps: 1 };
  return fitMeanField(counts, priors, lambda, settings).gamma;
}

/**
 * The M-step: lambda = eta + expected x statistics. The product is easily forgotten, and two
 * implementations that both forget it agree; the bound falls.
 */
function nextLambda(priors: DensePriors, state: MeanFieldState): Float64Array {
  const { words, themes, stride, expected, statistics } = state;
  const lambda = new Float64Array(themes * words);
  for (let k = 0; k < themes; k++) {
    if (priors.pinned[k]) continue;
    for (let w = 0; w < words; w++) {
      const i = w * stride + k;
      lambda[k * words + w] = priors.eta[k * words + w] + expected[i] * statistics[i];
    }
  }
  return lambda;
}

function createMeanFieldState(kernel: Kernel, counts: Counts, priors: DensePriors): MeanFieldState {
  const { passages, words } = counts;
  const { themes } = priors;
  const stride = (themes + 1) & ~1;
  const entries = counts.indices.length;
  const { integers, doubles } = carve(
    kernel,
    4 * (passages + 1 + entries) + 8 * (entries + 2 * (passages + words) * stride + 2 * stride),
  );
  const state: MeanFieldState = {
    passages,
    words,
    themes,
    stride,
    offsets: integers(passages + 1),
    indices: integers(entries),
    counts: doubles(entries),
    alpha: doubles(passages * stride),
    gamma: doubles(passages * stride),
    expected: doubles(words * stride),
    statistics: doubles(words * stride),
    scratch: doubles(2 * stride),
  };
  state.offsets.set(counts.offsets);
  state.indices.set(counts.indices);
  state.counts.set(counts.counts);
  for (let d = 0; d < passages; d++) {
    state.alpha.set(priors.alpha.subarray(d * themes, (d + 1) * themes), d * stride);
  }
  return state;
}

/** K x V into rows of words. */
function layWords(target: Float64Array, source: Float64Array, state: MeanFieldState): void {
  const { words, themes, stride } = state;
  for (let k = 0; k < themes; k++) {
    for (let w = 0; w < words; w++) target[w * stride + k] = source[k * words + w];
  }
}

function gammaOf({ passages, themes, stride, gamma }: MeanFieldState): Float64Array {
  const rows = new Float64Array(passages * themes);
  for (let d = 0; d < passages; d++) {
    rows.set(gamma.subarray(d * stride, d * stride + themes), d * themes);
  }
  return rows;
}

function normalised(rows: Float64Array, width: number): Float64Array {
  const result = new Float64Array(rows.length);
  for (let start = 0; start < rows.length; start += width) {
    let total = 0;
    for (let k = 0; k < width; k++) total += rows[start + k];
    for (let k = 0; k < width; k++) result[start + k] = total > 0 ? rows[start + k] / total : 0;
  }
  return result;
}

function expectedPhi(priors: DensePriors, lambda: Float64Array, words: number): Float64Array {
  const phi = normalised(lambda, words);
  priors.pinned.forEach((row, k) => row && phi.set(row, k * words));
  return phi;
}
