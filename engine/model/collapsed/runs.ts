import { hash32 } from '../../numbers/index.ts';
import type { Exponent } from '../kernel/kernel.ts';
import type { FitSettings } from '../settings.ts';
import type { Start, StopReason, TracePoint, Watcher } from '../types.ts';
import { boundOf } from '../bound.ts';
import { collapsedBound, predictiveLikelihood } from './history.ts';
import type { Prepared } from './prepare.ts';
import { startFresh, startWarm } from './start.ts';
import { distributions, setPriors, themeSizes } from './state.ts';

/** What a run leaves: its themes and how large they are. */
export interface Run {
  /** Theme-word distributions, K x V by rows. */
  readonly phi: Float32Array;
  /** Expected counts of each theme, K values, in words. */
  readonly sizes: Float64Array;
  readonly sweeps: number;
  readonly trace: readonly TracePoint[];
  readonly stopReason: StopReason;
}

export type FreshStart = Extract<Start, { kind: 'fresh' }>;
export type WarmStart = Extract<Start, { kind: 'warm' }>;

/**
 * Run number `run` of a pool: from scratch through the annealed schedule. It depends on its
 * arguments alone, so runs may be made anywhere, in any order. The first run (0) keeps the bound.
 */
export function poolRun(
  prepared: Prepared,
  start: FreshStart,
  settings: FitSettings,
  run: number,
  watcher?: Watcher,
): Run {
  const { counts, priors, kernel, state } = prepared;
  setPriors(state, priors);
  const seed = hash32(start.seed, run, 0);
  const { jitter, lean } = settings;
  startFresh(kernel, state, counts, priors, start.leanings, seed, jitter, lean);

  const exponents = settings.schedule.flatMap((stage) =>
    new Array<Exponent>(stage.sweeps).fill(stage.exponent),
  );
  const boundEvery = run === 0 ? settings.boundEvery : 0;
  const trace: TracePoint[] = [];
  for (const exponent of exponents) {
    trace.push(sweepOnce(prepared, settings, boundEvery, exponent, trace.length + 1));
    if (watcher?.progress(trace[trace.length - 1], trace.length / exponents.length) === false) {
      return finishRun(prepared, trace, 'stopped by a person');
    }
  }
  return finishRun(prepared, trace, 'schedule completed');
}

/**
 * A run that begins where a fit before ended. `hold` adds that share of each theme's old expected
 * counts to its prior. Stops where the likelihood settles, or at the limit.
 */
export function warmRun(
  prepared: Prepared,
  start: WarmStart,
  settings: FitSettings,
  watcher?: Watcher,
): Run {
  const { priors, kernel, state } = prepared;
  checkWarmStart(prepared, start);
  setPriors(state, priors);
  startWarm(kernel, state, start.theta, start.phi, start.leanings, settings.lean);
  holdThemes(prepared, start);

  const trace: TracePoint[] = [];
  let judged = -Infinity;
  while (trace.length < settings.sweepLimit) {
    const point = sweepOnce(prepared, settings, settings.boundEvery, 1, trace.length + 1);
    trace.push(point);
    if (watcher?.progress(point, trace.length / settings.sweepLimit) === false) {
      return finishRun(prepared, trace, 'stopped by a person');
    }
    if (point.likelihood === null || point.sweep % settings.judgeEvery !== 0) continue;
    const settled = point.likelihood - judged < settings.tolerance;
    if (settled && point.sweep >= settings.sweepsAtLeast) {
      return finishRun(prepared, trace, 'converged');
    }
    judged = point.likelihood;
  }
  return finishRun(prepared, trace, 'sweep limit');
}

function sweepOnce(
  prepared: Prepared,
  settings: FitSettings,
  boundEvery: number,
  exponent: Exponent,
  sweep: number,
): TracePoint {
  const { kernel, state } = prepared;
  const changed = kernel.sweep(state, exponent);
  if (sweep % settings.recountEvery === 0) kernel.recount(state);
  const evaluated = boundEvery > 0 && sweep % boundEvery === 0;
  const terms = evaluated ? collapsedBound(prepared) : null;
  const judged = exponent === 1 && sweep % settings.judgeEvery === 0;
  return {
    sweep,
    bound: terms === null ? null : boundOf(terms),
    terms,
    likelihood: judged ? predictiveLikelihood(prepared) : null,
    change: prepared.countedWords > 0 ? changed / prepared.countedWords : 0,
  };
}

function finishRun(
  { kernel, state }: Prepared,
  trace: readonly TracePoint[],
  stopReason: StopReason,
): Run {
  kernel.recount(state);
  const sizes = themeSizes(state);
  return { phi: distributions(state), sizes, sweeps: trace.length, trace, stopReason };
}

function checkWarmStart({ counts, priors }: Prepared, start: WarmStart): void {
  const { themes } = priors;
  const check = (name: string, length: number, expected: number): void => {
    if (length !== expected) {
      throw new Error(`fitModel: start.${name}.length is ${length}; must be ${expected}`);
    }
  };
  check('theta', start.theta.length, counts.passages * themes);
  check('phi', start.phi.length, themes * counts.words);
  check('hold', start.hold.length, themes);
}

/** Adds hold x size x phi of the fit before to the word priors; what is shut out stays at 0. */
function holdThemes({ state }: Prepared, { phi, hold }: WarmStart): void {
  const { words, themes, stride, eta, etaTotals, moving } = state;
  const sizes = themeSizes(state);
  for (let k = 0; k < themes; k++) {
    if (moving[k] === 0 || !(hold[k] > 0)) continue;
    let total = 0;
    for (let w = 0; w < words; w++) {
      const i = w * stride + k;
      if (eta[i] > 0) eta[i] += hold[k] * sizes[k] * phi[k * words + w];
      total += eta[i];
    }
    if (total > 0) etaTotals[k] = total;
  }
}
