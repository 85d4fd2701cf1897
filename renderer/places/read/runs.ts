import type { CodingView, Span } from '../../../main/api.ts';

/** A coded stretch inside a passage, as it is drawn and numbered. */
export interface Stretch {
  readonly coding: CodingView;
  readonly number: number;
  /** How far below the words its line runs: 0 is nearest. */
  readonly level: number;
  /** Which of the patterns its line has. */
  readonly pattern: number;
}

/** Text that is drawn in one way. */
export interface Run {
  readonly start: number;
  readonly text: string;
  readonly carries: boolean;
  readonly lines: readonly { readonly level: number; readonly pattern: number }[];
  /** Numbers of the stretches that end here. */
  readonly notes: string;
}

export const levels = 3;
export const patterns = 4;

/**
 * The codings of a passage that cover less than all of it, numbered in reading order. Overlapping
 * ones run below each other; a fourth at one place shares the lowest line, told apart by number.
 */
export function stretchesOf(passage: Span, codings: readonly CodingView[]): Stretch[] {
  const parts = codings
    .filter(({ span }) => span.start > passage.start || span.end < passage.end)
    .sort((a, b) => a.span.start - b.span.start || b.span.end - a.span.end);
  const ends: number[] = [];
  return parts.map((coding, index) => {
    let level = ends.findIndex((end) => end <= coding.span.start);
    if (level < 0) level = Math.min(ends.length, levels - 1);
    ends[level] = Math.max(ends[level] ?? 0, coding.span.end);
    return { coding, number: index + 1, level, pattern: index % patterns };
  });
}

/** One piece of text cut wherever something begins or ends; joined, the runs are the text. */
export function runsOf(
  text: string,
  piece: Span,
  carriedBy: readonly Span[],
  stretches: readonly Stretch[],
): Run[] {
  const spans = [...carriedBy, ...stretches.map(({ coding }) => coding.span)];
  const cuts = new Set([piece.start, piece.end]);
  for (const { start, end } of spans) {
    for (const cut of [start, end]) if (cut > piece.start && cut < piece.end) cuts.add(cut);
  }
  const places = [...cuts].sort((a, b) => a - b);
  return places.slice(0, -1).map((start, index) => {
    const end = places[index + 1]!;
    const covers = (span: Span): boolean => span.start < end && span.end > start;
    const here = stretches.filter(({ coding }) => covers(coding.span));
    return {
      start,
      text: text.slice(start, end),
      carries: carriedBy.some(covers),
      lines: here.map(({ level, pattern }) => ({ level, pattern })),
      notes: here
        .filter(({ coding }) => coding.span.end === end)
        .map(({ number }) => number)
        .join(' '),
    };
  });
}
