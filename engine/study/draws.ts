import { belongsTo, type Span } from '../spans/index.ts';
import type { Draw, Study } from './study.ts';

/** The study's cold sample; null where none was drawn. */
export function coldSampleOf({ draws }: Pick<Study, 'draws'>): Draw | null {
  for (const draw of draws.values()) if (draw.kind === 'cold sample') return draw;
  return null;
}

const kept = new WeakMap<Study['draws'], ReadonlyMap<string, readonly Span[]>>();

/**
 * Whether a stretch belongs to a cold sample that was not scored yet: no decision there enters a
 * prior, and nothing is suggested.
 */
export function isHeldBack(
  { draws }: Pick<Study, 'draws'>,
  transcript: string,
  span: Span,
): boolean {
  if (draws.size === 0) return false;
  const here = heldBack(draws).get(transcript);
  return here !== undefined && here.some((place) => belongsTo(span, place));
}

function heldBack(draws: Study['draws']): ReadonlyMap<string, readonly Span[]> {
  const known = kept.get(draws);
  if (known !== undefined) return known;
  const places = new Map<string, Span[]>();
  for (const draw of draws.values()) {
    if (draw.kind !== 'cold sample' || draw.scored !== null) continue;
    for (const { transcript, span } of draw.places) {
      const own = places.get(transcript);
      if (own === undefined) places.set(transcript, [span]);
      else own.push(span);
    }
  }
  kept.set(draws, places);
  return places;
}
