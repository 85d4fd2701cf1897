import type { Entry } from '../engine/study/index.ts';

/**
 * Brings a decision as it was stored under one version of the trail to the next. A decision says its
 * version in `version`; where it says none it is of the first. An edit's shape is for ever: a new
 * version is only for what cannot be said by a new kind of edit or a field that may be absent.
 */
export interface Upcaster {
  /** The version that it brings decisions to; they come one after the other, from 2 on. */
  readonly to: number;
  /** Why, as one would say it: "a coding names its reader". */
  readonly intent: string;
  /** Pure; what it does not mean to change comes back as it was. */
  readonly bring: (stored: Readonly<Record<string, unknown>>) => Readonly<Record<string, unknown>>;
}

/** Version 1 is the first, so there is nothing yet to be brought anywhere. */
export const upcasters: readonly Upcaster[] = [];

export type Upcast =
  | { readonly ok: true; readonly entry: Omit<Entry, 'sequence'> }
  /** It was written by a later version of the app. */
  | { readonly ok: false; readonly code: 'newer version' };

/** A stored decision as this version of the app knows it. */
export function upcast(json: unknown, steps: readonly Upcaster[] = upcasters): Upcast {
  const { version = 1, ...stored } = json as Readonly<Record<string, unknown>>;
  const newest = steps.at(-1)?.to ?? 1;
  if (typeof version !== 'number' || version > newest) return { ok: false, code: 'newer version' };
  let entry: Readonly<Record<string, unknown>> = stored;
  for (const { to, bring } of steps) if (to > version) entry = bring(entry);
  // What a decision must be is found out by applying it.
  return { ok: true, entry: entry as unknown as Omit<Entry, 'sequence'> };
}
