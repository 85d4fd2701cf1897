import type { Span, Turn } from '../spans/index.ts';
import { sentencesOf } from './sentences.ts';
import type { TextSettings } from './settings.ts';
import { roleOf, speakerKey, type TranscriptText } from './transcript.ts';
import { createWordScanner, type WordScanner } from './words.ts';

/** A stretch of one participant's talk that is read, coded and modelled as one. */
export interface Passage extends Span {
  /** Counts the passages of the transcript from 1, in the order in which they start. */
  readonly number: number;
  readonly speaker: string | null;
  /**
   * What the participant said in it, in order. Between two segments stand labels, times and others'
   * short turns ("mm-hm"), which lie inside the span and are not modelled.
   */
  readonly segments: readonly Span[];
  /** The last interviewer turn of more than a few words before it. */
  readonly questionBefore: Span | null;
  /** Milliseconds: when the turn that it begins in started; null where the source gives no time. */
  readonly startTime: number | null;
  /** Words and numbers said in it, before anything is left out. */
  readonly words: number;
}

/** A sentence or, in a very long sentence, a piece of one: what passages are put together from. */
interface Unit {
  readonly start: number;
  readonly end: number;
  readonly words: number;
  readonly turn: Turn;
  /** What it costs to end a passage behind it, on the scale of `pieceCost`. */
  readonly cut: number;
}

/** One participant's turns, as units, up to the next longer turn by somebody else. */
interface Stretch {
  readonly speaker: string | null;
  readonly question: Span | null;
  readonly units: Unit[];
}

// Against a squared distance from the aim, in words: a turn's end is the best place, a sentence's
// end next; inside a sentence only where it alone is longer than a passage.
const cutAtTurn = 0;
const cutAtSentence = 60;
const cutAtClause = 2_500;
const cutAtWord = 10_000;
const overLength = 15;

/**
 * The passages of a transcript. Everything that participants say lies in exactly one passage's
 * segments; interviewer and other turns make none. A stretch that is no longer than the maximum
 * stays whole; a longer one is divided where the pieces come closest to the middle of the two
 * limits, at sentence ends, so that none is left over.
 */
export function passagesOf(
  transcript: TranscriptText,
  settings: TextSettings,
  scan: WordScanner = createWordScanner(settings.language),
): Passage[] {
  const drafts: Omit<Passage, 'number'>[] = [];
  for (const stretch of stretchesOf(transcript, settings, scan)) {
    for (const units of divide(stretch.units, settings)) {
      const segments = segmentsOf(units);
      drafts.push({
        start: segments[0]!.start,
        end: segments[segments.length - 1]!.end,
        speaker: stretch.speaker,
        segments,
        questionBefore: stretch.question,
        startTime: units[0]!.turn.startTime,
        words: wordsIn(units),
      });
    }
  }
  drafts.sort((a, b) => a.start - b.start || a.end - b.end);
  return drafts.map((draft, index) => ({ number: index + 1, ...draft }));
}

function stretchesOf(
  transcript: TranscriptText,
  settings: TextSettings,
  scan: WordScanner,
): Stretch[] {
  const open = new Map<string, Stretch>();
  const stretches: Stretch[] = [];
  let question: Span | null = null;
  for (const turn of transcript.turns) {
    const role = roleOf(transcript, turn.speaker);
    const key = speakerKey(turn.speaker);
    const units = unitsOf(transcript.text, turn, settings, scan);
    const long = wordsIn(units) > settings.shortTurnWords;
    if (long) {
      for (const other of [...open.keys()]) {
        if (other !== key) open.delete(other);
      }
    }
    if (role === 'interviewer' && long) question = { start: turn.start, end: turn.end };
    if (role !== 'participant') continue;
    let stretch = open.get(key);
    if (stretch === undefined) {
      stretch = { speaker: turn.speaker, question, units: [] };
      open.set(key, stretch);
      stretches.push(stretch);
    }
    stretch.units.push(...units);
  }
  return stretches;
}

function countWords(text: string, span: Span, scan: WordScanner): number {
  let count = 0;
  scan(text, span, () => count++);
  return count;
}

function wordsIn(units: readonly { readonly words: number }[]): number {
  return units.reduce((total, unit) => total + unit.words, 0);
}

