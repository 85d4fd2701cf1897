import { coherence } from './coherence.ts';
import type { Material } from './material.ts';
import { mean, standardError } from './quantile.ts';
import { fitAnew, refitWithout, type Refit } from './refit.ts';
import { shuffled } from './shuffled.ts';
import { perplexityOf } from './perplexity.ts';

/** One number of themes to be tried. */
export interface NumberAsked {
  readonly themes: number;
  /** The people in groups; each group is held out once. */
  readonly groups: readonly (readonly number[])[];
  /** Seed of the shuffling; null for the study as it is. */
  readonly shuffle: number | null;
}

/** How a number of themes fares: means over its themes. Plain JSON. */
export type NumberScores = {
  readonly themes: number;
  /** Held-out perplexity over all groups. */
  readonly perplexity: number;
  /** Over the themes of all the fits: one fit's alone jump from number to number. */
  readonly coherence: number;
  /** Standard errors, over the fits without each group. */
  readonly coherenceError: number;
  readonly steadiness: number;
  readonly steadinessError: number;
};

/**
 * Fits so many themes from scratch, to everybody and to everybody but each group, with no decision
 * taken into account. Null where it was stopped.
 */
export function scoreNumber(
  material: Material,
  { themes, groups, shuffle }: NumberAsked,
  progress: (fraction: number) => boolean,
): NumberScores | null {
  const { alpha, eta } = material.priors;
  const counts = shuffle === null ? material.counts : shuffled(material.counts, shuffle);
  const plain: Material = {
    ...material,
    counts,
    priors: { themes, alpha, eta, wordPriors: [], passagePriors: [], frozen: [] },
    leanings: [],
  };
  const fits = 1 + groups.length;
  const part = (done: number) => ({
    progress: (_point: unknown, fraction: number) => progress((done + fraction) / fits),
  });
  const fit = fitAnew(plain, part(0));
  if (fit === null) return null;
  const found: Material = { ...plain, phi: fit.phi };
  const refits: Refit[] = [];
  for (const [done, group] of groups.entries()) {
    const refit = refitWithout(found, group, part(1 + done));
    if (refit === null) return null;
    refits.push(refit);
  }
  const steadiness = refits.map(({ cosines }) => mean(cosines));
  const coherences = [mean(coherence(counts, fit.phi)), ...refits.map((refit) => refit.coherence)];
  return {
    themes,
    perplexity: perplexityOf(refits.map(({ heldOut }) => heldOut)).perplexity,
    coherence: mean(coherences),
    coherenceError: standardError(coherences),
    steadiness: mean(steadiness),
    steadinessError: standardError(steadiness),
  };
}
