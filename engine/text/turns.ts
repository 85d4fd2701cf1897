import type { Detail, Turn } from '../spans/index.ts';
import {
  chooseLabels,
  findCandidates,
  timeAlone,
  timeInFront,
  type Candidate,
  type Line,
} from './labels.ts';
import { isHeading, isRoleCode, isRoleWord, isSpeechOpener } from './role-words.ts';
import { trimmed } from './sentences.ts';

/** What a plain transcript says, told apart from what it says about itself. */
export interface TurnsOfText {
  readonly details: readonly Detail[];
  /** In order; empty where the text holds no speech. */
  readonly turns: readonly Turn[];
}

/**
 * Details and turns of a canonical text. Labels may stand before a colon ("Name: …", with a time
 * before or behind the name, in Markdown bold, or alone on the line), before a time on their own
 * line ("Name  0:05"), or before a tab. Lines before the first turn are details. A text without
 * labels has a turn a paragraph, its speaker null.
 */
export function turnsFromText(text: string): TurnsOfText {
  const lines = linesOf(text);
  const chosen = chooseLabels(text, lines, findCandidates(text, lines));
  const talk = chosen.slice(headerLength(text, lines, chosen));
  if (talk.length === 0 || isMostlyBefore(text, lines, talk)) return unlabelled(text, lines);

  const turns: Turn[] = [];
  talk.forEach((candidate, index) => {
    const next = talk[index + 1];
    const end = next === undefined ? text.length : beginningOf(text, lines, next.line);
    const span = speechSpan(text, candidate.speech, end);
    if (span.start >= span.end) return;
    turns.push({
      ...span,
      speaker: candidate.label,
      startTime: candidate.startTime ?? timeBefore(text, lines, candidate.line),
      endTime: candidate.endTime,
    });
  });
  const first = talk[0]!.line - (timeBefore(text, lines, talk[0]!.line) === null ? 0 : 1);
  return { details: lines.slice(0, first).flatMap((line) => detailOf(text, line)), turns };
}

/** A line that a label begins. */
export interface LabelledLine {
  readonly label: string;
  /** Where the words behind the label begin; the end of the line where none follow. */
  readonly speech: number;
}

/**
 * Which of the lines begin with a speaker's label, decided over all of them by the same rules; null
 * for the others. Empty lines separate captions or paragraphs; there are no details among them.
 */
export function labelledLines(lines: readonly string[]): (LabelledLine | null)[] {
  const text = lines.join('\n');
  const found = linesOf(text);
  const labels = new Map(
    chooseLabels(text, found, findCandidates(text, found)).map((candidate) => [
      found[candidate.line]!.start,
      candidate,
    ]),
  );
  let start = 0;
  return lines.map((line) => {
    const at = start;
    start += line.length + 1;
    const candidate = labels.get(trimmed(text, at, at + line.length).start);
    if (candidate === undefined) return null;
    return {
      label: candidate.label,
      speech: speechSpan(text, candidate.speech, at + line.length).start - at,
    };
  });
}

/** The lines that hold anything but white space. */
function linesOf(text: string): Line[] {
  const lines: Line[] = [];
  let blankBefore = true;
  for (let start = 0; start <= text.length;) {
    const newline = text.indexOf('\n', start);
    const end = newline < 0 ? text.length : newline;
    const span = trimmed(text, start, end);
    if (span.start < span.end) lines.push({ ...span, blankBefore });
    blankBefore = span.start >= span.end;
    start = end + 1;
  }
  return lines;
}

/** A time that stands alone on the line before a label belongs to the label. */
function timeBefore(text: string, lines: readonly Line[], line: number): number | null {
  const before = lines[line - 1];
  return before === undefined ? null : timeAlone(text.slice(before.start, before.end));
}

function beginningOf(text: string, lines: readonly Line[], line: number): number {
  const timed = timeBefore(text, lines, line) !== null;
  return lines[timed ? line - 1 : line]!.start;
}

function speechSpan(text: string, start: number, end: number): { start: number; end: number } {
  const span = trimmed(text, start, end);
  // What is left of a bold label's closing mark.
  const mark = /^(?:\*\*|__)(?=\s)/.exec(text.slice(span.start, span.start + 3));
  return mark === null ? span : trimmed(text, span.start + mark[0].length, span.end);
}

const greeting =
  /^(?:hello|hi|hey|yes|yeah|no|okay|ok|sure|right|so|well|good|thanks|thank|welcome|ready|morning|please|hallo|ja|nein|guten|bonjour|oui|non|merci|hola|sí|gracias|ciao|grazie|hej|hei|oi|olá|goedemorgen)\b/iu;

