import type { Fitted } from './fitted.ts';

/** What may go wrong with a seed word, by the fit on screen. */
export interface SeedConcern {
  readonly occurrences: number;
  /** Its occurrences over how many equal themes it would be spread: 1 / sum of squared parts. */
  readonly spread: number;
  /** Themes that a tenth or more of its occurrences belong to. */
  readonly themes: number;
  /** Its part of the theme's counted words once its occurrences are drawn there, 0 to 1. */
  readonly part: number;
  readonly isSpread: boolean;
  readonly wouldSwallow: boolean;
}

export interface SeedLimits {
  readonly spread: number;
  readonly part: number;
}

/**
 * Our own limits, no source: from three even themes on, a word marks none of them; and a theme of
 * which a quarter is one word is that word's theme.
 */
export const seedLimits: SeedLimits = { spread: 3, part: 0.25 };

/**
 * Looks at a word before it is made a seed. `rows` are the rows of the theme in question; none for a
 * theme that the fit does not have, which is taken to become as large as the others are on average.
 * Null where the word is not among the counted ones.
 */
export function seedConcern(
  fitted: Fitted,
  word: number,
  rows: readonly number[],
  limits: SeedLimits = seedLimits,
): SeedConcern | null {
  const { vocabulary, counts } = fitted.words;
  if (word < 0 || word >= vocabulary.length) return null;
  let occurrences = 0;
  for (let i = 0; i < counts.indices.length; i++) {
    if (counts.indices[i] === word) occurrences += counts.counts[i];
  }
  const size = vocabulary.length;
  const expected = fitted.themeWords.map((words, row) => words * fitted.phi[row * size + word]);
  const all = expected.reduce((sum, each) => sum + each, 0);
  const parts = expected.map((each) => (all > 0 ? each / all : 0));
  const squares = parts.reduce((sum, part) => sum + part * part, 0);
  const spread = squares > 0 ? 1 / squares : 0;
  const own = rows.reduce((sum, row) => sum + fitted.themeWords[row], 0);
  const words =
    rows.length > 0
      ? own
      : fitted.themeWords.reduce((sum, each) => sum + each, 0) / fitted.themeWords.length;
  const there = rows.reduce((sum, row) => sum + parts[row], 0) * occurrences;
  const after = words + occurrences - there;
  const part = after > 0 ? occurrences / after : 0;
  return {
    occurrences,
    spread,
    themes: parts.filter((each) => each >= 0.1).length,
    part,
    isSpread: spread >= limits.spread,
    wouldSwallow: part >= limits.part,
  };
}
