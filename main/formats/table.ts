import { CsvError, parse } from 'csv-parse/sync';
import { zipSync } from 'fflate';
import readSheets from 'read-excel-file/universal';
import { readParts, type Archive } from './archive.ts';
import { mostTextBytes, tooLarge } from './limits.ts';
import type { ReadRefusal, ReadTable, Sheet } from './read-file.ts';
import { hasDoctype } from './xml.ts';

type TableResult = { readonly ok: true; readonly value: ReadTable } | ReadRefusal;

const delimiters = [',', ';', '\t', '|'] as const;

export function hasTableName(fileName: string): boolean {
  return /\.(?:csv|tsv|tab)$/iu.test(fileName);
}

/**
 * Rows of comma-separated values (RFC 4180), also with semicolons, tabs or bars: the delimiter is the
 * one that divides most rows into the same number of cells. Rows that are too short are filled up;
 * cells beyond the headings get headings of their own. Null where nothing divides the lines: that is
 * no table.
 */
export function readCsv(text: string): TableResult | null {
  let best: { readonly rows: string[][]; readonly score: number } | null = null;
  let fault: string | null = null;
  for (const delimiter of delimiters) {
    if (!text.includes(delimiter)) continue;
    const rows = rowsOf(text, delimiter);
    if (typeof rows === 'string') {
      fault ??= rows;
      continue;
    }
    const score = regularity(rows);
    if (score > 0 && (best === null || score > best.score)) best = { rows, score };
  }
  if (best === null) {
    return fault === null ? null : { ok: false, code: 'broken file', format: 'csv', where: fault };
  }
  const sheet = sheetOf('', best.rows);
  if (sheet === null) return { ok: false, code: 'empty file' };
  return { ok: true, value: { format: 'csv', sheets: [sheet] } };
}

/** The rows, or where the quotes go wrong. */
function rowsOf(text: string, delimiter: string): string[][] | string {
  try {
    return parse(text, {
      bom: true,
      delimiter,
      relax_column_count: true,
      // A quote inside a cell without quotes is a character like any other.
      relax_quotes: true,
      skip_empty_lines: true,
    });
  } catch (error) {
    if (error instanceof CsvError) {
      const { lines } = error as CsvError & { lines?: number };
      return lines === undefined ? 'in its quotes' : `in the quotes up to line ${lines}`;
    }
    throw error;
  }
}

/** How many rows have as many cells as most have; none where that is one cell. */
function regularity(rows: readonly string[][]): number {
  const lengths = new Map<number, number>();
  for (const { length } of rows) lengths.set(length, (lengths.get(length) ?? 0) + 1);
  const [usual = 0, count = 0] = [...lengths].sort((a, b) => b[1] - a[1] || b[0] - a[0])[0] ?? [];
  return usual < 2 ? 0 : count / rows.length;
}

/** The sheets of a workbook as text: what its cells show, dates as ISO 8601, formulas as results. */
export async function readXlsx(archive: Archive): Promise<TableResult> {
  const broken: ReadRefusal = { ok: false, code: 'broken file', format: 'xlsx' };
  const parts = readParts(archive, isSheetPart, mostTextBytes);
  if (parts === 'too large') return tooLarge(null);
  if (parts === 'broken' || Object.values(parts).some(hasDoctype)) return broken;
  try {
    const bytes = zipSync(parts, { level: 0 });
    const found = await readSheets(bytes.buffer as ArrayBuffer, { trim: false });
    const sheets = found.flatMap(({ sheet, data }) => {
      const rows = data.map((row) => row.map(cellText));
      return sheetOf(sheet, rows) ?? [];
    });
    if (sheets.length === 0) return { ok: false, code: 'empty file' };
    return { ok: true, value: { format: 'xlsx', sheets } };
  } catch {
    return broken;
  }
}

/** No pictures, no programs, no links to other workbooks. */
function isSheetPart(name: string): boolean {
  return (
    /\.(?:xml|rels)$/u.test(name) &&
    (/^(?:\[Content_Types\]\.xml|_rels\/)/u.test(name) ||
      /^xl\/(?:workbook|sharedStrings|styles)\.xml$/u.test(name) ||
      /^xl\/_rels\//u.test(name) ||
      /^xl\/worksheets\/[^/]+$/u.test(name))
  );
}

function cellText(value: unknown): string {
  if (value === null || value === undefined) return '';
  if (value instanceof Date) {
    const iso = Number.isNaN(value.getTime()) ? '' : value.toISOString();
    return iso.endsWith('T00:00:00.000Z') ? iso.slice(0, 10) : iso.replace(/\.000Z$/u, 'Z');
  }
  return String(value as string | number | boolean).replace(/\r\n?/gu, '\n');
}

const mostColumns = 1_000;

/** Rows of one length under headings that are all different; null where no row holds anything. */
function sheetOf(name: string, rows: readonly (readonly string[])[]): Sheet | null {
  const filled = rows.filter((row) => row.some((cell) => cell.trim() !== ''));
  const width = Math.min(
    mostColumns,
    filled.reduce((most, row) => Math.max(most, lastFilled(row) + 1), 0),
  );
  const [head, ...body] = filled;
  if (head === undefined || width === 0) return null;
  const taken = new Set<string>();
  const headings = Array.from({ length: width }, (_, index) => {
    const given = (head[index] ?? '').replace(/\s+/gu, ' ').trim() || `Column ${index + 1}`;
    let heading = given;
    for (let count = 2; taken.has(heading); count++) heading = `${given} (${count})`;
    taken.add(heading);
    return heading;
  });
  return {
    name,
    rows: [
      headings,
      ...body.map((row) => Array.from({ length: width }, (_, index) => row[index] ?? '')),
    ],
  };
}

function lastFilled(row: readonly string[]): number {
  for (let index = row.length - 1; index >= 0; index--) {
    if (row[index]!.trim() !== '') return index;
  }
  return -1;
}
