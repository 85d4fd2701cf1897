import type { Edit, EditKind, EditOf } from '../edit.ts';
import type { Result } from '../refusal.ts';
import type { Study } from '../study.ts';

/** What one kind of edit does and what takes it back. */
export interface Rule<Kind extends EditKind> {
  /**
   * `restoring` is true for an entry that takes another one back. What it brings stood in the study
   * before, so rules about what may be made anew (no coding on a merged theme) do not apply to it;
   * else such an edit could never be undone.
   */
  readonly apply: (study: Study, edit: EditOf<Kind>, restoring: boolean) => Result<Study>;
  /** Whether nothing before such an edit can be taken back any more. */
  readonly closes?: true;
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

/** A copy of a map with one entry put in at a position counted from 0; null stands for the end. */
export function withEntryAt<Key, Value>(
  map: ReadonlyMap<Key, Value>,
  place: number | null,
  key: Key,
  value: Value,
): ReadonlyMap<Key, Value> {
  const entries = [...map];
  entries.splice(place ?? entries.length, 0, [key, value]);
  return new Map(entries);
}

/**
 * A copy of a map of maps with one of them replaced; an empty one goes altogether, so that taking
 * back a first decision leaves nothing behind.
 */
export function withInner<Key, InnerKey, Value>(
  map: ReadonlyMap<Key, ReadonlyMap<InnerKey, Value>>,
  key: Key,
  inner: ReadonlyMap<InnerKey, Value>,
): ReadonlyMap<Key, ReadonlyMap<InnerKey, Value>> {
  return inner.size === 0 ? withoutEntry(map, key) : withEntry(map, key, inner);
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
