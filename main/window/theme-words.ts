import { topWords } from '../../engine/themes/index.ts';
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
  if (fitted === null) return [];
  const own = rows[column];
  if (own.length === 1) return topWords(fitted, own[0], count);
  const { vocabulary, surfaces } = fitted.words;
  const size = vocabulary.length;
  const all = own.reduce((sum, row) => sum + fitted.themeWords[row], 0);
  const mixed = new Float64Array(size);
  for (const row of own) {
    const weight = all > 0 ? fitted.themeWords[row] / all : 1 / own.length;
    for (let word = 0; word < size; word++) mixed[word] += weight * fitted.phi[row * size + word];
  }
  return [...mixed.keys()]
    .filter((word) => mixed[word] > 0)
    .sort((a, b) => mixed[b] - mixed[a] || a - b)
    .slice(0, count)
    .map((word) => ({
      word,
      form: vocabulary[word],
      surface: surfaces[word][0]?.form ?? vocabulary[word],
      probability: mixed[word],
    }));
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