/** What could be a name, a code or a list of them, and is no sentence. */
function isNameLike(value: string): boolean {
  if (value === '' || /[.?!…]["”']?$/u.test(value.replace(/\b(?:Dr|Jr|Sr|\p{Lu})\.$/u, ''))) {
    return false;
  }
  if (greeting.test(value)) return false;
  const words = value.split(/[\s,;/()]+/u).filter((word) => word !== '');
  return (
    words.length <= 8 &&
    words.every((word) =>
      /^(?:\p{Lu}|\p{Lo}|\d|and$|und$|et$|y$|&|d[eai]l?$|v[ao]n$|der$|la$)/u.test(word),
    )
  );
}

const mostRolesInBlock = 12;

/**
 * How many of the first chosen lines are headings after all ("Interviewer: Jane Doe" above the
 * talk): a role with a name behind it, among other headings or with more than one such line.
 */
function headerLength(text: string, lines: readonly Line[], chosen: readonly Candidate[]): number {
  const valueOf = (candidate: Candidate): string =>
    text.slice(candidate.speech, Math.max(candidate.speech, lines[candidate.line]!.end)).trim();
  const mayHead = (candidate: Candidate): boolean =>
    candidate.layout === 'colon' &&
    candidate.startTime === null &&
    (isRoleWord(candidate.label) || isRoleCode(candidate.label));

  // In one block with it, behind nothing but a few lines of its own kind.
  const headingFollows = (index: number): boolean => {
    for (let at = index; at < index + mostRolesInBlock; at++) {
      const next = chosen[at]!.line + 1;
      if (lines[next] === undefined || lines[next].blankBefore) return false;
      const following = chosen[at + 1];
      if (following?.line !== next) return headsBetween(text, lines, next, next + 1);
      if (!mayHead(following) || !isShort(valueOf(following))) return false;
    }
    return false;
  };

  let length = 0;
  let last = -1;
  while (length < chosen.length) {
    const candidate = chosen[length]!;
    const value = valueOf(candidate);
    const among = headsBetween(text, lines, last + 1, candidate.line);
    const closed = lines[candidate.line + 1]?.blankBefore ?? true;
    const headed =
      isNameLike(value) || (isShort(value) && ((among && closed) || headingFollows(length)));
    if (!mayHead(candidate) || !headed) break;
    last = candidate.line;
    length++;
  }
  if (length === 0) return 0;

  const heads = chosen.slice(0, length);
  const afterwards = chosen.slice(length);
  const hasHeadings = lines
    .slice(0, afterwards[0]?.line ?? last + 1)
    .some((_, index) => !heads.some((head) => head.line === index));
  if (hasHeadings) return length;
  // Nothing but roles with names: a header only where talk follows that shows it.
  const says = (candidate: Candidate): boolean => {
    const value = valueOf(candidate);
    return (
      /\d|\s/u.test(value) ||
      chosen.some((other) => other.label.toLowerCase() === value.toLowerCase())
    );
  };
  return afterwards.length > 0 && heads.every(says) ? length : 0;
}

function isShort(value: string): boolean {
  const sentence = /[.?!…]["”']?$/u.test(value);
  return value !== '' && !sentence && !greeting.test(value) && value.split(/\s+/u).length <= 10;
}

function headsBetween(text: string, lines: readonly Line[], from: number, to: number): boolean {
  return lines.slice(from, to).some((line) => {
    const colon = /^([^:\n]{1,48})[:：]\s/u.exec(text.slice(line.start, line.end));
    return colon !== null && isHeading(colon[1]!);
  });
}

/** Labels that begin late in a text, and few: more likely a colon in somebody's prose. */
function isMostlyBefore(text: string, lines: readonly Line[], talk: readonly Candidate[]): boolean {
  const start = lines[talk[0]!.line]!.start;
  return talk.length < 4 && start > text.length / 2 && start > 600;
}

const headingLine = /^[#>*\-\s]{0,12}([^:\n*]{1,48}?)\**\s?[:：]\**(?:\s+|$)/u;

function detailOf(text: string, line: Line): Detail[] {
  const whole = text.slice(line.start, line.end);
  if (!/[\p{L}\p{N}]/u.test(whole)) return [];
  const match = headingLine.exec(whole);
  if (match !== null && match[1]!.trim().split(/\s+/u).length <= 6 && !isSpeechOpener(match[1]!)) {
    const value = whole.slice(match[0].length).replace(/\*{1,3}$/, '');
    return [{ name: match[1]!.trim(), value: value.trim() }];
  }
  return [{ name: '', value: whole.replace(/^#{1,6}\s*/, '') }];
}

/** No labels: headings, then a turn a paragraph, with the time in front of it where there is one. */
function unlabelled(text: string, lines: readonly Line[]): TurnsOfText {
  let first = 0;
  while (first < lines.length && isHeadingLine(text, lines, first)) first++;
  const turns: Turn[] = [];
  for (const paragraph of paragraphsOf(text, lines.slice(first))) {
    const front = timeInFront(text.slice(paragraph.start, paragraph.end));
    const span = trimmed(text, paragraph.start + (front?.length ?? 0), paragraph.end);
    if (span.start < span.end) {
      turns.push({ ...span, speaker: null, startTime: front?.time ?? null, endTime: null });
    }
  }
  return { details: lines.slice(0, first).flatMap((line) => detailOf(text, line)), turns };
}

function isHeadingLine(text: string, lines: readonly Line[], index: number): boolean {
  const line = lines[index]!;
  const whole = text.slice(line.start, line.end);
  if (/^#{1,6}\s/.test(whole) || !/[\p{L}\p{N}]/u.test(whole)) return true;
  const match = headingLine.exec(whole);
  if (match === null) return false;
  return (
    isHeading(match[1]!) ||
    (isRoleWord(match[1]!) && isNameLike(whole.slice(match[0].length).trim()))
  );
}

/**
 * Paragraphs: between empty lines; without empty lines, each line, unless the text is wrapped (most
 * lines short and ending in the middle of a sentence), when it is one paragraph.
 */
function paragraphsOf(text: string, lines: readonly Line[]): { start: number; end: number }[] {
  if (lines.length === 0) return [];
  const paragraphs: { start: number; end: number }[] = [];
  const separated = lines.some((line, index) => index > 0 && line.blankBefore);
  const unfinished = lines.filter(
    (line) => !/[.?!…"”’)\]]/u.test(text.charAt(line.end - 1)),
  ).length;
  const wrapped =
    unfinished * 2 > lines.length && lines.every((line) => line.end - line.start < 120);
  lines.forEach((line, index) => {
    const last = paragraphs[paragraphs.length - 1];
    if (index > 0 && last !== undefined && !(separated ? line.blankBefore : !wrapped)) {
      last.end = line.end;
    } else {
      paragraphs.push({ start: line.start, end: line.end });
    }
  });
  return paragraphs;
}
