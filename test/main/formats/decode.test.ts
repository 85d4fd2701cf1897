import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { decode } from '../../../main/formats/decode.ts';

const words = 'Ruth: “Naïve café” – she said: no…\nTom: Oui.\n';

function utf16(text: string, little: boolean, mark: boolean): Uint8Array {
  const units = mark ? `\ufeff${text}` : text;
  const bytes = new Uint8Array(2 * units.length);
  const view = new DataView(bytes.buffer);
  for (let i = 0; i < units.length; i++) view.setUint16(2 * i, units.charCodeAt(i), little);
  return bytes;
}

const utf8 = (text: string): Uint8Array => new TextEncoder().encode(text);
// Windows-1252 by the WHATWG Encoding Standard: “ 93, ” 94, – 96, … 85, ï EF, é E9.
const windows = Uint8Array.from(
  [...words].map((c) => ({ '“': 0x93, '”': 0x94, '–': 0x96, '…': 0x85 })[c] ?? c.charCodeAt(0)),
);

describe('text comes out the same from', () => {
  test.each<[string, Uint8Array]>([
    ['UTF-8', utf8(words)],
    ['UTF-8 with its mark', utf8(`\ufeff${words}`)],
    ['UTF-16LE with its mark', utf16(words, true, true)],
    ['UTF-16BE with its mark', utf16(words, false, true)],
    ['UTF-16LE without', utf16(words, true, false)],
    ['UTF-16BE without', utf16(words, false, false)],
    ['Windows-1252', windows],
    ['CRLF line ends', utf8(words.replaceAll('\n', '\r\n'))],
    ['CR line ends', utf8(words.replaceAll('\n', '\r'))],
  ])('%s', (_, bytes) => {
    expect(decode(bytes)).toEqual({ ok: true, text: words });
  });
});

test('nothing else in a text is touched', () => {
  const text = ' a\u00a0b\t\u2028c\u200b  d\f\n\n\n e ';
  expect(decode(utf8(text))).toEqual({ ok: true, text });
});

test('Cyrillic in UTF-16 without a mark is known by its spaces', () => {
  const text = 'Анна: Мы жили у моря, и зимой было холодно.\nИрина: А потом?';
  expect(decode(utf16(text, true, false))).toEqual({ ok: true, text });
  expect(decode(utf16(text, false, false))).toEqual({ ok: true, text });
});

describe('refused are', () => {
  test('no bytes, and nothing but white space', () => {
    expect(decode(new Uint8Array())).toEqual({ ok: false, code: 'empty file' });
    expect(decode(utf8(' \r\n\t'))).toEqual({ ok: false, code: 'empty file' });
    expect(decode(utf8('\ufeff'))).toEqual({ ok: false, code: 'empty file' });
  });

  test('a text with a zero in it, half a UTF-16 unit, a lone half of a pair', () => {
    expect(decode(utf8('Ruth: he\0llo there'))).toEqual({ ok: false, code: 'not text' });
    expect(decode(utf16(words, true, true).slice(0, -1))).toEqual({ ok: false, code: 'not text' });
    expect(decode(utf16('a\ud800b c d', true, true))).toEqual({ ok: false, code: 'not text' });
  });

  test('a one-byte encoding of another alphabet, which could be any', () => {
    // "Мы жили у моря" in Windows-1251.
    const bytes = Uint8Array.of(
      0xcc,
      0xfb,
      0x20,
      0xe6,
      0xe8,
      0xeb,
      0xe8,
      0x20,
      0xf3,
      0x20,
      0xec,
      0xee,
      0xf0,
      0xff,
    );
    expect(decode(bytes)).toEqual({ ok: false, code: 'unknown encoding' });
  });

  test('random bytes', () => {
    fc.assert(
      fc.property(fc.uint8Array({ minLength: 200, maxLength: 600 }), (bytes) => {
        // Arrays of one small value are no random bytes.
        fc.pre(new Set(bytes).size > 60);
        expect(decode(bytes).ok).toBe(false);
      }),
    );
  });
});

test('any text comes back from UTF-8', () => {
  fc.assert(
    fc.property(fc.string({ unit: 'grapheme' }), (text) => {
      fc.pre(text.trim() !== '' && !/[\r\ufeff\ue000-\uf8ff\ufffe\uffff]/.test(text));
      fc.pre(!/[\0-\x1f\x7f]/.test(text));
      expect(decode(utf8(text))).toEqual({ ok: true, text });
    }),
  );
});
