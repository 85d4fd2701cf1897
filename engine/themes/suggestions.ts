import { belongsTo } from '../spans/index.ts';
import { isHeldBack, resolveTheme, type Study, type ThemeId } from '../study/index.ts';
import { leadingRow, strengthOf, type Fitted } from './fitted.ts';
import { proportionsWithoutDecisions, themeAlphaOf } from './without-decisions.ts';

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
 * where this theme was already confirmed, rejected or coded by hand there, nor in a cold sample that
 * was not scored yet. Where a theme was rejected its share of the words has to go somewhere: another
 * one is suggested there only if it would have been without that decision.
 */
export function suggestions(study: Study, fitted: Fitted, limits: SuggestionLimits): Suggestion[] {
  const rows = fitted.fit.themes.map((id) => resolveTheme(study, id));
  const found: Suggestion[] = [];
  let themeAlpha: readonly number[] | null = null;
  fitted.words.passages.forEach((passage, index) => {
    if (passage.countedWords < Math.max(1, limits.countedWords)) return;
    const nones = study.nones.get(passage.transcript);
    if (nones !== undefined) {
      for (const none of nones.values()) if (belongsTo(none.span, passage)) return;
    }
    if (isHeldBack(study, passage.transcript, passage)) return;
    const byTheme = (shareOf: (row: number) => number): Map<ThemeId, number> => {
      const strengths = new Map<ThemeId, number>();
      rows.forEach((theme, row) => {
        if (theme === undefined || theme.setAside) return;
        strengths.set(theme.id, (strengths.get(theme.id) ?? 0) + shareOf(row));
      });
      return strengths;
    };
    const { decided, rejects } = decidedThemes(study, passage);
    let alone: Map<ThemeId, number> | null = null;
    if (rejects) {
      themeAlpha ??= themeAlphaOf(study, fitted);
      const shares = proportionsWithoutDecisions(fitted, index, themeAlpha);
      alone = byTheme((row) => shares[row]);
    }
    for (const [theme, strength] of byTheme((row) => strengthOf(fitted, index, row))) {
      if (decided.has(theme) || strength < limits.strength) continue;
      if (alone !== null && (alone.get(theme) ?? 0) < limits.strength) continue;
      found.push({ passage: index, theme, strength });
    }
  });
  return found;
}

function decidedThemes(
  study: Study,
  passage: { readonly transcript: string; readonly start: number; readonly end: number },
): { readonly decided: ReadonlySet<ThemeId>; readonly rejects: boolean } {
  const decided = new Set<ThemeId>();
  let rejects = false;
  for (const coding of study.codings.get(passage.transcript)?.values() ?? []) {
    const theme = resolveTheme(study, coding.theme);
    if (theme === undefined || !belongsTo(coding.span, passage)) continue;
    decided.add(theme.id);
    rejects ||= coding.standing === 'rejected';
  }
  return { decided, rejects };
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
