import type { Detail, Turn } from '../../engine/spans/index.ts';
import { labelledLines } from '../../engine/text/index.ts';

/** One caption: what was said between two times. */
export interface Cue {
  /** The line above its times: a number in SRT, anything in VTT; '' where there is none. */
  readonly id: string;
  /** Milliseconds. */
  readonly startTime: number;
  readonly endTime: number;
  readonly lines: readonly CueLine[];
}

/** A line of a caption without its tags. */
export interface CueLine {
  /** From a voice tag; null where there is none. */
  readonly speaker: string | null;
  readonly text: string;
}

/** One speaker's words in one cue. */
interface Piece {
  readonly speaker: string | null;
  readonly text: string;
  readonly startTime: number;
  readonly endTime: number;
  /** Follows a dash: somebody else speaks than in the line before. */
  readonly newVoice: boolean;
}

const pauseMilliseconds = 3_000;
const longParagraph = 600;
const longestParagraph = 2_400;

/**
 * The canonical text of captions: a paragraph a turn, "Name: words" where the speaker is known, else
 * the words alone; an empty line between turns. A turn is what one speaker says in cues that follow
 * each other; its span holds the words without the name. Speakers come from voice tags or from
 * "Name:" in the captions, and last until the next. Without any, a turn ends at a pause of three
 * seconds or, once it is long, at the end of a sentence.
 */
export function layOutCues(cues: readonly Cue[], details: readonly Detail[]): LaidOut {
  let text = '';
  const turns: Turn[] = [];
  for (const pieces of joinPieces(piecesOf(withoutRepeats(cues)))) {
    const { speaker, startTime } = pieces[0]!;
    if (text !== '') text += '\n\n';
    if (speaker !== null) text += `${speaker}: `;
    const start = text.length;
    text += pieces.map((piece) => piece.text).join(' ');
    const endTime = pieces[pieces.length - 1]!.endTime;
    turns.push({ start, end: text.length, speaker, startTime, endTime });
  }
  return { text, details, turns };
}

const rollingShare = 0.3;

/**
 * Rolling captions show the last lines of one cue again at the head of the next. Where many cues do,
 * what is shown again is dropped; somebody who says "Yes" twice elsewhere still said it twice.
 */
function withoutRepeats(cues: readonly Cue[]): readonly Cue[] {
  const shown = cues.map(({ lines }) => lines.filter(({ text }) => tidy(text) !== ''));
  const repeats = shown.map((lines, index) => {
    const before = index === 0 ? [] : shown[index - 1]!;
    for (let count = Math.min(lines.length, before.length); count > 0; count--) {
      const tail = before.slice(-count);
      if (tail.every(({ text }, at) => tidy(text) === tidy(lines[at]!.text))) return count;
    }
    return 0;
  });
  const repeating = repeats.filter((count) => count > 0).length;
  if (cues.length < 4 || repeating < rollingShare * cues.length) return cues;
  return cues.map((cue, index) => ({ ...cue, lines: shown[index]!.slice(repeats[index]) }));
}

export interface LaidOut {
  readonly text: string;
  readonly details: readonly Detail[];
  readonly turns: readonly Turn[];
}

function joinPieces(pieces: readonly Piece[]): Piece[][] {
  const turns: Piece[][] = [];
  for (const piece of pieces) {
    const turn = turns[turns.length - 1];
    const last = turn?.[turn.length - 1];
    if (turn !== undefined && last !== undefined && goesOn(turn, last, piece)) turn.push(piece);
    else turns.push([piece]);
  }
  return turns;
}

function goesOn(turn: readonly Piece[], last: Piece, next: Piece): boolean {
  if (next.newVoice || next.speaker !== last.speaker) return false;
  if (next.speaker !== null) return true;
  if (next.startTime - last.endTime >= pauseMilliseconds) return false;
  const length = turn.reduce((total, piece) => total + piece.text.length, 0);
  if (length > longestParagraph) return false;
  return length < longParagraph || !/[.?!…]["”’)\]]*$/u.test(last.text);
}

function piecesOf(cues: readonly Cue[]): Piece[] {
  const voiced = cues.some((cue) => cue.lines.some((line) => line.speaker !== null));
  return voiced ? voicedPieces(cues) : labelledPieces(cues);
}

function voicedPieces(cues: readonly Cue[]): Piece[] {
  return cues.flatMap((cue) => {
    const pieces: Piece[] = [];
    for (const { speaker, text } of cue.lines) {
      const said = tidy(text);
      if (said === '') continue;
      const last = pieces[pieces.length - 1];
      if (last !== undefined && last.speaker === speaker) {
        pieces[pieces.length - 1] = { ...last, text: `${last.text} ${said}` };
      } else {
        pieces.push(pieceOf(cue, speaker, said, false));
      }
    }
    return pieces;
  });
}

/**
 * Speakers from what the captions say, by the rules for plain transcripts over all of them, so that
 * "She said: no" starts no turn here either. A label holds until the next; a dash among several in
 * one cue is somebody else, without a name.
 */
function labelledPieces(cues: readonly Cue[]): Piece[] {
  const spoken = cues.map((cue) =>
    cue.lines.map((line) => tidy(line.text)).filter((line) => line !== ''),
  );
  const labels = labelledLines(spoken.flatMap((lines) => [...lines, '']));
  const pieces: Piece[] = [];
  let speaker: string | null = null;
  let at = 0;
  spoken.forEach((lines, number) => {
    const dialogue = lines.filter((line) => dash.test(line)).length > 1;
    lines.forEach((line, index) => {
      const label = labels[at++] ?? null;
      const dashed = dialogue && dash.test(line);
      if (label !== null) speaker = label.label;
      else if (dashed) speaker = null;
      const text = label === null ? line.replace(dashed ? dash : '', '') : line.slice(label.speech);
      if (text.trim() === '') return;
      const last = pieces[pieces.length - 1];
      if (
        last !== undefined &&
        index > 0 &&
        label === null &&
        !dashed &&
        last.speaker === speaker
      ) {
        pieces[pieces.length - 1] = { ...last, text: `${last.text} ${text.trim()}` };
      } else {
        pieces.push(pieceOf(cues[number]!, speaker, text.trim(), dashed));
      }
    });
    at++;
  });
  return pieces;
}

const dash = /^[-–—]\s*(?=\S)/u;

function pieceOf(cue: Cue, speaker: string | null, text: string, newVoice: boolean): Piece {
  return { speaker, text, startTime: cue.startTime, endTime: cue.endTime, newVoice };
}

function tidy(text: string): string {
  return text.replace(/[\s\u00a0]+/gu, ' ').trim();
}
