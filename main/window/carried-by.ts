import type { Span } from '../api.ts';
import type { ThemesNow } from './themes-now.ts';

// Above one half a word is more this theme's than everybody else's together.
const leastResponsibility = 0.5;
const mostWords = 8;

/**
 * The counted words of a passage that carry a theme there: those for which the theme answers for more
 * than half, p(theme | word, passage) being phi_k(w) theta_k over its sum over all themes. Strongest
 * first, at most eight.
 */
export function carriedBy(
  { fitted, rows, columnOfRow }: ThemesNow,
  row: number,
  column: number,
): Span[] {
  if (fitted === null || row < 0) return [];
  const { phi, theta, words } = fitted;
  const { offsets, words: triples } = words.occurrences;
  const themes = columnOfRow.length;
  const size = words.vocabulary.length;
  const carrying: { start: number; end: number; part: number }[] = [];
  for (let at = offsets[row]; at < offsets[row + 1]; at++) {
    const word = triples[3 * at + 2];
    let all = 0;
    for (let k = 0; k < themes; k++) all += phi[k * size + word] * theta[row * themes + k];
    let own = 0;
    for (const k of rows[column]) own += phi[k * size + word] * theta[row * themes + k];
    const part = all > 0 ? own / all : 0;
    if (part > leastResponsibility) {
      carrying.push({ start: triples[3 * at], end: triples[3 * at + 1], part });
    }
  }
  return carrying
    .sort((a, b) => b.part - a.part || a.start - b.start)
    .slice(0, mostWords)
    .map(({ start, end }) => ({ start, end }));
}
