import type { Span } from '../../engine/spans/index.ts';
import type { Refused } from '../api.ts';
import { refuse } from './answers.ts';
import type { OpenStudy } from './open-study.ts';

/**
 * What a person marked, as it can be coded: without white space at its edges, with every character
 * whole, in the words of one participant. A passage may be marked over others' short turns, which
 * lie inside it.
 */
export function selectionIn(
  open: OpenStudy,
  transcript: string,
  marked: Span,
): { readonly span: Span } | Refused {
  const known = open.study.transcripts.get(transcript);
  if (known === undefined) {
    return open.refusal({ ok: false, code: 'unknown transcript', subject: transcript });
  }
  const text = open.desk.text(transcript);
  const { start, end } = marked;
  if (!(Number.isInteger(start) && Number.isInteger(end) && start >= 0 && end <= text.length)) {
    return open.refusal({ ok: false, code: 'outside the text', subject: known.name });
  }
  const span = trimmed(text, { start: wholeFrom(text, start), end: wholeTo(text, end) });
  if (span.start >= span.end) return refuse('nothing selected');

  const roles = new Map(known.speakers.map(({ label, role }) => [label, role]));
  const turns = known.turns.filter((turn) => turn.start < span.end && span.start < turn.end);
  const speaks = turns.some(
    ({ speaker }) => (roles.get(speaker) ?? 'participant') === 'participant',
  );
  if (!speaks) return refuse('no participant speaks');
  if (new Set(turns.map(({ speaker }) => speaker)).size > 1) {
    const inside = open.now
      .passagesIn(transcript)
      .some(
        (passage) =>
          passage.start <= span.start &&
          span.end <= passage.end &&
          passage.segments.some((part) => part.start < span.end && span.start < part.end),
      );
    if (!inside) return refuse('several speakers');
  }
  return { span };
}

function trimmed(text: string, { start, end }: Span): Span {
  const part = text.slice(start, end);
  const from = start + (part.length - part.trimStart().length);
  return { start: from, end: Math.max(from, end - (part.length - part.trimEnd().length)) };
}

const characters = new Intl.Segmenter(undefined, { granularity: 'grapheme' });
// No character is longer, and a line's beginning is always the beginning of one.
const longest = 200;

/** The beginning of the character (with its marks and joiners, UAX 29) that an offset stands in. */
function wholeFrom(text: string, offset: number): number {
  return characterAt(text, offset)?.start ?? offset;
}

function wholeTo(text: string, offset: number): number {
  const character = characterAt(text, offset);
  return character === null || character.start === offset ? offset : character.end;
}

function characterAt(text: string, offset: number): Span | null {
  if (offset <= 0 || offset >= text.length) return null;
  const line = text.lastIndexOf('\n', offset - 1) + 1;
  let from = Math.max(line, offset - longest);
  // Not in the middle of a surrogate pair.
  if (/[\uDC00-\uDFFF]/.test(text[from]) && from > line) from--;
  const near = text.slice(from, offset + longest);
  const found = characters.segment(near).containing(offset - from);
  if (found === undefined) return null;
  const start = from + found.index;
  return { start, end: start + found.segment.length };
}
