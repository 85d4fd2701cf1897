import type { Edit, EditKind, EditOf } from '../edit.ts';
import type { Result } from '../refusal.ts';
import type { Study } from '../study.ts';

/** What one kind of edit does and what takes it back. */
export interface Rule<Kind extends EditKind> {
  readonly apply: (study: Study, edit: EditOf<Kind>, sequence: number) => Result<Study>;
  /** The edit that restores what was there before, or null for what cannot be taken back. */
  readonly inverse: (edit: EditOf<Kind>) => Edit | null;
}

export type Rules<Kind extends EditKind> = { readonly [K in Kind]: Rule<K> };

/** A copy of a map with one entry put in or replaced; order is kept. */
export function withEntry<Key, Value>(
  map: ReadonlyMap<Key, Value>,
  key: Key,
  value: Value,
): ReadonlyMap<Key, Value> {
  return new Map(map).set(key, value);
}

/** A copy of a map without one entry. */
export function withoutEntry<Key, Value>(
  map: ReadonlyMap<Key, Value>,
  key: Key,
): ReadonlyMap<Key, Value> {
  const copy = new Map(map);
  copy.delete(key);
  return copy;
}

/** Whether two plain JSON values are the same, whatever the order of their keys. */
export function sameJson(a: unknown, b: unknown): boolean {
  if (a === b) return true;
  if (typeof a !== 'object' || typeof b !== 'object' || a === null || b === null) return false;
  if (Array.isArray(a) !== Array.isArray(b)) return false;
  const keys = Object.keys(a);
  return (
    keys.length === Object.keys(b).length &&
    keys.every(
      (key) =>
        Object.hasOwn(b, key) &&
        sameJson((a as Record<string, unknown>)[key], (b as Record<string, unknown>)[key]),
    )
  );
}
