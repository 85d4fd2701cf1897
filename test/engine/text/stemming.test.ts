import { expect, test } from 'vitest';
import { countedForm, languages, searchForm, stemmerFor } from '../../../engine/text/index.ts';

test('every language has a stemmer that leaves no word empty', () => {
  for (const language of languages) {
    const stem = stemmerFor(language);
    for (const word of ['a', 'is', 'boats', 'häuser', 'maisons', 'niños', 'работали', "can't"]) {
      expect(stem(word)).not.toBe('');
    }
  }
});

test('singular and plural meet in their stem', () => {
  expect(stemmerFor('deu')('wohnungen')).toBe(stemmerFor('deu')('wohnung'));
  expect(stemmerFor('fra')('maisons')).toBe(stemmerFor('fra')('maison'));
  expect(stemmerFor('swe')('bilarna')).toBe(stemmerFor('swe')('bilar'));
});

test('search stems whatever the study counts', () => {
  expect(searchForm('Ferries', 'eng')).toBe(searchForm('ferry', 'eng'));
  expect(searchForm('two words', 'eng')).toBeNull();
});

test('a typed word is counted under its stem only where stemming is on', () => {
  expect(countedForm('Ferries', { language: 'eng', stemming: false })).toBe('ferries');
  expect(countedForm('Ferries', { language: 'eng', stemming: true })).toBe('ferri');
});
