import { stringify } from 'csv-stringify/sync';

export type Cell = string | number | null;

export interface CsvOptions {
  /**
   * Put an apostrophe before cells that a spreadsheet would run as a formula (OWASP, "CSV
   * Injection"). On unless the file is meant for a program.
   */
  readonly guard: boolean;
}

/**
 * Rows as RFC 4180 text: comma, CRLF, quotes only where needed, no byte order mark. Empty for null;
 * numbers as given (format them before).
 */
export function csv(rows: readonly (readonly Cell[])[], { guard }: CsvOptions): string {
  return stringify(
    rows.map((row) => row.map((cell) => asText(cell, guard))),
    { record_delimiter: '\r\n', quoted_match: /[\r\n]/u },
  );
}

function asText(cell: Cell, guard: boolean): string {
  if (cell === null) return '';
  if (typeof cell === 'number') return String(cell);
  return guard && startsLikeFormula(cell) ? `'${cell}` : cell;
}

/** Includes the full-width signs that some spreadsheets read as the plain ones. */
function startsLikeFormula(cell: string): boolean {
  return /^[=+\-@\t\r\n\uFF0B\uFF0D\uFF1D\uFF20]/u.test(cell);
}
