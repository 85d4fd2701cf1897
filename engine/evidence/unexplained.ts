/** A passage and how badly the themes predict its words. */
export interface Unexplained {
  readonly passage: number;
  /** Mean negative log likelihood a counted word, nats. */
  readonly surprise: number;
}

/**
 * Passages that the themes predict worst, worst first. `surprise` and `words` have a value a
 * passage; one with fewer counted words than `countedWords` is passed over: its mean is chance.
 */
export function unexplainedPassages(
  surprise: ArrayLike<number>,
  words: ArrayLike<number>,
  countedWords: number,
  count: number,
): Unexplained[] {
  return Array.from({ length: surprise.length }, (_, passage) => ({
    passage,
    surprise: surprise[passage],
  }))
    .filter(({ passage }) => words[passage] >= Math.max(1, countedWords))
    .sort((a, b) => b.surprise - a.surprise || a.passage - b.passage)
    .slice(0, count);
}
