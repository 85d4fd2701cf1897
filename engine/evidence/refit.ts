import {
  cosine,
  fitModel,
  folded,
  heldOut,
  matchThemes,
  type ModelFit,
  type Watcher,
} from '../model/index.ts';
import { departures } from './departures.ts';
import { leads } from './leads.ts';
import type { Material } from './material.ts';
import type { HeldOutWords } from './perplexity.ts';
import { partOfPeople, partWithout, priorsOfPart, undecided } from './part.ts';

/** Mixed into the seed that halves held-out passages: always the same halves. */
const halvesSeed = 1;

/** How the themes of a fit fared in a fit without some of the people. Plain data. */
export interface Refit {
  /** The cosine of what sets each theme apart to the same of its partner found anew, K values. */
  readonly steadiness: readonly number[];
  /** The cosine of the two distributions themselves, K values from 0 to 1. */
  readonly cosines: readonly number[];
  /** The theme that leads each passage now, by the fit's own rows; -1 where nothing was counted. */
  readonly leads: Int32Array;
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

/** Themes looked for anew without the people in `out`, K x V by rows; null where it was stopped. */
export function themesWithout(
  material: Material,
  out: readonly number[],
  watcher?: Watcher,
): Float32Array | null {
  const { counts, people, priors } = material;
  const part = partWithout(counts, people, out);
  const heard = { ...material, counts: part.counts, priors: priorsOfPart(priors, part) };
  return fitAnew(heard, watcher)?.phi ?? null;
}

/** Scores half of the words of the people in `out` under themes that were found without them. */
export function heldOutOf(
  { counts, people, priors, settings }: Material,
  phi: Float32Array,
  out: readonly number[],
): HeldOutWords {
  const unheard = partOfPeople(counts, people, out).counts;
  const score = heldOut(unheard, undecided(priors), phi, settings.foldPasses, halvesSeed);
  return { total: score.likelihood * score.words, words: score.words };
}

/**
 * Looks for the themes anew without the people in `out`, pairs them with those of the fit so that
 * they are most alike in what sets them apart, and asks where every passage goes now by its words alone, also the
 * passages of those who were left out. Null where it was stopped.
 */
export function refitWithout(
  material: Material,
  out: readonly number[],
  watcher?: Watcher,
): Refit | null {
  const phi = themesWithout(material, out, watcher);
  if (phi === null) return null;
  const { counts, priors, settings } = material;
  const { partner, cosines: steadiness } = matchThemes(
    departures(material.phi, counts),
    departures(phi, counts),
    counts.words,
  );
  const rowOf = new Map(Array.from(partner, (anew, row) => [anew, row]));
  const theta = folded(counts, undecided(priors), phi, settings.foldPasses);
  return {
    steadiness: [...steadiness],
    cosines: Array.from(partner, (anew, row) =>
      cosine(material.phi, phi, counts.words, row * counts.words, anew * counts.words),
    ),
    leads: leads(counts, priors.themes, theta).map((anew) => rowOf.get(anew) ?? -1),
    heldOut: heldOutOf(material, phi, out),
  };
}

function unlessStopped(fit: ModelFit): ModelFit | null {
  return fit.stopReason === 'stopped by a person' ? null : fit;
}
