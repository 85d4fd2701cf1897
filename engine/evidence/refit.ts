import {
  fitModel,
  folded,
  heldOut,
  matchThemes,
  type ModelFit,
  type Watcher,
} from '../model/index.ts';
import { coherence } from './coherence.ts';
import { leads } from './leads.ts';
import type { Material } from './material.ts';
import type { HeldOutWords } from './perplexity.ts';
import { mean } from './quantile.ts';
import { partOfPeople, partWithout, priorsOfPart, undecided } from './part.ts';

/** Mixed into the seed that halves held-out passages: always the same halves. */
const halvesSeed = 1;

/** How the themes of a fit fared in a fit without some of the people. Plain data. */
export interface Refit {
  /** The cosine of each theme to its partner among the themes found anew, K values from 0 to 1. */
  readonly cosines: readonly number[];
  /** The theme that leads each passage now, by the fit's own rows; -1 where nothing was counted. */
  readonly leads: Int32Array;
  /** Mean NPMI of the themes found anew, over the passages of everybody. */
  readonly coherence: number;
  /** Half of the words of those who were left out, predicted from the other half. */
  readonly heldOut: HeldOutWords;
}

/** The themes of a material looked for anew, among all people; null where it was stopped. */
export function fitAnew(material: Material, watcher?: Watcher): ModelFit | null {
  const { counts, priors, leanings, seed, settings } = material;
  return unlessStopped(
    fitModel(counts, priors, { kind: 'fresh', seed, leanings }, settings, watcher),
  );
}

/**
 * Looks for the themes anew without the people in `out`, pairs them with those of the fit so that
 * the cosines are largest in sum, and asks where every passage goes now by its words alone, also the
 * passages of those who were left out. Null where it was stopped.
 */
export function refitWithout(
  material: Material,
  out: readonly number[],
  watcher?: Watcher,
): Refit | null {
  const { counts, people, priors, settings } = material;
  const part = partWithout(counts, people, out);
  const fit = fitAnew(
    { ...material, counts: part.counts, priors: priorsOfPart(priors, part) },
    watcher,
  );
  if (fit === null) return null;
  const { partner, cosines } = matchThemes(material.phi, fit.phi, counts.words);
  const rowOf = new Map(Array.from(partner, (anew, row) => [anew, row]));
  const theta = folded(counts, undecided(priors), fit.phi, settings.foldPasses);
  const unheard = partOfPeople(counts, people, out).counts;
  const score = heldOut(unheard, undecided(priors), fit.phi, settings.foldPasses, halvesSeed);
  return {
    cosines: [...cosines],
    leads: leads(counts, priors.themes, theta).map((anew) => rowOf.get(anew) ?? -1),
    coherence: mean(coherence(counts, fit.phi)),
    heldOut: { total: score.likelihood * score.words, words: score.words },
  };
}

function unlessStopped(fit: ModelFit): ModelFit | null {
  return fit.stopReason === 'stopped by a person' ? null : fit;
}
