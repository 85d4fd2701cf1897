import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { formOf, wordsOf, type Language } from '../../../engine/text/index.ts';

function forms(text: string, language: Language = 'eng'): string[] {
  return wordsOf(text, { start: 0, end: text.length }, language).map((word) => word.form);
}

describe('words', () => {
  test.each<[string, string[]]>([
    ["I can't, o'clock", ['i', "can't", "o'clock"]],
    ['I can’t – don’t', ['i', "can't", "don't"]],
    ['part-time, mm-hm, E‑Mail', ['part-time', 'mm-hm', 'e-mail']],
    ['well--no and well—yes', ['well', 'no', 'and', 'well', 'yes']],
    ['th-the I-I-I w-w-we’ll', ['the', 'i', "we'll"]],
    ['my mother’s boat, it’s his', ['my', 'mother', 'boat', 'it', 'his']],
    ["'quoted' words' end", ['quoted', 'words', 'end']],
    ['café CAFÉ cafe\u0301', ['café', 'café', 'café']],
    ['Straße, Øystein, Жизнь', ['straße', 'øystein', 'жизнь']],
    ['in 1990 3.5 10:30 2,000 7th of P07 covid-19', ['in', 'of', 'p07', 'covid-19']],
    ['a 3-year-old', ['a', 'year-old']],
    ['no [laughs] no [long\npause] yes', ['no', 'no', 'yes']],
    ['so (inaudible 14:02) then (2.0) (.) ((crying)) end', ['so', 'then', 'end']],
    ['so (well, we went) home', ['so', 'well', 'we', 'went', 'home']],
    ['so (I laughed at that for an hour) home', 'so i laughed at that for an hour home'.split(' ')],
    ['{coughs} <unclear> fine', ['fine']],
    ['write to jane.doe@example.org or www.example.org/a now', ['write', 'to', 'or', 'now']],
    ['soft\u00adhyphen', ['softhyphen']],
    ['… — “ ” [ ] ( )', []],
    ['[never closed', ['never', 'closed']],
  ])('%j', (text, expected) => {
    expect(forms(text)).toEqual(expected);
  });

  test('French and Italian elisions are left off, except inside a word of its own', () => {
    expect(forms("l'école qu’il aujourd'hui d'accord", 'fra')).toEqual([
      'école',
      'il',
      "aujourd'hui",
      'accord',
    ]);
    expect(forms("dell'isola un'amica", 'ita')).toEqual(['isola', 'amica']);
    expect(forms("d'accord", 'eng')).toEqual(["d'accord"]);
  });

  test('only the stretch asked for is read', () => {
    const text = 'one two three';
    expect(wordsOf(text, { start: 4, end: 7 })).toEqual([{ start: 4, end: 7, form: 'two' }]);
  });

  test('one typed word has a form; none or several have none', () => {
    expect(formOf(' Ferry’s ')).toBe('ferry');
    expect(formOf('two words')).toBeNull();
    expect(formOf('1990')).toBeNull();
    expect(formOf('')).toBeNull();
  });

  test('every word is what its place in the text claims, in order, without overlap', () => {
    const piece = fc.oneof(
      fc.constantFrom('can’t', '[', ']', '(', ')', '-', '’', ' ', '\n', '.', '3', 'É', 'I-I', '@'),
      fc.string({ unit: 'grapheme', maxLength: 6 }),
    );
    fc.assert(
      fc.property(fc.array(piece, { maxLength: 40 }), (pieces) => {
        const text = pieces.join('');
        let last = 0;
        for (const { start, end, form } of wordsOf(text, { start: 0, end: text.length })) {
          expect(start).toBeGreaterThanOrEqual(last);
          expect(end).toBeGreaterThan(start);
          const slice = text.slice(start, end).toLowerCase().normalize('NFC');
          const plain = slice.replace(/[’ʼ‘]/g, "'").replace(/[\u2010\u2011]/g, '-');
          expect(form).toBe(plain.replace(/\u00ad/g, ''));
          last = end;
        }
      }),
    );
  });
});
