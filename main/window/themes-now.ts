import { resolveTheme, type Study } from '../../engine/study/index.ts';
import type { Fitted } from '../../engine/themes/index.ts';

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
}

export function themesNow(study: Study, fitted: Fitted | null): ThemesNow {
  const resolved = (fitted?.fit.themes ?? []).map((id) => resolveTheme(study, id));
  const there = new Set(resolved.map((theme) => theme?.id));
  const columns = [...study.themes.keys()].filter((id) => there.has(id));
  const columnOf = new Map(columns.map((id, column) => [id, column]));
  const columnOfRow = Int32Array.from(resolved, (theme) =>
    theme === undefined ? -1 : (columnOf.get(theme.id) ?? -1),
  );
  return {
    columns,
    columnOf,
    columnOfRow,
    offered: Uint8Array.from(columns, (id) => (study.themes.get(id)?.setAside === true ? 0 : 1)),
    rows: columns.map((_, column) =>
      [...columnOfRow].flatMap((each, row) => (each === column ? [row] : [])),
    ),
    fitted,
  };
}

/** All of a study that its columns depend on, as one value to compare. */
export function columnsKey({ themes }: Study): string {
  return JSON.stringify(
    [...themes.values()].map(({ id, mergedInto, setAside }) => [id, mergedInto, setAside]),
  );
}

/** A passage's strength in one column, or null where the fit counted nothing in it. */
export function strengthOf(
  { fitted, columnOfRow, rows }: ThemesNow,
  row: number,
  column: number,
): number | null {
  if (fitted === null || row < 0 || fitted.words.passages[row].countedWords === 0) return null;
  let strength = 0;
  for (const each of rows[column]) strength += fitted.theta[row * columnOfRow.length + each];
  return strength;
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
