import { exp } from '../numbers/index.ts';

export interface HeldOutWords {
  /** Log likelihood of all scored words together, nats. */
  readonly total: number;
  readonly words: number;
}

/** exp(-mean log likelihood of a scored word); 1 where no word was scored. */
export function perplexityOf(scores: readonly HeldOutWords[]): {
  readonly perplexity: number;
  readonly scoredWords: number;
} {
  let total = 0;
  let words = 0;
  for (const score of scores) {
    total += score.total;
    words += score.words;
  }
  return { perplexity: words === 0 ? 1 : exp(-total / words), scoredWords: words };
}
