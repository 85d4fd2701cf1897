import { describe, expect, test } from 'vitest';
import type { Study } from '../../../engine/study/index.ts';
import {
  passagesLed,
  suggestions,
  topWords,
  candidateWords,
} from '../../../engine/themes/index.ts';
import { coding, none, theme } from '../study/scene.ts';
import { fittedOf, previousOf, studyOf, wordsOf } from './scene.ts';

const words = wordsOf({
  one: ['boat', 'boat', 'net', 'net'],
  three: [],
  two: ['school', 'net'],
});
const fitted = fittedOf(
  previousOf(
    ['sea', 'young'],
    words,
    [
      [0.75, 0.25],
      [0.5, 0.5],
      [0.375, 0.625],
    ],
    [
      [0.5, 0.5, 0],
      [0.25, 0.25, 0.5],
    ],
  ),
);
const limits = { strength: 0.5, countedWords: 1 };
const themes = [theme('sea'), theme('young')];

function withCodings(...codings: Parameters<typeof coding>[1][]): Study {
  const study = studyOf(themes);
  const own = codings.map((changes, i) => coding(`c${i}`, { transcript: 'one', ...changes }));
  return { ...study, codings: new Map([['one', new Map(own.map((one) => [one.id, one]))]]) };
}

const offered = (study: Study, more = limits): string[] =>
  suggestions(study, fitted, more).map(
    ({ passage, theme: id, strength }) => `${passage} ${id} ${strength}`,
  );

describe('what is suggested', () => {
  test('themes from the least strength on, never where no word was counted', () => {
    expect(offered(studyOf(themes))).toEqual(['0 sea 0.75', '2 young 0.625']);
    expect(offered(studyOf(themes), { ...limits, strength: 0.625 })).toEqual([
      '0 sea 0.75',
      '2 young 0.625',
    ]);
    expect(offered(studyOf(themes), { strength: 0, countedWords: 0 })).toHaveLength(4);
  });

  test('only in passages with enough counted words', () => {
    expect(offered(studyOf(themes), { ...limits, countedWords: 3 })).toEqual(['0 sea 0.75']);
  });

  test.each(['confirmed', 'rejected', 'by hand'] as const)('not what is %s there', (standing) => {
    const study = withCodings({ theme: 'sea', standing, span: { start: 0, end: 40 } });
    expect(offered(study)).toEqual(['2 young 0.625']);
  });

  test('still what another theme was decided on', () => {
    const study = withCodings({
      theme: 'young',
      standing: 'rejected',
      span: { start: 0, end: 40 },
    });
    expect(offered(study)).toEqual(['0 sea 0.75', '2 young 0.625']);
  });

  test('nothing where a person found that no theme applies', () => {
    const nothing = none('n', { transcript: 'one', span: { start: 0, end: 40 } });
    const study = { ...studyOf(themes), nones: new Map([['one', new Map([['n', nothing]])]]) };
    expect(offered(study)).toEqual(['2 young 0.625']);
  });

  test('no theme that is set aside', () => {
    expect(offered(studyOf([theme('sea', { setAside: true }), theme('young')]))).toEqual([
      '2 young 0.625',
    ]);
  });

  test('a merged theme adds its strength to the one it went into', () => {
    const merged = studyOf([theme('sea'), theme('young', { mergedInto: 'sea' })]);
    expect(offered(merged)).toEqual(['0 sea 1', '2 sea 1']);
  });
});

describe('what a theme is shown by', () => {
  test('how many passages it leads, those without words aside', () => {
    expect(passagesLed(fitted)).toEqual([1, 1]);
  });

  test('its likeliest words, equals in the order of the vocabulary, none at zero', () => {
    expect(topWords(fitted, 0, 15).map(({ form }) => form)).toEqual(['boat', 'net']);
    expect(topWords(fitted, 1, 2).map(({ form }) => form)).toEqual(['school', 'boat']);
    expect(topWords(fitted, 1, 2)[0]).toEqual({
      word: 2,
      form: 'school',
      surface: 'school',
      probability: 0.5,
    });
  });

  test('a candidate by its first three words; a theme outside the fit by none', () => {
    expect(candidateWords(fitted, 'young')).toEqual(['school', 'boat', 'net']);
    expect(candidateWords(fitted, 'elsewhere')).toEqual([]);
  });
});
