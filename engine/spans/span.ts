/**
 * A stretch of a canonical text: UTF-16 code units, `end` exclusive, 0 <= start <= end <= length.
 */
export interface Span {
  readonly start: number;
  readonly end: number;
}

export function sameSpan(a: Span, b: Span): boolean {
  return a.start === b.start && a.end === b.end;
}

/** How many code units two spans share; 0 where they only touch. */
export function overlap(a: Span, b: Span): number {
  return Math.max(0, Math.min(a.end, b.end) - Math.max(a.start, b.start));
}

/**
 * The rule by which a coding belongs to a derived passage: they share half or more of the shorter
 * of the two, so that a phrase belongs to the passage around it and a long coding to each passage
 * that it covers.
 */
export function belongsTo(coding: Span, passage: Span): boolean {
  const shorter = Math.min(coding.end - coding.start, passage.end - passage.start);
  return shorter > 0 && overlap(coding, passage) * 2 >= shorter;
}
