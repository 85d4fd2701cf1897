import type { SeedConcern } from '../../engine/themes/index.ts';

/** What may go wrong with a seed word; null where nothing speaks against it. */
export function seedCaution(word: string, concern: SeedConcern | null): string | null {
  if (concern === null) {
    return `“${word}” is not among the counted words, so it pulls nothing; check its spelling, or the lists of words in Gather.`;
  }
  if (concern.wouldSwallow) {
    return `“${word}” is said ${concern.occurrences} times, which would be ${Math.round(100 * concern.part)} % of the theme’s words: the theme would become that word’s. Seed a rarer one.`;
  }
  if (concern.isSpread) {
    return `“${word}” is spread over ${concern.themes} themes, so it marks none of them well and draws passages of every sort. Seed a more telling one.`;
  }
  return null;
}
