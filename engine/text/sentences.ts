import type { Span } from '../spans/index.ts';

/** Before a name or a number, never at the end of a sentence. */
const titles = new Set(
  `dr mr mrs ms mx prof rev hon capt lt sgt cpl fr st mt messrs mme mlle mm dra sra srta dott sig
  hr hrn frl e.g i.e z.b d.h u.a o.ä p.ej vgl cf vs bzw ca approx evtl ggf nr núm`.split(/\s+/),
);

/** Shortened words that may end a sentence: they do where a capital follows. */
const shortened = new Set(
  `etc usw inc ltd co jr sr p.m a.m dept est ext fig vol pp ave rd blvd bros`.split(/\s+/),
);

const opening = /^[\s"'“‘«‹„([{¿¡–—-]*/u;
const closing = String.raw`["'”’»›)\]}]*`;
const ending = new RegExp(
  String.raw`(?:(?<![.!?…])([.!?…]+)${closing}(?=\s|$))|(?:[。！？]+${closing})|(?:\n[^\S\n]*\n)`,
  'gu',
);

/**
 * The sentences of a stretch, trimmed, in order; they hold everything in it that is not white
 * space. Frozen rules: a sentence ends with . ! ? or an ellipsis and closing quotes before white
 * space, or with an empty line; not after a title, an initial, an acronym or a shortened word that
 * the sentence goes on behind, and not at an ellipsis or a quoted question followed by small letters.
 * A single line break ends nothing: many transcripts are wrapped.
 */
export function sentencesOf(text: string, span: Span): Span[] {
  const part = text.slice(span.start, span.end);
  const sentences: Span[] = [];
  let from = 0;
  const close = (to: number): void => {
    const sentence = trimmed(part, from, to);
    if (sentence.start < sentence.end) {
      sentences.push({ start: span.start + sentence.start, end: span.start + sentence.end });
    }
    from = to;
  };
  ending.lastIndex = 0;
  for (let match = ending.exec(part); match !== null; match = ending.exec(part)) {
    const end = match.index + match[0].length;
    if (match[1] === undefined || endsSentence(part, match.index, match[1], end)) close(end);
  }
  close(part.length);
  return sentences;
}

function endsSentence(part: string, at: number, marks: string, end: number): boolean {
  const after = part.slice(end, end + 40);
  if (/^[^\S\n]*\n[^\S\n]*\n/.test(after)) return true;
  const next = after.replace(opening, '').charAt(0);
  const goesOn = /\p{Ll}/u.test(next);
  if (marks.includes('!') || marks.includes('?')) return !(goesOn && end > at + marks.length);
  if (marks !== '.') return !goesOn;
  const word = /[\p{L}\p{N}.]+$/u.exec(part.slice(Math.max(0, at - 24), at))?.[0] ?? '';
  const small = word.toLowerCase();
  if (titles.has(small)) return false;
  if (shortened.has(small)) return /\p{Lu}/u.test(next);
  if (small === 'no') return !/\p{N}/u.test(next);
  if (/^(?:\p{L}\.)+\p{L}$/u.test(word)) return !goesOn && /^[\p{Ll}.]+$/u.test(word);
  // An initial ("J. Falk"), but "so did I." ends.
  return !(/^\p{Lu}$/u.test(word) && word !== 'I');
}

/** The stretch from `start` to `end` without white space at its edges. */
export function trimmed(text: string, start: number, end: number): Span {
  let from = start;
  let to = end;
  while (from < to && isSpace(text.charCodeAt(from))) from++;
  while (to > from && isSpace(text.charCodeAt(to - 1))) to--;
  return { start: from, end: to };
}

function isSpace(code: number): boolean {
  return (
    code === 0x20 ||
    (code >= 0x09 && code <= 0x0d) ||
    code === 0x85 ||
    code === 0xa0 ||
    code === 0x1680 ||
    (code >= 0x2000 && code <= 0x200b) ||
    code === 0x2028 ||
    code === 0x2029 ||
    code === 0x202f ||
    code === 0x205f ||
    code === 0x3000 ||
    code === 0xfeff
  );
}
