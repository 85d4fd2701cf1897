import { rowOf, type Fitted } from './fitted.ts';

export interface ThemeWord {
  /** Index in the vocabulary. */
  readonly word: number;
  readonly form: string;
  /** The commonest way it is written in the transcripts. */
  readonly surface: string;
  /** Its probability in the theme, 0 to 1. */
  readonly probability: number;
}

/** The `count` most probable words of a row, ties in vocabulary order; never one at zero. */
export function topWords(fitted: Fitted, row: number, count: number): ThemeWord[] {
  const { vocabulary, surfaces } = fitted.words;
  const size = vocabulary.length;
  const probability = (word: number): number => fitted.phi[row * size + word];
  const best: number[] = [];
  for (let word = 0; word < size; word++) {
    if (probability(word) <= 0) continue;
    if (best.length === count && probability(word) <= probability(best[count - 1])) continue;
    let place = best.length;
    while (place > 0 && probability(best[place - 1]) < probability(word)) place--;
    best.splice(place, 0, word);
    if (best.length > count) best.pop();
  }
  return best.map((word) => ({
    word,
    form: vocabulary[word],
    surface: surfaces[word][0]?.form ?? vocabulary[word],
    probability: probability(word),
  }));
}

/** What a candidate is called until a person names it: its three first words. */
export function candidateWords(fitted: Fitted, theme: string): string[] {
  const row = rowOf(fitted, theme);
  return row < 0 ? [] : topWords(fitted, row, 3).map(({ surface }) => surface);
}
