import { rowAt, rowOfPassage, type Row } from './rows.ts';

/** What the reading column shows, one below the other. */
export type Item =
  | { readonly kind: 'row'; readonly key: string; readonly row: Row; readonly quiet: boolean }
  | { readonly kind: 'left out'; readonly key: string; readonly count: number }
  | { readonly kind: 'head' | 'tail'; readonly key: string };

const item = (row: Row, quiet: boolean): Item => ({ kind: 'row', key: row.key, row, quiet });

/** A whole transcript, its details above. */
export function itemsOf(rows: readonly Row[]): Item[] {
  return [
    { kind: 'head', key: 'head' },
    ...rows.map((row) => item(row, false)),
    { kind: 'tail', key: 'tail' },
  ];
}

const neighbours = 2;

/** One passage, the question before it and its neighbours in a quieter voice. */
export function itemsAround(
  rows: readonly Row[],
  passage: number,
  question: number | null,
): Item[] {
  const first = rowOfPassage(rows, passage);
  if (first < 0) return [];
  const last = rows.findLastIndex((row) => row.passage === passage);
  const from = Math.max(0, first - neighbours);
  const to = Math.min(rows.length - 1, last + neighbours);
  const items = rows
    .slice(from, to + 1)
    .map((row) => item(row, row.passage !== passage && row.passage >= 0));
  const asked = question === null ? -1 : rowAt(rows, question);
  if (asked < 0 || asked >= from) return items;
  const between = from - asked - 1;
  return [
    item(rows[asked]!, false),
    ...(between > 0 ? [{ kind: 'left out', key: 'left out', count: between } as const] : []),
    ...items,
  ];
}
