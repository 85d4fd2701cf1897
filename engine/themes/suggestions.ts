import { belongsTo } from '../spans/index.ts';
import { resolveTheme, type Study, type ThemeId } from '../study/index.ts';
import { leadingRow, strengthOf, type Fitted } from './fitted.ts';

/** A theme that the model offers for a passage, for a person to look at. */
export interface Suggestion {
  /** Index of the passage in the fit's words. */
  readonly passage: number;
  readonly theme: ThemeId;
  readonly strength: number;
}

export interface SuggestionLimits {
  /** Least strength, 0 to 1. */
  readonly strength: number;
  /** A passage with fewer counted words is never suggested for. */
  readonly countedWords: number;
}

/**
 * Suggestions that still wait for a person: not where the passage was read and nothing applies, nor
 * where this theme was already confirmed, rejected or coded by hand there.
 */
export function suggestions(study: Study, fitted: Fitted, limits: SuggestionLimits): Suggestion[] {
  const rows = fitted.fit.themes.map((id) => resolveTheme(study, id));
  const found: Suggestion[] = [];
  fitted.words.passages.forEach((passage, index) => {
    if (passage.countedWords < Math.max(1, limits.countedWords)) return;
    const nones = study.nones.get(passage.transcript);
    if (nones !== undefined) {
      for (const none of nones.values()) if (belongsTo(none.span, passage)) return;
    }
    const strengths = new Map<ThemeId, number>();
    rows.forEach((theme, row) => {
      if (theme === undefined || theme.setAside) return;
      const strength = strengthOf(fitted, index, row);
      strengths.set(theme.id, (strengths.get(theme.id) ?? 0) + strength);
    });
    const decided = decidedThemes(study, passage);
    for (const [theme, strength] of strengths) {
      if (strength >= limits.strength && !decided.has(theme)) {
        found.push({ passage: index, theme, strength });
      }
    }
  });
  return found;
}

function decidedThemes(
  study: Study,
  passage: { readonly transcript: string; readonly start: number; readonly end: number },
): ReadonlySet<ThemeId> {
  const decided = new Set<ThemeId>();
  for (const coding of study.codings.get(passage.transcript)?.values() ?? []) {
    const theme = resolveTheme(study, coding.theme);
    if (theme !== undefined && belongsTo(coding.span, passage)) decided.add(theme.id);
  }
  return decided;
}

/** How many passages each row leads. */
export function passagesLed(fitted: Fitted): number[] {
  const led = fitted.fit.themes.map(() => 0);
  for (let passage = 0; passage < fitted.words.passages.length; passage++) {
    const row = leadingRow(fitted, passage);
    if (row >= 0) led[row]++;
  }
  return led;
}
