import { matchThemes } from '../model/index.ts';
import { coherence } from './coherence.ts';
import { departures } from './departures.ts';
import type { Material } from './material.ts';
import { mean, standardError } from './quantile.ts';
import { heldOutOf, themesWithout } from './refit.ts';
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

/** How a number of themes fares, over the fits to everybody and to everybody but each group. */
export type NumberScores = {
  readonly themes: number;
  /** Held-out perplexity over all groups. */
  readonly perplexity: number;
  /** NPMI, mean over the themes of all the fits: those of one alone jump from number to number. */
  readonly coherence: number;
  /** Standard errors over the fits. */
  readonly coherenceError: number;
  /** Mean matched cosine of what sets themes apart, between every two of the fits. */
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
  const outs = [[], ...groups];
  const found: Float32Array[] = [];
  for (const [done, out] of outs.entries()) {
    const phi = themesWithout(plain, out, part(done));
    if (phi === null) return null;
    found.push(phi);
  }
  const held = groups.map((group, i) => heldOutOf(plain, found[1 + i], group));
  const coherences = found.map((phi) => mean(coherence(counts, phi)));
  const likeness = likenesses(
    found.map((phi) => departures(phi, counts)),
    counts.words,
  );
  return {
    themes,
    perplexity: perplexityOf(held).perplexity,
    coherence: mean(coherences),
    coherenceError: standardError(coherences),
    steadiness: mean(likeness),
    steadinessError: standardError(likeness),
  };
}

/** How much each set of themes resembles the others: its mean matched cosine to them. */
function likenesses(found: readonly Float32Array[], words: number): number[] {
  const n = found.length;
  const sums = new Float64Array(n);
  for (let i = 0; i < n; i++) {
    for (let j = i + 1; j < n; j++) {
      const alike = mean(matchThemes(found[i], found[j], words).cosines);
      sums[i] += alike;
      sums[j] += alike;
    }
  }
  return Array.from(sums, (sum) => sum / (n - 1));
}
