import { Buffer } from 'node:buffer';
import { constants, gunzipSync, inflateRawSync, inflateSync } from 'node:zlib';

const partly = { finishFlush: constants.Z_SYNC_FLUSH, maxOutputLength: 1 << 26 };
const deepest = 3;

/**
 * Words that can be read in these bytes without a key: as they stand (UTF-8, UTF-16 of either order),
 * in hexadecimal or base64 at any alignment, and in whatever a stream of gzip, zlib or deflate gives
 * that begins where one could. What was decoded is searched again. Large and small letters are one.
 */
export function readable(bytes: Uint8Array, words: readonly string[]): string[] {
  const found = new Set<string>();
  search(Buffer.from(bytes), words, found, 0);
  return words.filter((word) => found.has(word));
}

function search(bytes: Buffer, words: readonly string[], found: Set<string>, depth: number): void {
  // One code unit a byte: a pattern can be looked for in bytes.
  const text = bytes.toString('latin1');
  const small = text.toLowerCase();
  for (const word of words) {
    if (!found.has(word) && standsIn(text, small, word)) found.add(word);
  }
  if (depth === deepest) return;
  for (const decoded of decodings(bytes, text)) search(decoded, words, found, depth + 1);
}

function standsIn(text: string, small: string, word: string): boolean {
  const plain = [word, word.toLowerCase()].flatMap((form) => {
    const wide = Buffer.from(form, 'utf16le');
    return [Buffer.from(form, 'utf8'), wide, Buffer.from(wide).swap16()];
  });
  return plain.some(
    (form) =>
      small.includes(form.toString('latin1').toLowerCase()) ||
      small.includes(form.toString('hex')) ||
      [0, 1, 2].some((before) => text.includes(base64Of(form, before))),
  );
}

/** What of the word does not depend on its neighbours, after so many bytes of a group of three. */
function base64Of(form: Buffer, before: number): string {
  const shifted = Buffer.concat([Buffer.alloc(before), form]).toString('base64');
  const whole = Math.floor(((before + form.length) * 8) / 6);
  return shifted.slice(Math.ceil((before * 8) / 6), whole);
}

function* decodings(bytes: Buffer, text: string): Generator<Buffer> {
  for (const [run] of text.matchAll(/[0-9A-Fa-f]{32,}/gu)) yield Buffer.from(run, 'hex');
  for (const [run] of text.matchAll(/[A-Za-z0-9+/_-]{32,}/gu)) {
    for (const from of [0, 1, 2, 3]) yield Buffer.from(run.slice(from), 'base64');
  }
  for (let at = 0; at + 2 < bytes.length; at++) {
    const [first, second] = [bytes[at], bytes[at + 1]];
    const rest = (skip = 0): Buffer => bytes.subarray(at + skip);
    if (first === 0x1f && second === 0x8b && bytes[at + 2] === 8) {
      yield* inflated(() => gunzipSync(rest(), partly));
    } else if ((first & 15) === 8 && first >> 4 <= 7 && (first * 256 + second) % 31 === 0) {
      yield* inflated(() => inflateSync(rest(), partly));
    } else if (first === 0x50 && second === 0x4b && bytes[at + 2] === 3 && at + 30 < bytes.length) {
      const skip = 30 + bytes.readUInt16LE(at + 26) + bytes.readUInt16LE(at + 28);
      yield* inflated(() => inflateRawSync(rest(skip), partly));
    } else if ((first & 7) === 4 || (first & 7) === 5) {
      // A bare block with codes of its own names how many, and how long theirs are.
      if (((first >> 3) & 31) <= 29 && (second & 31) <= 29 && codesFit(rest(), 3)) {
        yield* inflated(() => inflateRawSync(rest(), partly));
      }
    }
  }
}

/** Whether the lengths of the code of codes could be those of one: none over, none left (RFC 1951). */
function codesFit(bytes: Buffer, from: number): boolean {
  const bits = (at: number, count: number): number => {
    let value = 0;
    for (let bit = 0; bit < count; bit++) {
      value |= (((bytes[(at + bit) >> 3] ?? 0) >> ((at + bit) & 7)) & 1) << bit;
    }
    return value;
  };
  const count = bits(from + 10, 4) + 4;
  let room = 128;
  for (let n = 0; n < count; n++) {
    const length = bits(from + 14 + 3 * n, 3);
    if (length > 0) room -= 128 >> length;
  }
  return room === 0;
}

function* inflated(inflate: () => Buffer): Generator<Buffer> {
  try {
    const found = inflate();
    if (found.length > 7) yield found;
  } catch {
    // No such stream.
  }
}
