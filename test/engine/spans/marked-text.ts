import fc from 'fast-check';
import type { Replacement, Side, Span } from '../../../engine/spans/index.ts';

/** A replacement with the words that it puts in. */
export interface Rewording extends Replacement {
  readonly words: string;
}

/** One code unit of a text and the stretch of the old text that it comes from. */
export interface Mark {
  readonly unit: string;
  readonly from: Span;
}

/** The new text, unit by unit. A unit that was kept comes from itself alone. */
export function reworded(text: string, rewordings: readonly Rewording[]): Mark[] {
  const marks: Mark[] = [];
  let at = 0;
  const keepUpTo = (end: number) => {
    for (; at < end; at++) marks.push({ unit: text[at]!, from: { start: at, end: at + 1 } });
  };
  for (const { start, end, words } of rewordings) {
    keepUpTo(start);
    for (let i = 0; i < words.length; i++) marks.push({ unit: words[i]!, from: { start, end } });
    at = end;
  }
  keepUpTo(text.length);
  return marks;
}

/** Where an offset stands: after every unit that comes from what lies before it. */
export function offsetAmong(marks: readonly Mark[], offset: number, side: Side): number {
  return marks.filter(({ from: { start, end } }) => {
    const astride = start < offset && offset < end;
    const putInHere = start === end && start === offset;
    return astride || putInHere ? side === 'after' : end <= offset;
  }).length;
}

/** The units that a span holds afterwards, or null where none of its words is left. */
export function spanAmong(marks: readonly Mark[], span: Span): Span | null {
  const held = marks.flatMap(({ from: { start, end } }, index) => {
    const putIn = start === end;
    const inside = putIn
      ? span.start < start && start < span.end
      : Math.max(start, span.start) < Math.min(end, span.end);
    return inside ? [index] : [];
  });
  return held.length === 0 ? null : { start: held[0]!, end: held.at(-1)! + 1 };
}

const words = fc.string({ unit: fc.constantFrom('a', 'b', ' ', '\u{1F33F}'), maxLength: 4 });

/** A text and rewordings of it, in order and apart, neighbours and insertions at one place included. */
export const rewordedTexts = fc
  .tuple(
    fc.string({ unit: fc.constantFrom('x', 'y', 'z', '\n', '\u{1F30A}'), maxLength: 14 }),
    fc.array(fc.tuple(fc.nat(3), fc.nat(4), words), { maxLength: 5 }),
  )
  .map(([text, steps]) => {
    const rewordings: Rewording[] = [];
    let at = 0;
    for (const [gap, removed, put] of steps) {
      const start = Math.min(text.length, at + gap);
      const end = Math.min(text.length, start + removed);
      rewordings.push({ start, end, inserted: put.length, words: put });
      at = end;
    }
    return { text, rewordings };
  });
