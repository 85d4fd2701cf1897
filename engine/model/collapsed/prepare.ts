import { sum } from '../../numbers/index.ts';
import { checkCounts } from '../check-counts.ts';
import { densePriors, type DensePriors } from '../dense-priors.ts';
import type { Kernel } from '../kernel/kernel.ts';
import { defaultKernel } from '../kernel/index.ts';
import type { SweepState } from '../kernel/state.ts';
import type { Counts, Priors } from '../types.ts';
import { createState } from './state.ts';

/**
 * Counts and priors checked, written out and laid into a state: made once, used for many runs one
 * after the other. A run leaves nothing in it that another run could notice.
 */
export interface Prepared {
  readonly counts: Counts;
  readonly priors: DensePriors;
  readonly kernel: Kernel;
  readonly state: SweepState;
  /** All occurrences of all words. */
  readonly countedWords: number;
}

export function prepare(
  caller: string,
  counts: Counts,
  priors: Priors,
  kernel: Kernel = defaultKernel,
): Prepared {
  checkCounts(caller, counts);
  const dense = densePriors(caller, counts, priors);
  const countedWords = sum(counts.counts);
  return { counts, priors: dense, kernel, state: createState(kernel, counts, dense), countedWords };
}

/** The counts and priors of one fit, ready for its runs (see poolSize). */
export function prepareFit(counts: Counts, priors: Priors): Prepared {
  return prepare('prepareFit', counts, priors);
}
