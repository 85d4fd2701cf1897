import type { Cue } from './cues.ts';

const timeLine =
  /^\s*(\d{1,3}):([0-5]?\d):([0-5]?\d)[,.](\d{1,3})\s*-->\s*(\d{1,3}):([0-5]?\d):([0-5]?\d)[,.](\d{1,3})(?:\s.*)?$/;
const numberLine = /^\s*\d+\s*$/;

/** Whether a text begins with a numbered caption and its times. */
export function isSrt(text: string): boolean {
  const lines = text.split('\n', 40).filter((line) => line.trim() !== '');
  return (
    (numberLine.test(lines[0] ?? '') && timeLine.test(lines[1] ?? '')) ||
    timeLine.test(lines[0] ?? '')
  );
}

/**
 * Captions of a SubRip file: a number, a line of times, the text up to the next number and times.
 * An empty line inside a caption is kept as a line break. The lines keep their tags: see
 * `withoutTags`. The text is canonical (LF).
 */
export function parseSrt(text: string): Cue[] {
  const lines = text.split('\n');
  const starts = lines.flatMap((line, index) => {
    const times = timeLine.exec(line);
    return times === null ? [] : [{ index, times }];
  });
  return starts.map(({ index, times }, order) => {
    const next = starts[order + 1]?.index;
    const nextNumbered =
      next !== undefined && numberLine.test(lines[next - 1]!) && next - 1 > index;
    const end = next === undefined ? lines.length : nextNumbered ? next - 1 : next;
    const id = index > 0 && numberLine.test(lines[index - 1]!) ? lines[index - 1]!.trim() : '';
    return {
      id,
      startTime: milliseconds(times.slice(1, 5)),
      endTime: milliseconds(times.slice(5, 9)),
      lines: lines
        .slice(index + 1, end)
        .filter((line) => line.trim() !== '')
        .map((line) => ({ speaker: null, text: line })),
    };
  });
}

function milliseconds([hours, minutes, seconds, fraction]: readonly string[]): number {
  const whole = (Number(hours) * 60 + Number(minutes)) * 60 + Number(seconds);
  return whole * 1000 + Number(fraction!.padEnd(3, '0'));
}

/** Captions without the tags that players understand: <i>, <b>, <u>, <s>, <font …>, {\an8}. */
export function withoutTags(cues: readonly Cue[]): Cue[] {
  return cues.map((cue) => ({
    ...cue,
    lines: cue.lines.map((line) => ({
      ...line,
      text: line.text.replace(/<\/?(?:i|b|u|s|font)(?:\s[^<>]*)?>|\{\\[^{}]*\}/gi, ''),
    })),
  }));
}
