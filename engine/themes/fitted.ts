import type { Fit, ThemeId } from '../study/index.ts';
import type { Prepared } from '../text/index.ts';

/** A fit with the words it was made from, unpacked: what every view and report of it reads. */
export interface Fitted {
  readonly fit: Fit;
  readonly words: Prepared;
  /** Expected passage-theme proportions, D x K by rows, each row summing to 1. */
  readonly theta: Float32Array;
  /** Expected theme-word distributions, K x V by rows, each row summing to 1. */
  readonly phi: Float32Array;
  /** Expected counted words of each theme, K values. */
  readonly themeWords: Float64Array;
  /** Mean negative log likelihood a counted word, nats, D values. */
  readonly unexplained: Float32Array;
}

/** The row of a theme, or -1 where this fit has none for it. */
export function rowOf(fitted: Fitted, theme: ThemeId): number {
  return fitted.fit.themes.indexOf(theme);
}

/** A theme's strength in a passage: its expected share of the passage's counted words. */
export function strengthOf(fitted: Fitted, passage: number, row: number): number {
  return fitted.theta[passage * fitted.fit.themes.length + row];
}

/** A theme's expected share of all counted words, 0 to 1. */
export function shareOf(fitted: Fitted, row: number): number {
  let all = 0;
  for (const words of fitted.themeWords) all += words;
  return all === 0 ? 0 : fitted.themeWords[row] / all;
}

/** The row that leads a passage (the first of equals), or -1 where nothing was counted. */
export function leadingRow(fitted: Fitted, passage: number): number {
  if (fitted.words.passages[passage].countedWords === 0) return -1;
  const themes = fitted.fit.themes.length;
  let best = 0;
  for (let row = 1; row < themes; row++) {
    if (fitted.theta[passage * themes + row] > fitted.theta[passage * themes + best]) best = row;
  }
  return best;
}
