import type { Priors, Start } from '../model/index.ts';
import type { Prepared } from '../text/index.ts';
import type { FitJob, WordPlaces } from './fit-job.ts';
import { priorsOf, type Deciding } from './priors.ts';
import { placesOf } from './word-places.ts';

/**
 * What decisions ask of a model of these words: its priors, and where seed words begin. For fits that
 * look at a stored fit's words again.
 */
export function askedOf(
  deciding: Deciding & Pick<FitJob, 'text'>,
  words: Prepared,
): { readonly priors: Priors; readonly leanings: Start['leanings'] } {
  const places = placesOf(words, deciding.text);
  return {
    priors: priorsOf(deciding, words, places),
    leanings: leaningsOf(deciding, places),
  };
}

/** Seeds that are counted, as places in the vocabulary. */
export function leaningsOf(
  { themes }: Pick<FitJob, 'themes'>,
  places: WordPlaces,
): Start['leanings'] {
  return themes.flatMap(({ seeds }, theme) =>
    seeds.flatMap((form) => {
      const word = places(form);
      return word === undefined ? [] : [{ theme, word }];
    }),
  );
}
