/** Text from bytes, with the reason where they are none. */
export type Decoded =
  | { readonly ok: true; readonly text: string }
  | { readonly ok: false; readonly code: 'empty file' | 'not text' | 'unknown encoding' };

/**
 * The canonical text of a file: decoded, without byte order mark, line ends as LF. UTF-8 and UTF-16
 * by their marks; without one, UTF-16 where nearly every second byte is zero, UTF-8 where the bytes
 * obey its rules, else Windows-1252 where they look like Western writing.
 */
export function decode(bytes: Uint8Array): Decoded {
  if (bytes.length === 0) return { ok: false, code: 'empty file' };
  const decoded = decodeBytes(bytes);
  if (!decoded.ok) return decoded;
  const text = decoded.text.replace(/^\ufeff/, '').replace(/\r\n?/g, '\n');
  if (text.trim() === '') return { ok: false, code: 'empty file' };
  return { ok: true, text };
}

function decodeBytes(bytes: Uint8Array): Decoded {
  const [a, b, c, d] = bytes;
  if (a === 0xff && b === 0xfe && !(c === 0 && d === 0)) return utf16(bytes, 'utf-16le');
  if (a === 0xfe && b === 0xff) return utf16(bytes, 'utf-16be');
  const zeros = zeroShares(bytes);
  const unmarked =
    zeros.odd > leastZeros && zeros.even * 20 < zeros.odd
      ? utf16(bytes, 'utf-16le')
      : zeros.even > leastZeros && zeros.odd * 20 < zeros.even
        ? utf16(bytes, 'utf-16be')
        : null;
  if (unmarked?.ok === true && hasSpaces(unmarked.text)) return unmarked;
  const utf8 = strictly(bytes, 'utf-8');
  if (utf8 !== null) {
    return isWriting(utf8) ? { ok: true, text: utf8 } : { ok: false, code: 'not text' };
  }
  return windows1252(bytes);
}

function strictly(bytes: Uint8Array, encoding: string): string | null {
  try {
    return new TextDecoder(encoding, { fatal: true }).decode(bytes);
  } catch {
    return null;
  }
}

function utf16(bytes: Uint8Array, encoding: 'utf-16le' | 'utf-16be'): Decoded {
  const even = bytes.length % 2 === 0;
  const text = even ? strictly(bytes, encoding) : null;
  return text !== null && isWriting(text) ? { ok: true, text } : { ok: false, code: 'not text' };
}

// In any alphabet a space, a line end or a full stop has a zero in UTF-16; where nearly no unit is a
// space, the zeros had another cause.
const leastZeros = 0.02;

function hasSpaces(text: string): boolean {
  return (text.match(/[ \n]/g)?.length ?? 0) * 25 >= text.length;
}

/** The shares of zeros among the bytes at even and at odd places. */
function zeroShares(bytes: Uint8Array): { even: number; odd: number } {
  const zeros = [0, 0];
  for (let i = 0; i < bytes.length; i++) if (bytes[i] === 0) zeros[i % 2]!++;
  return { even: (2 * zeros[0]!) / bytes.length, odd: (2 * zeros[1]!) / bytes.length };
}

const mostControls = 0.002;

/** Hardly any control characters, unassigned or private ones. */
function isWriting(text: string): boolean {
  let odd = 0;
  for (let i = 0; i < text.length; i++) {
    const code = text.charCodeAt(i);
    if (code === 0) return false;
    const control = code < 0x20 && !(code >= 0x09 && code <= 0x0d) && code !== 0x1b;
    if (control || code === 0x7f || (code >= 0xe000 && code <= 0xf8ff) || code >= 0xfffe) odd++;
  }
  return odd <= mostControls * text.length;
}

// Windows-1252 from 0x80 to 0x9f (WHATWG Encoding Standard, index windows-1252); zero where the
// encoding leaves a byte undefined. The rest is Latin-1.
const upper = [
  0x20ac, 0, 0x201a, 0x0192, 0x201e, 0x2026, 0x2020, 0x2021, 0x02c6, 0x2030, 0x0160, 0x2039, 0x0152,
  0, 0x017d, 0, 0, 0x2018, 0x2019, 0x201c, 0x201d, 0x2022, 0x2013, 0x2014, 0x02dc, 0x2122, 0x0161,
  0x203a, 0x0153, 0, 0x017e, 0x0178,
];

// Western writing is a tenth accented at most; other alphabets in one-byte encodings are mostly
// above 0x7f, and so is half of what is no writing at all.
const mostHigh = 0.25;

function windows1252(bytes: Uint8Array): Decoded {
  let undefinedBytes = 0;
  let high = 0;
  let text = '';
  let units: number[] = [];
  for (const byte of bytes) {
    const code = byte >= 0x80 && byte <= 0x9f ? upper[byte - 0x80]! : byte;
    if (byte >= 0x80) high++;
    if (code === 0) undefinedBytes++;
    units.push(code);
    if (units.length === 8192) {
      text += String.fromCharCode(...units);
      units = [];
    }
  }
  text += String.fromCharCode(...units);
  if (undefinedBytes > 0 || !isWriting(text)) return { ok: false, code: 'not text' };
  if (high > mostHigh * bytes.length) return { ok: false, code: 'unknown encoding' };
  return { ok: true, text };
}
