import { describe, expect, test } from 'vitest';
import { defaultFitSettings, fitModel, type Priors } from '../../../engine/model/index.ts';
import type { Study } from '../../../engine/study/index.ts';
import {
  decisions,
  proportionsWithoutDecisions,
  suggestions,
  themeAlphaOf,
} from '../../../engine/themes/index.ts';
import { coding, draw, harbour, none, theme } from '../study/scene.ts';
import { fittedOf, studyOf, wordsOf } from './scene.ts';

const words = wordsOf({
  one: ['boat', 'boat', 'net', 'net', 'net', 'school', 'bus'],
  two: ['school', 'bus', 'bus', 'teacher', 'net', 'boat'],
  three: ['teacher', 'school', 'teacher', 'bus'],
  four: ['boat', 'net', 'boat', 'boat', 'teacher'],
  five: [],
});

/** A real fit of these words, with decisions about the first passage in its priors. */
function fittedWith(passagePriors: Priors['passagePriors'], themeAlpha: Priors['themeAlpha'] = []) {
  const priors: Priors = {
    themes: 2,
    alpha: 0.1,
    eta: 0.1,
    themeAlpha,
    wordPriors: [],
    passagePriors,
    frozen: [],
  };
  const fit = fitModel(
    words.counts,
    priors,
    { kind: 'fresh', seed: 3, leanings: [] },
    { ...defaultFitSettings, runs: 3 },
  );
  return {
    ...fittedOf({ themes: ['sea', 'young'], words, theta: fit.theta, phi: fit.phi }),
    themeWords: fit.themeWords,
  };
}

const study = studyOf([theme('sea'), theme('young')]);

describe('proportions without decisions', () => {
  test('are the stored ones where nothing was decided', () => {
    for (const themeAlpha of [[], [{ theme: 1, value: 0.3 }]]) {
      const fitted = fittedWith([], themeAlpha);
      const alpha = [0.1, themeAlpha.length === 0 ? 0.1 : 0.3];
      words.passages.forEach((_, passage) => {
        proportionsWithoutDecisions(fitted, passage, alpha).forEach((share, row) => {
          expect(share).toBeCloseTo(fitted.theta[passage * 2 + row], 5);
        });
      });
    }
  });

  test('let go of what a confirmation raised and a rejection shut out', () => {
    const plain = fittedWith([]);
    const [sea] = proportionsWithoutDecisions(plain, 1, [0.1, 0.1]);
    const weak = sea < 0.5 ? 0 : 1;
    const raised = fittedWith([{ passage: 1, theme: weak, value: 6.1 }]);
    const shut = fittedWith([{ passage: 1, theme: 1 - weak, value: 0 }]);
    expect(raised.theta[2 + weak]).toBeGreaterThan(0.5);
    expect(shut.theta[2 + weak]).toBe(1);
    for (const fitted of [raised, shut]) {
      const without = proportionsWithoutDecisions(fitted, 1, [0.1, 0.1]);
      expect(without[0] + without[1]).toBeCloseTo(1, 12);
      expect(without[weak]).toBeLessThan(fitted.theta[2 + weak]);
    }
  });

  test('begin with the base that merges give a theme, as long as the merged one has no row', () => {
    const merged = theme('old', { mergedInto: 'sea' });
    const later = theme('young', { mergedInto: 'sea' });
    const fitted = fittedWith([]);
    const alpha = fitted.fit.settings['alpha'];
    const base = typeof alpha === 'number' ? alpha : 0.1;
    expect(themeAlphaOf(study, fitted)).toEqual([base, base]);
    expect(themeAlphaOf(studyOf([theme('sea'), theme('young'), merged]), fitted)).toEqual([
      2 * base,
      base,
    ]);
    expect(themeAlphaOf(studyOf([theme('sea'), later]), fitted)).toEqual([base, base]);
  });
});

describe('a rejected passage', () => {
  test('is not put forward for the theme that its words had to go to', () => {
    // Rejecting shuts the first theme out; the re-fit gives all of the passage to the other.
    const before = fittedWith([]);
    const strong = before.theta[0] > 0.5 ? 0 : 1;
    const [rejected, other] = strong === 0 ? ['sea', 'young'] : ['young', 'sea'];
    const fitted = fittedWith([{ passage: 0, theme: strong, value: 0 }]);
    expect(fitted.theta[1 - strong]).toBe(1);
    const made = coding('c', {
      transcript: 'one',
      span: { start: 0, end: 70 },
      theme: rejected,
      standing: 'rejected',
    });
    const withRejection: Study = { ...study, codings: new Map([['one', new Map([['c', made]])]]) };
    const limits = { strength: 0.5, countedWords: 1 };
    const offered = (of: Study): string[] =>
      suggestions(of, fitted, limits)
        .filter(({ passage }) => passage === 0)
        .map((one) => one.theme);
    expect(offered(study)).toEqual([other]);
    expect(offered(withRejection)).toEqual([]);
  });
});

describe('what enters no prior', () => {
  const span = { start: 0, end: 70 };
  const made = coding('c', { transcript: 'one', span, theme: 'sea' });
  const there = new Map([['one', { ...harbour, id: 'one' }]]);
  const coded: Study = {
    ...study,
    transcripts: there,
    codings: new Map([['one', new Map([['c', made]])]]),
  };
  const cold = draw('cold', { kind: 'cold sample', places: [{ transcript: 'one', span }] });

  test('is a mark that no theme applies', () => {
    const marked = none('n', { transcript: 'one', span });
    expect(
      decisions({
        ...study,
        transcripts: there,
        nones: new Map([['one', new Map([['n', marked]])]]),
      }),
    ).toEqual([]);
  });

  test('is a decision in a cold sample, and nothing is suggested there, until it is scored', () => {
    const held: Study = { ...coded, draws: new Map([['cold', cold]]) };
    const scored = { fit: 'f', reader: 'ada', at: '' };
    const free: Study = { ...coded, draws: new Map([['cold', { ...cold, scored }]]) };
    const random: Study = {
      ...coded,
      draws: new Map([['cold', { ...cold, kind: 'random draw' as const }]]),
    };
    expect(decisions(held)).toEqual([]);
    expect(decisions(free)).toHaveLength(1);
    expect(decisions(random)).toHaveLength(1);
    const fitted = fittedWith([]);
    const at = (of: Study): number[] =>
      suggestions(of, fitted, { strength: 0.3, countedWords: 1 }).map(({ passage }) => passage);
    expect(at({ ...study, draws: new Map([['cold', cold]]) })).not.toContain(0);
    expect(at(study)).toContain(0);
  });
});
