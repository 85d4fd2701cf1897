import { compareCodeUnits } from '../../engine/numbers/index.ts';
import { resolveTheme, visibleThemes, type Study } from '../../engine/study/index.ts';
import {
  passagesLed,
  rowOf,
  shareOf,
  topWords,
  type Fitted,
  type ThemeWord,
} from '../../engine/themes/index.ts';
import type { Desk } from '../desk.ts';
import { csv, type CsvOptions } from './csv.ts';
import { decimals, yesNo } from './format.ts';
import { toSixDecimals } from './proportions.ts';
import { themeName } from './theme-name.ts';

/** How many words a theme is shown with. */
export const wordsShown = 15;

export interface ThemeRow {
  readonly id: string;
  readonly name: string;
  /** Expected share of all counted words; null for a theme without words in this fit. */
  readonly share: number | null;
  /** Passages that it leads; for a theme by hand, passages that carry its codings. */
  readonly passages: number;
  readonly words: readonly ThemeWord[];
  readonly seeds: readonly string[];
  readonly shutOut: readonly string[];
  readonly pinned: boolean;
}

/** The themes that a person sees, largest share first; those by hand at the end. */
export function themeRows(desk: Desk): ThemeRow[] {
  const { study } = desk;
  const fitted = desk.fitted(study.fit);
  const led = fitted === null ? [] : passagesLed(fitted);
  return visibleThemes(study)
    .map((theme): ThemeRow => {
      const row = fitted === null ? -1 : rowOf(fitted, theme.id);
      return {
        id: theme.id,
        name: themeName(theme, fitted),
        share: themeShare(study, fitted, theme.id),
        passages:
          theme.origin === 'by hand'
            ? codingsOf(study, theme.id)
            : rowsOf(study, fitted, theme.id).reduce((sum, each) => sum + led[each], 0),
        words: fitted === null || row < 0 ? [] : topWords(fitted, row, wordsShown),
        seeds: theme.seeds,
        shutOut: theme.shutOut,
        pinned: theme.pinned,
      };
    })
    .sort((a, b) => (b.share ?? -1) - (a.share ?? -1) || compareCodeUnits(a.id, b.id));
}

/**
 * The share of a theme and of what was merged into it since the fit, to six decimals; null where it
 * has no row.
 */
export function themeShare(study: Study, fitted: Fitted | null, theme: string): number | null {
  if (fitted === null) return null;
  const rows = rowsOf(study, fitted, theme);
  return rows.length === 0
    ? null
    : toSixDecimals(rows.reduce((sum, row) => sum + shareOf(fitted, row), 0));
}

function rowsOf(study: Study, fitted: Fitted | null, theme: string): number[] {
  return (fitted?.fit.themes ?? []).flatMap((id, row) =>
    resolveTheme(study, id)?.id === theme ? [row] : [],
  );
}

function codingsOf(study: Study, theme: string): number {
  let found = 0;
  for (const codings of study.codings.values()) {
    for (const coding of codings.values()) {
      if (coding.standing !== 'rejected' && resolveTheme(study, coding.theme)?.id === theme) {
        found++;
      }
    }
  }
  return found;
}

/** themes.csv; of a stored study with the head of its chain in a last column. */
export function themesCsv(desk: Desk, options: CsvOptions, chain: string | null = null): string {
  const head = ['theme_id', 'theme', 'share', 'passages', 'words', 'seeds', 'shut_out', 'pinned'];
  return csv(
    [
      chain === null ? head : [...head, 'study_head'],
      ...themeRows(desk).map((row) => [
        row.id,
        row.name,
        decimals(row.share),
        row.passages,
        row.words.map(({ surface }) => surface).join(' '),
        row.seeds.join(' '),
        row.shutOut.join(' '),
        yesNo(row.pinned),
        ...(chain === null ? [] : [chain]),
      ]),
    ],
    options,
  );
}
