import { clockMilliseconds, clockPattern } from './clock.ts';
import { isHeading, isRoleCode, isRoleWord, isSpeechOpener } from './role-words.ts';

/** A line of a text, without white space at its edges. */
export interface Line {
  readonly start: number;
  readonly end: number;
  /** Whether an empty line or nothing stands before it. */
  readonly blankBefore: boolean;
}

export type LabelShape = 'role' | 'code' | 'full name' | 'name' | 'small';

/** A line that may begin a turn, by what it looks like on its own. */
export interface Candidate {
  /** Index of the line. */
  readonly line: number;
  readonly label: string;
  /** The label as lines are counted by: small letters, single spaces. */
  readonly key: string;
  readonly shape: LabelShape;
  /**
   * A colon behind the label, a time on the label's own line, a tab behind it; a full stop ("Q." and
   * "A."), a dash, or the label alone in a heading.
   */
  readonly layout: 'colon' | 'clock' | 'tab' | 'stop' | 'dash' | 'heading';
  readonly bold: boolean;
  readonly startTime: number | null;
  readonly endTime: number | null;
  /** Where the speech may begin; white space may follow. */
  readonly speech: number;
}

const bold = String.raw`(?:\*\*|__|\*)`;
const clock = String.raw`[\[({<]?\s?(${clockPattern})(?:\s?(?:-->|[-–—])\s?(${clockPattern}))?\s?[\])}>]?`;
const labelText = String.raw`\p{L}[\p{L}\p{M}\p{N} \u00a0.'’\-_/&#,]{0,119}?(?:\s?\([^()\n:]{1,60}\))?`;

const opening = new RegExp(
  String.raw`^(?:[-–—•>]\s+|\d{1,4}(?:[.)]\s+|\t+))?(${bold}?)(?:${clock}\s*[-–—:]?\s*)?(${bold}?)`,
  'u',
);
const beforeColon = new RegExp(
  String.raw`^[\[<]?(${labelText})[\]>]?${bold}?(?:[\s,–-]*${clock})?(${bold}?)\s?[:：](${bold}?)`,
  'u',
);
const beforeClock = new RegExp(String.raw`^(${labelText})${bold}?[\s,–-]+${clock}${bold}?$`, 'u');
const alone = new RegExp(String.raw`^(${labelText})${bold}?$`, 'u');
const beforeStop = /^([QFAR]\d{0,3})\.[ \t\u00a0]+(?=\S)/u;
const beforeDash = new RegExp(String.raw`^(${labelText})${bold}?\s+[-–—]\s+(?=\S)`, 'u');
const inHeading = new RegExp(String.raw`^#{1,6}\s+${bold}?(${labelText})${bold}?:?\s*#*$`, 'u');
const beforeTab = new RegExp(String.raw`^(${labelText})\t+(?=\S)`, 'u');
const clockBehind = new RegExp(String.raw`^\s*[\[({]${clock}[\])}]?`, 'u');
const clockAlone = new RegExp(String.raw`^${bold}?${clock}${bold}?$`, 'u');

const longestOpening = 260;

/** The time that is all there is on a line, in milliseconds, or null. */
export function timeAlone(line: string): number | null {
  const match = clockAlone.exec(line);
  return match === null ? null : clockMilliseconds(match[1]!);
}

/** The time at the beginning of a line and how many code units it takes, or null. */
export function timeInFront(line: string): { time: number; length: number } | null {
  const match = opening.exec(line);
  if (match?.[2] === undefined) return null;
  return { time: clockMilliseconds(match[2]), length: match[0].length };
}

/** Every line that might begin a turn. What it is decided on the whole text: see `chooseLabels`. */
export function findCandidates(text: string, lines: readonly Line[]): Candidate[] {
  return lines.flatMap((line, index) => candidateOf(text, line, index) ?? []);
}

