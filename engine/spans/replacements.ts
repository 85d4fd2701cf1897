import type { Span } from './span.ts';

/** One replaced stretch of a text: `start` to `end` in the old text becomes `inserted` code units. */
export interface Replacement extends Span {
  readonly inserted: number;
}

/** Which neighbour an offset stays with when text is put in exactly where it stands. */
export type Side = 'before' | 'after';

/**
 * Where an offset of the old text stands in the new one. Replacements are in order and do not
 * overlap. An offset inside a replaced stretch moves to the stretch's new start ('before') or new
 * end ('after'); so does one at a pure insertion.
 */
export function mapOffset(
  offset: number,
  replacements: readonly Replacement[],
  side: Side,
): number {
  let shift = 0;
  for (const { start, end, inserted } of replacements) {
    if (offset < start) break;
    const insertion = start === end;
    if (offset === start && (!insertion || side === 'before')) break;
    if (offset >= end) {
      shift += inserted - (end - start);
      continue;
    }
    return start + shift + (side === 'after' ? inserted : 0);
  }
  return offset + shift;
}

/**
 * A span after its text changed. Its start clings to what follows and its end to what comes before,
 * so that words put in at either edge stay outside, and a replaced word at an edge stays inside
 * whole. A span whose words were all removed becomes empty, and an empty one stays empty.
 */
export function mapSpan<S extends Span>(span: S, replacements: readonly Replacement[]): S {
  const start = mapStart(span.start, replacements);
  const end = span.start === span.end ? start : mapEnd(span.end, replacements);
  return { ...span, start, end };
}

function mapStart(offset: number, replacements: readonly Replacement[]): number {
  const inside = replacements.some((r) => r.start < offset && offset < r.end);
  return mapOffset(offset, replacements, inside ? 'before' : 'after');
}

function mapEnd(offset: number, replacements: readonly Replacement[]): number {
  const inside = replacements.some((r) => r.start < offset && offset < r.end);
  return mapOffset(offset, replacements, inside ? 'after' : 'before');
}

/** The replacements that lead from the new text back to the old one. */
export function invertReplacements(replacements: readonly Replacement[]): Replacement[] {
  let shift = 0;
  return replacements.map(({ start, end, inserted }) => {
    const back = { start: start + shift, end: start + shift + inserted, inserted: end - start };
    shift += inserted - (end - start);
    return back;
  });
}
