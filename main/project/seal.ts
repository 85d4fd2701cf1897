/** One act of erasing, as its seal tells it. */
export interface SealAct {
  /** The number of its seal; the content of an earlier seal is in the newest one. */
  readonly sequence: number;
  readonly because: string;
  /** ISO 8601 in UTC. */
  readonly at: string;
  readonly by: string;
  /** Numbers of the records that lost their content, ascending. */
  readonly removed: readonly number[];
}

/**
 * The body of a seal. An edit whose content was removed folds as what stands in `instead` for it; one
 * that is not there folds as nothing. The newest seal tells of all before it, so that what an earlier
 * one had left of a record can be erased as well.
 */
export interface SealBody {
  readonly acts: readonly SealAct[];
  readonly instead: Readonly<Record<string, unknown>>;
}

export const noSeal: SealBody = { acts: [], instead: {} };

export interface Erasing {
  readonly because: string;
  readonly at: string;
  readonly by: string;
  /** Records that lose their content. */
  readonly gone: Iterable<number>;
  /** What edits among them fold as from now on. */
  readonly instead: ReadonlyMap<number, unknown>;
}

/** What the next seal says. */
export function nextSeal(
  before: SealBody,
  sequence: number,
  { because, at, by, gone, instead }: Erasing,
): SealBody {
  const removed = [...new Set(gone)].sort((a, b) => a - b);
  const kept = new Map(Object.entries(before.instead));
  for (const number of removed) kept.delete(String(number));
  for (const [number, json] of instead) kept.set(String(number), json);
  return {
    acts: [...before.acts, { sequence, because, at, by, removed }],
    instead: Object.fromEntries(kept),
  };
}

/** Null where it is no seal that this version knows. */
export function readSeal(json: unknown): SealBody | null {
  const { acts, instead } = (json ?? {}) as Partial<SealBody>;
  if (!Array.isArray(acts) || typeof instead !== 'object' || instead === null) return null;
  return { acts: acts as SealAct[], instead };
}
