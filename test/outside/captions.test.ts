import { expect, test } from 'vitest';
import { parseSrt } from '../../main/formats/srt.ts';
import { isVtt, parseVtt } from '../../main/formats/vtt.ts';
import { decode } from '../../main/formats/decode.ts';
import type { Cue } from '../../main/formats/cues.ts';
import values from './values/captions.json' with { type: 'json' };

function canonical(text: string): string {
  const decoded = decode(new TextEncoder().encode(text));
  if (!decoded.ok) throw new Error(decoded.code);
  return decoded.text;
}

const textOf = (cue: Cue): string => cue.lines.map((line) => line.text).join('\n');

test('WebVTT is read by the rules of the W3C', () => {
  const text = canonical(values.webvtt.input);
  expect(isVtt(text)).toBe(true);
  const cues = parseVtt(text).cues.map((cue) => ({
    id: cue.id,
    start_ms: cue.startTime,
    end_ms: cue.endTime,
    speaker: cue.lines[0]!.speaker,
    text: textOf(cue),
  }));
  expect(cues).toEqual(values.webvtt.expect);
});

test('SubRip captions keep number, times and lines', () => {
  const cues = parseSrt(canonical(values.srt.input)).map((cue) => ({
    n: Number(cue.id),
    start_ms: cue.startTime,
    end_ms: cue.endTime,
    text: textOf(cue),
  }));
  expect(cues).toEqual(values.srt.expect);
});
