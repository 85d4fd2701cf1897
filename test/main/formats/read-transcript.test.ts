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
    ['<!DOCTYPE html><p>INT: How?<p>P07: Well.', 'a.txt', 'html'],
    ['{\\rtf1 INT: How?\\par P07: Well.}', 'a.txt', 'rtf'],
  ])('%j in %s', async (text, name, format) => {
    const result = await readTranscript(strToU8(text), name);
    expect(result.ok && result.value.format).toBe(format);
  });
});

describe('refused by name is', () => {
  test.each<[string, string, Uint8Array]>([
    ['image', 'a.txt', Uint8Array.of(0x89, 0x50, 0x4e, 0x47, 13, 10, 26, 10)],
    ['recording', 'a.mp3', Uint8Array.of(0x49, 0x44, 0x33, 4, 0, 0)],
    ['recording', 'a.m4a', strToU8('\0\0\0 ftypM4A ')],
    ['xml', 'a.txt', strToU8('<?xml version="1.0"?><a/>')],
    ['qdc', 'codes.qdc', strToU8('<?xml version="1.0"?><CodeBook/>')],
    ['json', 'plan.json', strToU8('{"themes": []}')],
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

  test('a table of answers, where a transcript is wanted', async () => {
    expect(await readTranscript(strToU8('participant,age\nP07,40'), 'a.CSV')).toEqual({
      ok: false,
      code: 'a table',
    });
  });

  test.each([
    ['%PDF-1.7 …', 'a.txt', 'pdf'],
    ['{\\rtf1 text', 'a.txt', 'rtf'],
  ])('what says that it is a format and is not: %j', async (text, name, format) => {
    expect(await readTranscript(strToU8(text), name)).toEqual({
      ok: false,
      code: 'broken file',
      format,
    });
  });

  test('more than 200 MB, unread', async () => {
    const result = await readTranscript(new Uint8Array(200_000_001), 'a.txt');
    expect(result).toEqual({ ok: false, code: 'too large', megabytes: 201, limit: 200 });
  });

  test('a file that is no writing', async () => {
    const noise = Uint8Array.from({ length: 400 }, (_, i) => (i * 7919 + (i >> 3)) % 256);
    expect(await readTranscript(noise, 'a.txt')).toEqual({ ok: false, code: 'not text' });
  });
});
