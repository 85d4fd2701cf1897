import { resolveTheme, type Study, type Theme } from '../../engine/study/index.ts';
import type { Fitted } from '../../engine/themes/index.ts';
import { themeName } from '../reports/theme-name.ts';

/** The themes of the fit on screen as they stand now: merges followed, in codebook order. */
export interface ThemesNow {
  /** Ids of the columns. A column adds up the fit's rows that were merged into one theme. */
  readonly columns: readonly string[];
  readonly columnOf: ReadonlyMap<string, number>;
  /** For each row of the fit its column, or -1 where its theme is no more. */
  readonly columnOfRow: Int32Array;
  /** 1 where a column's theme can be suggested: it is not set aside. */
  readonly offered: Uint8Array;
  /** Rows of the fit in each column. */
  readonly rows: readonly (readonly number[])[];
  readonly fitted: Fitted | null;
  /** What a theme is called on screen. */
  readonly label: (id: string) => string;
}

export function themesNow(study: Study, fitted: Fitted | null): ThemesNow {
  const resolved = (fitted?.fit.themes ?? []).map((id) => resolveTheme(study, id));
  const there = new Set(resolved.map((theme) => theme?.id));
  const columns = [...study.themes.keys()].filter((id) => there.has(id));
  const columnOf = new Map(columns.map((id, column) => [id, column]));
  const columnOfRow = Int32Array.from(resolved, (theme) =>
    theme === undefined ? -1 : (columnOf.get(theme.id) ?? -1),
  );
  const labels = new Map<string, string>();
  return {
    columns,
    columnOf,
    columnOfRow,
    offered: Uint8Array.from(columns, (id) => (study.themes.get(id)?.setAside === true ? 0 : 1)),
    rows: columns.map((_, column) =>
      [...columnOfRow].flatMap((each, row) => (each === column ? [row] : [])),
    ),
    fitted,
    label: (id) => {
      const theme = resolveTheme(study, id);
      if (theme === undefined) return 'a theme that is no more';
      const known = labels.get(theme.id) ?? themeLabel(theme, fitted);
      labels.set(theme.id, known);
      return known;
    },
  };
}

function themeLabel(theme: Theme, fitted: Fitted | null): string {
  return themeName(theme, fitted);
}

/** A passage's strength in each column, or null where the fit counted nothing in it. */
export function strengthsOf(
  { fitted, columns, columnOfRow }: ThemesNow,
  row: number,
): Float64Array | null {
  if (fitted === null || row < 0 || fitted.words.passages[row].countedWords === 0) return null;
  const strengths = new Float64Array(columns.length);
  const from = row * columnOfRow.length;
  for (let each = 0; each < columnOfRow.length; each++) {
    if (columnOfRow[each] >= 0) strengths[columnOfRow[each]] += fitted.theta[from + each];
  }
  return strengths;
}