function candidateOf(text: string, line: Line, index: number): Candidate | null {
  const beginning = text.slice(line.start, Math.min(line.end, line.start + longestOpening));
  const front = opening.exec(beginning)!;
  const rest = beginning.slice(front[0].length);
  const frontTime = front[2] === undefined ? null : clockMilliseconds(front[2]);
  const frontEnd = front[3] === undefined ? null : clockMilliseconds(front[3]);
  const isBold = front[1] !== '' || front[4] !== '';
  const whole = beginning.length === line.end - line.start;
  const at = line.start + front[0].length;

  const make = (
    label: string,
    layout: Candidate['layout'],
    speech: number,
    time: string | undefined,
    endTime: string | undefined,
  ): Candidate | null => {
    const tidy = label
      .replace(/[\s\u00a0]+/gu, ' ')
      .replace(/[ ,.\-–]+$/u, (end) => (end.startsWith('.') ? '.' : ''))
      .trim();
    const shape = shapeOf(tidy);
    if (shape === null) return null;
    return {
      line: index,
      label: tidy,
      key: tidy.toLowerCase(),
      shape,
      layout,
      bold: isBold,
      startTime: time === undefined ? frontTime : clockMilliseconds(time),
      endTime: endTime === undefined ? frontEnd : clockMilliseconds(endTime),
      speech,
    };
  };

  const colon = beforeColon.exec(rest);
  if (colon !== null) {
    const behind = rest.slice(colon[0].length);
    // A digit or slash right behind the colon is a time or an address.
    if (!/^[\d/\\]/.test(behind)) {
      const later = clockBehind.exec(behind);
      const speech = at + colon[0].length + (later?.[0].length ?? 0);
      const made = make(colon[1]!, 'colon', speech, colon[2] ?? later?.[1], colon[3] ?? later?.[2]);
      if (made !== null) return made;
    }
  }
  if (whole) {
    const clocked = beforeClock.exec(rest);
    if (clocked !== null) return make(clocked[1]!, 'clock', line.end, clocked[2], clocked[3]);
    if (frontTime !== null) {
      const label = alone.exec(rest);
      if (label !== null) return make(label[1]!, 'clock', line.end, undefined, undefined);
    }
  }
  const tab = beforeTab.exec(rest);
  if (tab !== null) return make(tab[1]!, 'tab', at + tab[0].length, undefined, undefined);
  const stop = beforeStop.exec(rest);
  if (stop !== null) return make(stop[1]!, 'stop', at + stop[0].length, undefined, undefined);
  const heading = whole ? inHeading.exec(beginning) : null;
  if (heading !== null) return make(heading[1]!, 'heading', line.end, undefined, undefined);
  const dash = beforeDash.exec(rest);
  if (dash !== null) return make(dash[1]!, 'dash', at + dash[0].length, undefined, undefined);
  return null;
}

