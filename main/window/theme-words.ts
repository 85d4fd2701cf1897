import { termScores, topWords, type Fitted } from '../../engine/themes/index.ts';
import { countedForm } from '../../engine/text/index.ts';
import type { StudyNow } from './study-now.ts';
import type { ThemesNow } from './themes-now.ts';

/** A word of a theme by its place in the vocabulary. */
export interface WordOfTheme {
  readonly word: number;
  readonly form: string;
  readonly surface: string;
  readonly probability: number;
}

/**
 * The most probable words of a column. Where several rows were merged, their distributions count by
 * the words expected of each.
 */
export function wordsOfColumn(
  { fitted, rows }: ThemesNow,
  column: number,
  count: number,
): WordOfTheme[] {
  return fitted === null ? [] : mixedWords({ fitted }, rows[column], count);
}

/** The most probable words of several rows of a fit together. */
export function mixedWords(
  { fitted }: Pick<ThemesNow, 'fitted'>,
  own: readonly number[],
  count: number,
): WordOfTheme[] {
  if (fitted === null || own.length === 0) return [];
  if (own.length === 1) return topWords(fitted, own[0], count);
  const mixed = mixtureOf(fitted, own);
  return first(mixed, count).map((word) => wordOf(fitted, word, mixed[word]));
}

const scores = new WeakMap<ThemesNow, Float64Array>();

/** Term scores of every column, columns x vocabulary by rows. */
export function termScoresOf(themes: ThemesNow): Float64Array {
  const { fitted, rows } = themes;
  if (fitted === null) return new Float64Array(0);
  const known = scores.get(themes);
  if (known !== undefined) return known;
  const size = fitted.words.vocabulary.length;
  const distributions = new Float64Array(rows.length * size);
  rows.forEach((own, column) => distributions.set(mixtureOf(fitted, own), column * size));
  const scored = termScores(distributions, size);
  scores.set(themes, scored);
  return scored;
}

/** The first words of a column by term score. */
export function tellingWordsOfColumn(
  themes: ThemesNow,
  column: number,
  count: number,
): WordOfTheme[] {
  const { fitted, rows } = themes;
  if (fitted === null) return [];
  const size = fitted.words.vocabulary.length;
  const mixed = mixtureOf(fitted, rows[column]);
  const own = termScoresOf(themes).subarray(column * size, (column + 1) * size);
  return first(own, count).map((word) => wordOf(fitted, word, mixed[word]));
}

/** Indices of the largest values above 0, ties in order. */
function first(values: Float64Array, count: number): number[] {
  return [...values.keys()]
    .filter((word) => values[word] > 0)
    .sort((a, b) => values[b] - values[a] || a - b)
    .slice(0, count);
}

function wordOf({ words }: Fitted, word: number, probability: number): WordOfTheme {
  const form = words.vocabulary[word];
  return { word, form, surface: words.surfaces[word][0]?.form ?? form, probability };
}

/** The word distribution of rows together, each by the words expected of it. */
function mixtureOf(fitted: Fitted, own: readonly number[]): Float64Array {
  const size = fitted.words.vocabulary.length;
  const all = own.reduce((sum, row) => sum + fitted.themeWords[row], 0);
  const mixed = new Float64Array(size);
  for (const row of own) {
    const weight = all > 0 ? fitted.themeWords[row] / all : 1 / own.length;
    for (let word = 0; word < size; word++) mixed[word] += weight * fitted.phi[row * size + word];
  }
  return mixed;
}

/**
 * The form that a typed word is counted under. A form of the vocabulary stands for itself, since a
 * stem need not be its own stem; null for what is no single word.
 */
export function formFor({ fitted, settings }: StudyNow, word: string): string | null {
  if (fitted !== null && placeOf(fitted.words.vocabulary, word) >= 0) return word;
  return countedForm(word, settings.text);
}

const places = new WeakMap<readonly string[], ReadonlyMap<string, number>>();

/** A form's place in a vocabulary, or -1. */
export function placeOf(vocabulary: readonly string[], form: string): number {
  let known = places.get(vocabulary);
  if (known === undefined) {
    known = new Map(vocabulary.map((each, place) => [each, place]));
    places.set(vocabulary, known);
  }
  return known.get(form) ?? -1;
}