function unitsOf(text: string, turn: Turn, settings: TextSettings, scan: WordScanner): Unit[] {
  const sentences = sentencesOf(text, turn);
  return sentences.flatMap((sentence, index) => {
    const words = countWords(text, sentence, scan);
    const cut = index + 1 === sentences.length ? cutAtTurn : cutAtSentence;
    return words > settings.passageMaximumWords
      ? piecesOf(text, sentence, turn, cut, scan)
      : [{ ...sentence, words, turn, cut }];
  });
}

const clauseEnd = /^[,;:–—-]|^\s[–—-]/;
const shortestPiece = 8;

/** A very long sentence in pieces of some words each, broken before words, rather after commas. */
function piecesOf(
  text: string,
  sentence: Span,
  turn: Turn,
  cut: number,
  scan: WordScanner,
): Unit[] {
  const words: Span[] = [];
  scan(text, sentence, (start, end) => words.push({ start, end }));
  const pieces: Unit[] = [];
  let from = 0;
  for (let next = 1; next <= words.length; next++) {
    const last = next === words.length;
    const clause = clauseEnd.test(text.slice(words[next - 1]!.end, words[next - 1]!.end + 2));
    if (!last && (next - from < shortestPiece || (!clause && next - from < 2 * shortestPiece))) {
      continue;
    }
    // Punctuation stays with the word before it; what opens a quotation goes with the word after.
    const start = pieces.length === 0 ? sentence.start : pieces[pieces.length - 1]!.end;
    const end = last ? sentence.end : endOfWord(text, words[next - 1]!.end, words[next]!.start);
    const at = start + (/^\s*/.exec(text.slice(start, end))?.[0].length ?? 0);
    pieces.push({
      start: at,
      end,
      words: next - from,
      turn,
      cut: last ? cut : clause ? cutAtClause : cutAtWord,
    });
    from = next;
  }
  return pieces;
}

function endOfWord(text: string, wordEnd: number, nextStart: number): number {
  const gap = text.slice(wordEnd, nextStart);
  const space = gap.search(/\s/);
  return space < 0 ? wordEnd + gap.length : wordEnd + space;
}

/** Units grouped into passages by dynamic programming over where each passage ends. */
function divide(units: readonly Unit[], settings: TextSettings): Unit[][] {
  const joined = withoutWordless(units);
  const total = wordsIn(joined);
  if (joined.length === 0) return [];
  if (total <= settings.passageMaximumWords) return [[...units]];
  const cost = [0];
  const begin = [0];
  for (let end = 1; end <= joined.length; end++) {
    let best = Infinity;
    let from = end - 1;
    let words = 0;
    for (let start = end - 1; start >= 0; start--) {
      words += joined[start]!.words;
      if (start < end - 1 && words > 2 * settings.passageMaximumWords) break;
      const candidate = cost[start]! + pieceCost(words, settings) + joined[end - 1]!.cut;
      if (candidate < best) {
        best = candidate;
        from = start;
      }
    }
    cost.push(best);
    begin.push(from);
  }
  const groups: Unit[][] = [];
  for (let end = joined.length; end > 0; end = begin[end]!) {
    groups.push(joined.slice(begin[end]!, end).flatMap((group) => group.units));
  }
  return groups.reverse();
}

function pieceCost(words: number, settings: TextSettings): number {
  const { passageMinimumWords: minimum, passageMaximumWords: maximum } = settings;
  const aim = (minimum + maximum) / 2;
  const over = Math.max(0, words - maximum);
  return (words - aim) * (words - aim) + over * overLength * (maximum - aim);
}

interface UnitGroup {
  readonly units: Unit[];
  readonly words: number;
  readonly cut: number;
}

/** Units without words ("[laughs]") go with what stands before them, or at first with what follows. */
function withoutWordless(units: readonly Unit[]): UnitGroup[] {
  const groups: { units: Unit[]; words: number; cut: number }[] = [];
  for (const unit of units) {
    const last = groups[groups.length - 1];
    if (last !== undefined && (unit.words === 0 || last.words === 0)) {
      last.units.push(unit);
      last.words += unit.words;
      last.cut = unit.cut;
    } else {
      groups.push({ units: [unit], words: unit.words, cut: unit.cut });
    }
  }
  return groups;
}

function segmentsOf(units: readonly Unit[]): Span[] {
  const segments: { start: number; end: number }[] = [];
  let turn: Turn | null = null;
  for (const unit of units) {
    if (unit.turn === turn) segments[segments.length - 1]!.end = unit.end;
    else segments.push({ start: unit.start, end: unit.end });
    turn = unit.turn;
  }
  return segments;
}