const code = /^(?:\p{Lu}\p{L}{0,4}[-_. #]?\d{1,4}\p{L}?|[a-z]{1,3}[-_]?\d{1,4}|\p{Lu})$/u;
const nameWord =
  /^(?:\p{Lu}[\p{L}\p{M}'’.-]*|[dlo]['’]\p{Lu}[\p{L}\p{M}-]*|\p{Lo}[\p{L}\p{M}]{0,7})$/u;
const joiner =
  /^(?:de|da|do|dos|das|del|della|di|du|des|la|le|el|al|bin|ibn|van|von|vom|zu|der|den|ter|ten|of|and|und|et|y|e|og|och|en|&|\/|\d{1,4}|#\d{1,4}|\p{Lu}\d{0,3})$/u;
const mostWords = 20;

/** What a label looks like, or null for what is no label whatever stands around it. */
function shapeOf(label: string): LabelShape | null {
  if (label === '' || isHeading(label) || isSpeechOpener(label)) return null;
  if (isRoleWord(label) || isRoleCode(label)) return 'role';
  if (code.test(label)) return 'code';
  const words = label.replace(/\s*\([^()]*\)$/u, '').split(/ |(?<=\S)[,/](?=\S)/u);
  if (words.length > mostWords) return null;
  const names = words.filter((word) => nameWord.test(word.replace(/,$/, '')));
  if (names.length === 0 || !nameWord.test(words[0]!)) {
    return /^[\p{Ll}\p{M}\d_-]{1,15}$/u.test(label) ? 'small' : null;
  }
  if (!words.every((word) => nameWord.test(word.replace(/,$/, '')) || joiner.test(word)))
    return null;
  return words.length > 1 ? 'full name' : 'name';
}

interface Group {
  readonly key: string;
  readonly shape: LabelShape;
  readonly lines: Candidate[];
}

/**
 * The candidates that begin a turn, decided over the whole text. The layout that most lines follow
 * wins. Labels that recur, name a role or are codes set the habit (bold, timed, after an empty line,
 * in capitals); a label that stands but once or twice must follow that habit, and must not be a word
 * that the text also writes small.
 */
export function chooseLabels(
  text: string,
  lines: readonly Line[],
  found: readonly Candidate[],
): Candidate[] {
  const layout = mainLayout(found);
  if (layout === null) return [];
  const groups = groupsOf(found.filter((candidate) => candidate.layout === layout));
  const anchors = anchorsOf(groups);
  if (anchors.length === 0) return withoutAnchors(text, lines, groups);

  const habit = habitOf(anchors, lines);
  const candidateLines = new Set(groups.flatMap((group) => group.lines.map((one) => one.line)));
  const first = Math.min(...candidateLines);
  const continued = lines.some(
    (line, index) =>
      index > first && !candidateLines.has(index) && !line.blankBefore && !isTime(text, line),
  );
  const paragraphed = lines.some(
    (line, index) =>
      index > first && !candidateLines.has(index) && line.blankBefore && !isTime(text, line),
  );
  const isAnchor = new Set(anchors);
  const small = smallWords(text);
  const chosen = groups.filter((group) => {
    if (isAnchor.has(group)) return true;
    const fitting = group.lines.filter((candidate) => fits(candidate, habit, lines)).length;
    const rare = group.lines.length < 3;
    if (rare ? fitting < group.lines.length : fitting < group.lines.length * 0.8) return false;
    if (group.shape === 'small') {
      return group.lines.length > 1 && anchors.every((anchor) => anchor.shape === 'small');
    }
    if (group.shape === 'name' && rare) {
      if (small.has(group.key)) return false;
      if (habit.distinct) return true;
      return habit.blank ? !paragraphed : !continued;
    }
    return group.shape !== 'full name' || !rare || habit.distinct || habit.blank || !continued;
  });
  return chosen.flatMap((group) => group.lines).sort((a, b) => a.line - b.line);
}

function isTime(text: string, line: Line): boolean {
  return timeAlone(text.slice(line.start, line.end)) !== null;
}

function mainLayout(found: readonly Candidate[]): Candidate['layout'] | null {
  const weight = (layout: Candidate['layout'], needed: number): number => {
    const groups = groupsOf(found.filter((candidate) => candidate.layout === layout));
    const lines = groups
      .filter(
        (group) =>
          layout === 'clock' ||
          group.lines.length > 1 ||
          group.shape === 'role' ||
          group.shape === 'code',
      )
      .reduce((total, group) => total + group.lines.length, 0);
    return lines >= needed ? lines : 0;
  };
  const colons = weight('colon', 1);
  const clocks = weight('clock', 2);
  const tabs = weight('tab', 4);
  if (clocks > 0 && clocks >= colons && clocks >= tabs) return 'clock';
  if (tabs > colons) return 'tab';
  if (colons === 0 && tabs === 0) {
    // Marks that talk has too: only where two labels or more come back with them, line after line.
    const rare = (['stop', 'heading', 'dash'] as const).find((layout) => {
      const back = groupsOf(found.filter((one) => one.layout === layout)).filter(
        ({ lines, shape }) => lines.length > 1 || shape === 'role',
      );
      return back.length > 1 && back.reduce((sum, { lines }) => sum + lines.length, 0) >= 4;
    });
    if (rare !== undefined) return rare;
  }
  return found.some((candidate) => candidate.layout === 'colon') ? 'colon' : null;
}

function groupsOf(candidates: readonly Candidate[]): Group[] {
  const groups = new Map<string, Group>();
  for (const candidate of candidates) {
    const group = groups.get(candidate.key);
    if (group === undefined) {
      groups.set(candidate.key, { key: candidate.key, shape: candidate.shape, lines: [candidate] });
    } else {
      group.lines.push(candidate);
    }
  }
  return [...groups.values()];
}

/** The labels that are beyond doubt: roles, codes and names about as frequent as the commonest. */
function anchorsOf(groups: readonly Group[]): Group[] {
  const most = Math.max(0, ...groups.map((group) => group.lines.length));
  return groups.filter(({ shape, lines }) => {
    if (shape === 'role') return lines.length > 1 || most < 3;
    if (shape === 'small') return lines.length >= 3 && lines.length * 4 >= most;
    if (shape === 'code' && lines.length > 1) return true;
    return lines.length > 1 && lines.length * 4 >= most;
  });
}

interface Habit {
  readonly bold: boolean;
  readonly timed: boolean;
  readonly blank: boolean;
  readonly capitals: boolean;
  /** Whether turns are marked by something that a line of speech would not have by chance. */
  readonly distinct: boolean;
}

const nearlyAll = 0.9;

function habitOf(anchors: readonly Group[], lines: readonly Line[]): Habit {
  const all = anchors.flatMap((anchor) => anchor.lines);
  const share = (is: (candidate: Candidate) => boolean): boolean =>
    all.length >= 3 && all.filter(is).length >= nearlyAll * all.length;
  const isBold = share((candidate) => candidate.bold);
  const timed = share((candidate) => candidate.startTime !== null);
  const capitals =
    anchors.length > 1 &&
    anchors.every(({ lines: [one] }) => /\p{Lu}{2}/u.test(one!.label) && isCapitals(one!));
  return {
    bold: isBold,
    timed,
    capitals,
    blank: share((candidate) => lines[candidate.line]!.blankBefore),
    distinct: isBold || timed || capitals || all[0]!.layout === 'clock',
  };
}

function isCapitals(candidate: Candidate): boolean {
  return candidate.label === candidate.label.toUpperCase();
}

function fits(candidate: Candidate, habit: Habit, lines: readonly Line[]): boolean {
  return (
    (!habit.bold || candidate.bold) &&
    (!habit.timed || candidate.startTime !== null) &&
    (!habit.capitals || isCapitals(candidate)) &&
    (!habit.blank || lines[candidate.line]!.blankBefore)
  );
}

/** The words that a text writes small somewhere. A name is never written so; a thing is. */
function smallWords(text: string): ReadonlySet<string> {
  return new Set(text.match(/(?<![\p{L}\p{M}\p{N}])\p{Ll}[\p{Ll}\p{M}]+(?![\p{L}\p{M}\p{N}])/gu));
}

/** No label recurs or names a role: names speak where they stand before most of the lines. */
function withoutAnchors(
  text: string,
  lines: readonly Line[],
  groups: readonly Group[],
): Candidate[] {
  const small = smallWords(text);
  const named = groups.filter(
    (group) => group.shape !== 'small' && (group.shape !== 'name' || !small.has(group.key)),
  );
  const all = named.flatMap((group) => group.lines).sort((a, b) => a.line - b.line);
  if (all.length === 0) return [];
  const first = all[0]!.line;
  const opensTalk = first === 0 || (lines[first]!.blankBefore && first < 8);
  if (named.length > 1) {
    const paragraphs = lines.filter((line, index) => index >= first && line.blankBefore).length;
    const starts = all.filter((candidate) => lines[candidate.line]!.blankBefore).length;
    const most = (part: number, whole: number): boolean => part * 10 >= whole * 6;
    return opensTalk || most(all.length, lines.length - first) || most(starts, paragraphs)
      ? all
      : [];
  }
  const line = lines[first]!;
  const long = line.end - all[0]!.speech > 60 || lines.length > first + 1;
  return opensTalk && long && named[0]!.shape !== 'name' ? all : [];
}
