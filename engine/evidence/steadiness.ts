import type { Base } from './base.ts';
import { perplexityOf } from './perplexity.ts';
import { mean, quantile } from './quantile.ts';
import type { Refit } from './refit.ts';

/** A passage has stayed where its theme leads it again in at least this share of the re-fits. */
const stayedIn = 0.8;

/** What shuffled words reach at most, but for one in twenty (common practice, no source). */
const floorShare = 0.95;

/** Evidence about one theme. All of it plain JSON. */
export type ThemeEvidence = {
  /** Mean cosine of what sets it apart to the same of its partners in the re-fits, -1 to 1. */
  readonly steadiness: number;
  /** Mean cosine to its partners as they are, common words and all, 0 to 1. */
  readonly cosine: number;
  /** Passages that it leads by their words alone … */
  readonly passages: number;
  /** … and how many of them it led again in at least `refitsAtLeast` re-fits. */
  readonly stayed: number;
  /** NPMI of its first words, -1 to 1. */
  readonly coherence: number;
};

export type FitNumbers = {
  /** In the rows of the fit. */
  readonly themes: readonly ThemeEvidence[];
  readonly refits: number;
  readonly refitsAtLeast: number;
  /** Held-out perplexity by document completion, over everybody who was left out. */
  readonly perplexity: number;
  /** Words that it was scored on. */
  readonly scoredWords: number;
};

/** What the same measurements give on the same study with its words shuffled. */
export type Floor = {
  /** 95th percentiles over the themes found there … */
  readonly steadiness: number;
  readonly cosine: number;
  readonly coherence: number;
  /** … and over the leading strengths there, of passages with enough counted words. */
  readonly strength: number;
  /** Means over the themes found there. */
  readonly meanSteadiness: number;
  readonly meanCoherence: number;
  /** Share of all passages that stayed with their theme. */
  readonly stayed: number;
  readonly perplexity: number;
};

/** Puts re-fits together, in their order. */
export function steadinessOf(base: Base, refits: readonly Refit[]): FitNumbers {
  const refitsAtLeast = Math.ceil(stayedIn * refits.length - 1e-9);
  const passages = base.coherence.map(() => 0);
  const stayed = base.coherence.map(() => 0);
  base.leads.forEach((row, d) => {
    if (row < 0) return;
    passages[row]++;
    if (refits.filter((refit) => refit.leads[d] === row).length >= refitsAtLeast) stayed[row]++;
  });
  return {
    themes: base.coherence.map((value, row) => ({
      steadiness: mean(refits.map((refit) => refit.steadiness[row])),
      cosine: mean(refits.map(({ cosines }) => cosines[row])),
      passages: passages[row],
      stayed: stayed[row],
      coherence: value,
    })),
    refits: refits.length,
    refitsAtLeast,
    ...perplexityOf(refits.map((refit) => refit.heldOut)),
  };
}

/** What a fit of shuffled words and its re-fits reach. */
export function floorOf(base: Base, refits: readonly Refit[]): Floor {
  const { themes, perplexity } = steadinessOf(base, refits);
  const steadiness = themes.map((theme) => theme.steadiness);
  const passages = themes.reduce((all, theme) => all + theme.passages, 0);
  const stayed = themes.reduce((all, theme) => all + theme.stayed, 0);
  return {
    steadiness: quantile(steadiness, floorShare),
    cosine: quantile(
      themes.map(({ cosine }) => cosine),
      floorShare,
    ),
    coherence: quantile(base.coherence, floorShare),
    strength: quantile(base.strengths, floorShare),
    meanSteadiness: mean(steadiness),
    meanCoherence: mean(base.coherence),
    stayed: passages === 0 ? 0 : stayed / passages,
    perplexity,
  };
}
