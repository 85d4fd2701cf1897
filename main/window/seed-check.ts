import { seedConcern } from '../../engine/themes/index.ts';
import type { Api, Refused } from '../api.ts';
import { seedCaution } from '../sentences/seeds.ts';
import { give } from './answers.ts';
import type { OpenStudy } from './open-study.ts';
import { formFor, placeOf } from './theme-words.ts';

/** What may go wrong with seed words, by the fit on screen: a sentence each. */
export function seedCheck(
  open: OpenStudy,
  { theme, words }: Api['seedCheck']['takes'],
): { readonly value: readonly string[] } | Refused {
  if (theme !== null && !open.study.themes.has(theme)) {
    return open.refusal({ ok: false, code: 'unknown theme', subject: theme });
  }
  return give(seedCautions(open, theme, words));
}

export function seedCautions(
  open: OpenStudy,
  theme: string | null,
  words: readonly string[],
): readonly string[] {
  const { now } = open;
  const { fitted, themes } = now;
  if (fitted === null) return [];
  const column = theme === null ? undefined : themes.columnOf.get(theme);
  const rows = column === undefined ? [] : themes.rows[column];
  const seen = new Set<string>();
  return words.flatMap((word) => {
    const form = formFor(now, word.trim());
    if (form === null || seen.has(form)) return [];
    seen.add(form);
    const place = placeOf(fitted.words.vocabulary, form);
    const caution = seedCaution(word.trim(), place < 0 ? null : seedConcern(fitted, place, rows));
    return caution === null ? [] : [caution];
  });
}
