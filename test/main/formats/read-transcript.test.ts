import { strToU8, zipSync } from 'fflate';
import { describe, expect, test } from 'vitest';
import { readTranscript } from '../../../main/formats/index.ts';

const talk = 'INT: How?\nP07: Well.';

describe('what is in a file decides what it is', () => {
  test.each([
    ['WEBVTT\n\n00:01.000 --> 00:02.000\n<v Ruth>Yes.', 'a.txt', 'vtt'],
    ['1\n00:00:01,000 --> 00:00:02,000\nYes.', 'a.txt', 'srt'],
    [talk, 'a.srt', 'text'],
    [talk, 'a.vtt', 'text'],
    [talk, 'a.md', 'text'],
    [talk, 'a', 'text'],
  ])('%j in %s', async (text, name, format) => {
    const result = await readTranscript(strToU8(text), name);
    expect(result.ok && result.value.format).toBe(format);
  });
});

describe('refused by name is', () => {
  test.each<[string, string, Uint8Array]>([
    ['pdf', 'a.txt', strToU8('%PDF-1.7 …')],
    ['rtf', 'a.txt', strToU8('{\\rtf1 text}')],
    ['image', 'a.txt', Uint8Array.of(0x89, 0x50, 0x4e, 0x47, 13, 10, 26, 10)],
    ['recording', 'a.mp3', Uint8Array.of(0x49, 0x44, 0x33, 4, 0, 0)],
    ['recording', 'a.m4a', strToU8('\0\0\0 ftypM4A ')],
    ['html', 'a.txt', strToU8('<!DOCTYPE html><p>INT: How?')],
    ['xml', 'a.txt', strToU8('<?xml version="1.0"?><a/>')],
    ['csv', 'attributes.CSV', strToU8('participant,age\nP07,40')],
    ['json', 'plan.json', strToU8('{"themes": []}')],
    [
      'odt',
      'a.docx',
      zipSync({ mimetype: [strToU8('application/vnd.oasis.opendocument.text'), { level: 0 }] }),
    ],
    [
      'xlsx',
      'a.docx',
      zipSync({ '[Content_Types].xml': strToU8('x'), 'xl/workbook.xml': strToU8('x') }),
    ],
    ['archive', 'a.zip', zipSync({ 'a.txt': strToU8(talk) })],
    [
      'doc',
      'a.doc',
      Uint8Array.of(
        0xd0,
        0xcf,
        0x11,
        0xe0,
        0xa1,
        0xb1,
        0x1a,
        0xe1,
        ...strToU8('W\0o\0r\0d\0D\0o\0c\0u\0m\0e\0n\0t\0'),
      ),
    ],
  ])('%s (%s)', async (format, name, bytes) => {
    expect(await readTranscript(bytes, name)).toEqual({
      ok: false,
      code: 'unknown format',
      format,
    });
  });
});

describe('refused is', () => {
  test('a file without a byte or a word', async () => {
    expect(await readTranscript(new Uint8Array(), 'a.txt')).toEqual({
      ok: false,
      code: 'empty file',
    });
    expect(await readTranscript(strToU8('\n \n'), 'a.txt')).toEqual({
      ok: false,
      code: 'empty file',
    });
  });

  test('a file of headings', async () => {
    expect(await readTranscript(strToU8('Date: 3 May\nPlace: the pier\n'), 'a.txt')).toEqual({
      ok: false,
      code: 'no speech',
      format: 'text',
    });
  });

  test('a file that is no writing', async () => {
    const noise = Uint8Array.from({ length: 400 }, (_, i) => (i * 7919 + (i >> 3)) % 256);
    expect(await readTranscript(noise, 'a.txt')).toEqual({ ok: false, code: 'not text' });
  });
});
