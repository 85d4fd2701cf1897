import { log } from '../numbers/index.ts';

/**
 * The term score of each word in each theme: p log(p / g), where p is the word's probability in the
 * theme and g the geometric mean of its probabilities over all themes (Blei & Lafferty 2009, Topic
 * models, equation 3). Words that every theme uses alike score about 0 however probable they are.
 *
 * `distributions` holds themes x words by rows, each row summing to 1; so does the result, in nats.
 * A word at exactly 0 in a theme is shut out of it: it scores 0 there, and that theme says nothing
 * about how common the word is in the others.
 */
export function termScores(distributions: ArrayLike<number>, words: number): Float64Array {
  const themes = words === 0 ? 0 : distributions.length / words;
  const scores = new Float64Array(distributions.length);
  const logs = new Float64Array(themes);
  for (let word = 0; word < words; word++) {
    let sum = 0;
    let used = 0;
    for (let theme = 0; theme < themes; theme++) {
      const probability = distributions[theme * words + word];
      if (probability <= 0) continue;
      logs[theme] = log(probability);
      sum += logs[theme];
      used++;
    }
    if (used === 0) continue;
    const mean = sum / used;
    for (let theme = 0; theme < themes; theme++) {
      const probability = distributions[theme * words + word];
      if (probability > 0) scores[theme * words + word] = probability * (logs[theme] - mean);
    }
  }
  return scores;
}
