import { belongsTo } from '../../engine/spans/index.ts';
import type { Coding, CodingId, None, NoneId } from '../../engine/study/index.ts';
import type { Placed } from './passages-now.ts';

/** What people decided about one passage. */
export interface DecidedPassage {
  /** In the order of their places. */
  readonly codings: readonly Coding[];
  readonly nones: readonly None[];
}

/** The decisions of one transcript, by passage and by coding. */
export interface DecidedTranscript {
  /** One for each passage, in their order. */
  readonly passages: readonly DecidedPassage[];
  /** The passage that a coding shares most with, as an index; absent where it belongs to none. */
  readonly home: ReadonlyMap<CodingId, number>;
  readonly unread: number;
}

const undecided: DecidedPassage = { codings: [], nones: [] };

export function isDecided({ codings, nones }: DecidedPassage): boolean {
  return codings.length > 0 || nones.length > 0;
}

export function decidedIn(
  placed: readonly Placed[],
  codings: ReadonlyMap<CodingId, Coding> | undefined,
  nones: ReadonlyMap<NoneId, None> | undefined,
): DecidedTranscript {
  const found = new Map<number, { codings: Coding[]; nones: None[] }>();
  const at = (index: number) => {
    const known = found.get(index) ?? { codings: [], nones: [] };
    found.set(index, known);
    return known;
  };
  const home = new Map<CodingId, number>();
  for (const coding of codings?.values() ?? []) {
    let most = 0;
    for (const [index, shared] of passagesOfSpan(placed, coding.span)) {
      at(index).codings.push(coding);
      if (shared > most) home.set(coding.id, index);
      most = Math.max(most, shared);
    }
  }
  for (const none of nones?.values() ?? []) {
    for (const [index] of passagesOfSpan(placed, none.span)) at(index).nones.push(none);
  }
  for (const each of found.values()) {
    each.codings.sort((a, b) => a.span.start - b.span.start || a.span.end - b.span.end);
  }
  return {
    passages: placed.map((_, index) => found.get(index) ?? undecided),
    home,
    unread: placed.length - found.size,
  };
}

/** The passages that a span belongs to, and how many code units it shares with each. */
export function passagesOfSpan(
  placed: readonly Placed[],
  span: { readonly start: number; readonly end: number },
): [index: number, shared: number][] {
  const found: [number, number][] = [];
  for (const [index, passage] of placed.entries()) {
    if (passage.start >= span.end) break;
    if (!belongsTo(span, passage)) continue;
    found.push([index, Math.min(span.end, passage.end) - Math.max(span.start, passage.start)]);
  }
  return found;
}
