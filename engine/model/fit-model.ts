import { boundOf } from './bound.ts';
import { collapsedBound } from './collapsed/history.ts';
import { prepare, type Prepared } from './collapsed/prepare.ts';
import { poolRun, warmRun, type FreshStart, type Run } from './collapsed/runs.ts';
import { themeSizes } from './collapsed/state.ts';
import { consensus } from './consensus.ts';
import { foldIn, proportions } from './fold-in.ts';
import { liftSeeds } from './lift-seeds.ts';
import type { FitSettings } from './settings.ts';
import type { Counts, ModelFit, Priors, Start, StopReason, TracePoint, Watcher } from './types.ts';
import { unexplained } from './unexplained.ts';

/**
 * The fit people use: collapsed variational inference of order zero (CVB0), and one steady answer.
 *
 * From scratch: a pool of short annealed runs, the consensus of their themes, those themes frozen,
 * and every passage folded in. From a fit before: sweeps that begin where it ended, then the same.
 * Equal arguments give equal bits, on every machine. A cancelled fit ends with what it has.
 */
export function fitModel(
  counts: Counts,
  priors: Priors,
  start: Start,
  settings: FitSettings,
  watcher?: Watcher,
): ModelFit {
  const prepared = prepare('fitModel', counts, priors);
  if (everythingPinned(priors)) {
    return finishFit(prepared, settings, pinnedThemes(prepared), [], 'schedule completed');
  }
  if (start.kind === 'warm') {
    const run = warmRun(prepared, start, settings, watcher);
    return finishFit(prepared, settings, run.phi, [run], run.stopReason);
  }
  const runs: Run[] = [];
  for (let number = 0; number < settings.runs; number++) {
    const run = poolRun(prepared, start, settings, number, partOf(watcher, number, settings.runs));
    runs.push(run);
    if (run.stopReason === 'stopped by a person') break;
  }
  return finishPool(prepared, start, settings, runs);
}

/**
 * How many runs a fit's pool has: 0 where the fit is not pooled (a warm start, or every theme
 * pinned) and `fitModel` makes it in one go. Else its runs, numbered from 0, may be made side by
 * side by `poolRun`, each worker on its own `prepareFit` of the same counts and priors; `finishPool`
 * of all of them in order gives the bits that `fitModel` gives.
 */
export function poolSize(priors: Priors, start: Start, settings: FitSettings): number {
  return start.kind === 'warm' || everythingPinned(priors) ? 0 : settings.runs;
}

/**
 * The consensus of a pool's runs, in the order of their numbers, and every passage folded in. Runs
 * that were cancelled are left out, unless there is nothing else.
 */
export function finishPool(
  prepared: Prepared,
  start: FreshStart,
  settings: FitSettings,
  runs: readonly Run[],
): ModelFit {
  if (runs.length === 0) throw new Error('finishPool: runs is empty; must hold a run at least');
  const { priors, counts } = prepared;
  const whole = runs.filter(({ stopReason }) => stopReason !== 'stopped by a person');
  const used = whole.length > 0 ? whole : runs.slice(0, 1);
  const drawn = drawnThemes(prepared, start);
  const phi = consensus(used, priors, drawn, counts.words, settings, start.like);
  const stopReason = whole.length < runs.length ? 'stopped by a person' : 'schedule completed';
  return finishFit(prepared, settings, phi, used, stopReason);
}

function finishFit(
  prepared: Prepared,
  settings: FitSettings,
  phi: Float32Array,
  runs: readonly Run[],
  stopReason: StopReason,
): ModelFit {
  const { counts, priors, kernel, state } = prepared;
  liftSeeds(phi, counts, priors);
  foldIn(kernel, state, priors, phi, settings.foldPasses);
  const theta = proportions(state, priors);
  const terms = collapsedBound(prepared);
  const trace = runs.length > 0 ? runs[0].trace : [];
  const answer: TracePoint = {
    sweep: trace.length + 1,
    bound: boundOf(terms),
    terms,
    // The words of a fold have been seen by it: no prediction.
    likelihood: null,
    change: 0,
  };
  return {
    theta,
    phi,
    themeWords: themeSizes(state),
    unexplained: unexplained(counts, priors.themes, theta, phi),
    trace: [...trace, answer],
    sweeps: runs.reduce((total, run) => total + run.sweeps, 0),
    stopReason,
    boundTerms: terms,
  };
}

function everythingPinned({ themes, frozen }: Priors): boolean {
  return frozen.length === themes;
}

/** Themes that decisions draw to a row of their own: seeded, or confirmed in a passage. */
function drawnThemes({ priors }: Prepared, { leanings }: FreshStart): boolean[] {
  return priors.raised.map((raised, k) => raised || leanings.some(({ theme }) => theme === k));
}

function pinnedThemes({ counts, priors }: Prepared): Float32Array {
  const phi = new Float32Array(priors.themes * counts.words);
  priors.pinned.forEach((row, k) => row && phi.set(row, k * counts.words));
  return phi;
}

function partOf(watcher: Watcher | undefined, part: number, parts: number): Watcher | undefined {
  if (!watcher) return undefined;
  return { progress: (point, fraction) => watcher.progress(point, (part + fraction) / parts) };
}
