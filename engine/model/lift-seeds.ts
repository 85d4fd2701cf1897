import { wordTotals } from './check-counts.ts';
import type { DensePriors } from './dense-priors.ts';
import type { Counts } from './types.ts';

/** A theme's seeds are lifted into its first so many words … */
const among = 12;
/** … where they occur this often at least: rarer ones say too little to stand for a theme. */
const fromCount = 5;

/**
 * Gives each seed at least as much prior as brings it among its theme's first words, in place, and
 * lets each row sum to 1 again.
 *
 * The prior that a seed has during the sweeps is small, since a large one shrinks its theme and
 * starves the theme's other words; a rare seed, though drawn to its theme nearly whole, would then
 * stay below common words. What is missing is added once the themes are found (README.md has the
 * figures of both ways). Pinned rows stay as they are.
 */
export function liftSeeds(phi: Float32Array, counts: Counts, priors: DensePriors): void {
  const totals = wordTotals(counts);
  const seedsOf = new Map<number, number[]>();
  for (const { theme, word } of priors.seeds) {
    if (priors.pinned[theme] || totals[word] < fromCount) continue;
    const list = seedsOf.get(theme) ?? [];
    if (!list.includes(word)) list.push(word);
    seedsOf.set(theme, list);
  }
  for (const [theme, seeds] of seedsOf) {
    const row = phi.subarray(theme * counts.words, (theme + 1) * counts.words);
    const others = row
      .filter((_, w) => !seeds.includes(w))
      .sort()
      .reverse();
    if (others.length === 0) continue;
    const above = others[Math.min(others.length - 1, Math.max(0, among - seeds.length))];
    // Clear of the word that it passes, in f32 too, and of two seeds' exchange by rounding.
    const least = above * 1.01;
    let total = 0;
    for (const word of seeds) if (row[word] < least) row[word] = least;
    for (let w = 0; w < row.length; w++) total += row[w];
    for (let w = 0; w < row.length; w++) row[w] /= total;
  }
}
