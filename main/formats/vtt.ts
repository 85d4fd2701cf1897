import type { Detail } from '../../engine/spans/index.ts';
import type { Cue, CueLine } from './cues.ts';

/** Captions of a WebVTT file, with what its header says. */
export interface VttFile {
  readonly details: readonly Detail[];
  readonly cues: readonly Cue[];
}

const signature = /^\ufeff?WEBVTT(?:[ \t].*)?$/;

export function isVtt(text: string): boolean {
  return signature.test(text.split('\n', 1)[0]!);
}

/**
 * Cues by the rules of the W3C's WebVTT: blocks between empty lines; NOTE, STYLE and REGION blocks
 * and blocks whose times break the syntax are dropped; tags are dropped, <v Name> kept as the
 * speaker; character references are resolved. The text is canonical (LF) and passes `isVtt`.
 */
export function parseVtt(text: string): VttFile {
  const lines = text.split('\n');
  const header: string[] = [];
  let at = 1;
  while (at < lines.length && lines[at] !== '' && !lines[at]!.includes('-->')) {
    header.push(lines[at++]!);
  }
  const cues: Cue[] = [];
  while (at < lines.length) {
    if (lines[at] === '') {
      at++;
      continue;
    }
    const block: string[] = [];
    // Times on a line begin a cue even where the empty line before them is missing.
    while (at < lines.length && lines[at] !== '') {
      const timed = lines[at]!.includes('-->');
      if (timed && block.some((line) => line.includes('-->'))) break;
      block.push(lines[at++]!);
    }
    const cue = cueOf(block);
    if (cue !== null) cues.push(cue);
  }
  return { details: detailsOf(lines[0]!, header), cues };
}

function detailsOf(first: string, header: readonly string[]): Detail[] {
  const title = first.replace(/^\ufeff?WEBVTT\s*[-–—]?\s*/, '').trim();
  const details = title === '' ? [] : [{ name: '', value: title }];
  for (const line of header) {
    const colon = line.indexOf(':');
    details.push(
      colon < 0
        ? { name: '', value: line.trim() }
        : { name: line.slice(0, colon).trim(), value: line.slice(colon + 1).trim() },
    );
  }
  return details;
}

function cueOf(block: readonly string[]): Cue | null {
  const at = block.findIndex((line) => line.includes('-->'));
  if (at < 0 || at > 1) return null;
  const times = timings.exec(block[at]!);
  if (times === null) return null;
  return {
    id: at === 1 ? block[0]! : '',
    startTime: milliseconds(times[1]!),
    endTime: milliseconds(times[2]!),
    lines: cueLines(block.slice(at + 1).join('\n')),
  };
}

const stamp = String.raw`(?:\d{2,}:)?[0-5]\d:[0-5]\d\.\d{3}`;
const timings = new RegExp(String.raw`^[ \t\f]*(${stamp})[ \t\f]*-->[ \t\f]*(${stamp})(?![\d.])`);

function milliseconds(time: string): number {
  const [whole = '', fraction = ''] = time.split('.');
  const seconds = whole.split(':').reduce((total, part) => total * 60 + Number(part), 0);
  return seconds * 1000 + Number(fraction);
}

const tag = /<(\/?)([^\s<>/]{0,40})([^<>]{0,400})>/g;

/** The lines of a cue, split where the voice changes. */
function cueLines(payload: string): CueLine[] {
  const lines: CueLine[] = [];
  let speaker: string | null = null;
  let line = '';
  const close = (): void => {
    const text = resolve(line).trim();
    if (text !== '') lines.push({ speaker, text });
    line = '';
  };
  const add = (text: string): void => {
    text.split('\n').forEach((part, index) => {
      if (index > 0) close();
      line += part;
    });
  };
  let from = 0;
  for (const match of payload.matchAll(tag)) {
    add(payload.slice(from, match.index));
    from = match.index + match[0].length;
    const [, slash, name, annotation] = match;
    if (name !== 'v' && !name!.startsWith('v.')) continue;
    close();
    const voice = slash === '' ? resolve(annotation!).replace(/\s+/g, ' ').trim() : '';
    speaker = voice === '' ? null : voice;
  }
  // A tag that never closes takes the rest of the cue with it.
  const open = payload.indexOf('<', Math.max(from, payload.lastIndexOf('>') + 1));
  add(payload.slice(from, open < 0 ? payload.length : open));
  close();
  return lines;
}

const named: Readonly<Record<string, string>> = {
  amp: '&',
  lt: '<',
  gt: '>',
  quot: '"',
  apos: "'",
  nbsp: '\u00a0',
  lrm: '\u200e',
  rlm: '\u200f',
};

/** Character references; what is none stays as it is. */
function resolve(text: string): string {
  return text.replace(
    /&(?:#(\d{1,7})|#[xX]([\dA-Fa-f]{1,6})|([A-Za-z]+));/g,
    (whole, d, x, name) => {
      if (name !== undefined) return Object.hasOwn(named, name) ? named[name]! : whole;
      const code = d !== undefined ? Number(d) : parseInt(x, 16);
      const valid = code > 0 && code <= 0x10ffff && !(code >= 0xd800 && code <= 0xdfff);
      return valid ? String.fromCodePoint(code) : whole;
    },
  );
}
