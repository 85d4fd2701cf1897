import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { sentencesOf } from '../../../engine/text/index.ts';

function sentences(text: string): string[] {
  return sentencesOf(text, { start: 0, end: text.length }).map((s) => text.slice(s.start, s.end));
}

describe('a sentence', () => {
  test.each<[string, string[]]>([
    ['We left. They stayed.', ['We left.', 'They stayed.']],
    [
      'Dr. Falk and Mr. Smith came. So did St. Mary.',
      ['Dr. Falk and Mr. Smith came.', 'So did St. Mary.'],
    ],
    ['In the U.S. Army at 3.5 p.m. Then no.', ['In the U.S. Army at 3.5 p.m.', 'Then no.']],
    ['J. Falk spoke. So did I. Oh.', ['J. Falk spoke.', 'So did I.', 'Oh.']],
    ['Well... no… maybe. Right… Then', ['Well... no… maybe.', 'Right…', 'Then']],
    ['“Why?” she said. “No!” Then he left.', ['“Why?” she said.', '“No!”', 'Then he left.']],
    [
      'Boats, nets, etc. were there. Nets, etc. We left.',
      ['Boats, nets, etc. were there.', 'Nets, etc.', 'We left.'],
    ],
    ['Number no. 7 is here. No. It is not.', ['Number no. 7 is here.', 'No.', 'It is not.']],
    ['yeah. so i went. right? ok', ['yeah.', 'so i went.', 'right?', 'ok']],
    ['a line\nwrapped on\n\nand a paragraph', ['a line\nwrapped on', 'and a paragraph']],
    ['Das war z.B. Montag. Gut.', ['Das war z.B. Montag.', 'Gut.']],
    ['', []],
    [' \n ', []],
  ])('%j', (text, expected) => {
    expect(sentences(text)).toEqual(expected);
  });

  test('together they hold everything but white space', () => {
    const piece = fc.constantFrom(
      'Dr',
      '.',
      ' ',
      '\n',
      '\n\n',
      '?',
      '”',
      'a',
      'B',
      '…',
      '3',
      '\u00a0',
    );
    fc.assert(
      fc.property(fc.array(piece, { maxLength: 40 }), (pieces) => {
        const text = pieces.join('');
        expect(sentences(text).join('').replace(/\s/g, '')).toBe(text.replace(/\s/g, ''));
      }),
    );
  });
});
