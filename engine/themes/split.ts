import { fitModel, quickFitSettings, type Counts, type Watcher } from '../model/index.ts';
import type { Prepared } from '../text/index.ts';
import type { FitJob, PreviousFit, WordPlaces } from './fit-job.ts';

/** A word's part in a theme below this is left out: thousands of such entries change no half. */
const leastPart = 0.01;

/** The smaller half holds at least this share of the theme's words, or the theme does not split. */
const leastShare = 0.05;

export interface Halves {
  /** Word distributions, V values each: of the half that keeps the theme's id, and of the other. */
  readonly kept: Float32Array;
  readonly parted: Float32Array;
}

/**
 * A theme of a stored fit in two: a model of two themes for its own part of every word (the
 * responsibilities that follow from the fit's proportions and distributions), by the quick recipe.
 * The half on which more of the theme's confirmed passages lean keeps its id; where neither has
 * more, the one with more of its seeds, and else the larger. Null where nothing stands apart in it.
 */
export function halvesOf(
  previous: PreviousFit,
  row: number,
  job: Pick<FitJob, 'alpha' | 'eta' | 'seed'>,
  confirmed: readonly number[],
  seeds: readonly number[],
  watcher?: Watcher,
): Halves | null {
  const counts = partOfTheme(previous, row);
  // Each half smooths half as much, so that both together are smoothed as the theme was.
  const priors = {
    themes: 2,
    alpha: job.alpha,
    eta: job.eta / 2,
    wordPriors: [],
    passagePriors: [],
    frozen: [],
  };
  const start = { kind: 'fresh' as const, seed: job.seed, leanings: [] };
  const { phi, themeWords } = fitModel(counts, priors, start, quickFitSettings, watcher);
  const [first, second] = themeWords;
  if (!(Math.min(first, second) >= leastShare * (first + second))) return null;
  const halves = [phi.slice(0, counts.words), phi.slice(counts.words)];
  const votes = confirmed.map((passage) =>
    Math.sign(leaning(previous.words, passage, halves[0], halves[1])),
  );
  const bySeeds = seeds.reduce((sum, word) => sum + halves[0][word] - halves[1][word], 0);
  const won = votes.reduce((sum, vote) => sum + vote, 0) || bySeeds || first - second;
  return won >= 0 ? { kept: halves[0], parted: halves[1] } : { kept: halves[1], parted: halves[0] };
}

/**
 * How far a passage's words speak for the first of two distributions, summed over its counted words
 * from -1 (the second alone has the word) to 1.
 */
export function leaning(
  { counts }: Pick<Prepared, 'counts'>,
  passage: number,
  first: Float32Array,
  second: Float32Array,
): number {
  let sum = 0;
  for (let j = counts.offsets[passage]; j < counts.offsets[passage + 1]; j++) {
    const a = first[counts.indices[j]];
    const b = second[counts.indices[j]];
    if (a + b > 0) sum += (counts.counts[j] * (a - b)) / (a + b);
  }
  return sum;
}

/** Each count times the theme's responsibility for it. */
function partOfTheme({ themes, words, theta, phi }: PreviousFit, row: number): Counts {
  const { passages, words: size, offsets, indices, counts } = words.counts;
  const k = themes.length;
  const own: number[] = [];
  const parts: number[] = [];
  const ends = new Int32Array(passages + 1);
  for (let d = 0; d < passages; d++) {
    for (let j = offsets[d]; j < offsets[d + 1]; j++) {
      let all = 0;
      for (let t = 0; t < k; t++) all += theta[d * k + t] * phi[t * size + indices[j]];
      const mine = theta[d * k + row] * phi[row * size + indices[j]];
      if (all <= 0 || mine < leastPart * all) continue;
      own.push(indices[j]);
      parts.push((counts[j] * mine) / all);
    }
    ends[d + 1] = own.length;
  }
  return {
    passages,
    words: size,
    offsets: ends,
    indices: Int32Array.from(own),
    counts: Float32Array.from(parts),
  };
}

/** Seeds of a theme as places in the vocabulary. */
export function seedPlaces(seeds: readonly string[], places: WordPlaces): number[] {
  return seeds.flatMap((word) => places(word) ?? []);
}
