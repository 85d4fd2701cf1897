import { describe, expect, test } from 'vitest';
import { whatMoved } from '../../../engine/themes/index.ts';
import { theme } from '../study/scene.ts';
import { fittedOf, previousOf, studyOf, wordsOf } from './scene.ts';

const words = wordsOf({ four: [], one: ['boat', 'net'], three: ['net'], two: ['net', 'school'] });
const even = [0.5, 0.5];
const phi = [
  [0.5, 0.375, 0.125],
  [0.125, 0.375, 0.5],
];
const before = fittedOf(
  previousOf(['sea', 'young'], words, [even, [0.75, 0.25], [0.5625, 0.4375], [0.25, 0.75]], phi),
);
const study = studyOf([theme('sea'), theme('young')]);

function after(theta: number[][], newPhi = phi, themes = ['sea', 'young'], now = words) {
  return fittedOf(previousOf(themes, now, theta, newPhi));
}

describe('what moved between two fits', () => {
  test('nothing between a fit and itself', () => {
    expect(whatMoved(study, before, before)).toEqual({
      passages: [],
      themes: [],
      appeared: [],
      gone: [],
      compared: 3,
    });
  });

  test('a passage whose leading theme changed, with the strengths of both', () => {
    const now = after([even, [0.25, 0.75], [0.5625, 0.4375], [0.25, 0.75]]);
    expect(whatMoved(study, before, now).passages).toEqual([
      {
        passage: 1,
        from: 'sea',
        to: 'young',
        strengths: { fromBefore: 0.75, fromAfter: 0.25, toBefore: 0.25, toAfter: 0.75 },
      },
    ]);
  });

  test('not where the lead changed by a hair, nor where the lead stayed', () => {
    const now = after([even, [0.5625, 0.4375], [0.4375, 0.5625], [0, 1]]);
    expect(whatMoved(study, before, now).passages).toEqual([]);
  });

  test('not a passage without counted words', () => {
    const now = after([
      [0, 1],
      [0.75, 0.25],
      [0.5625, 0.4375],
      [0.25, 0.75],
    ]);
    expect(whatMoved(study, before, now)).toMatchObject({ passages: [], compared: 3 });
  });

  test('words that a theme gained and lost among its first ones', () => {
    const other = [
      [0.125, 0.375, 0.5],
      [0.125, 0.375, 0.5],
    ];
    const now = after([even, [0.75, 0.25], [0.5625, 0.4375], [0.25, 0.75]], other);
    const moved = whatMoved(study, before, now, { totalVariation: 0.2, words: 2 });
    expect(moved.themes).toEqual([{ theme: 'sea', gained: ['school'], lost: ['boat'] }]);
  });

  test('themes that only one of the two has', () => {
    const now = after([even, [0.75, 0.25], [0.5625, 0.4375], [0.25, 0.75]], phi, ['sea', 'new']);
    const more = studyOf([theme('sea'), theme('young'), theme('new')]);
    expect(whatMoved(more, before, now)).toMatchObject({ appeared: ['new'], gone: ['young'] });
  });

  test('a merge moves nothing by itself: what was led by either is led by the one that stays', () => {
    const merged = studyOf([theme('sea'), theme('young', { mergedInto: 'sea' })]);
    const now = after([[1], [1], [1], [1]], [[0.25, 0.375, 0.375]], ['sea']);
    expect(whatMoved(merged, before, now)).toMatchObject({ passages: [], appeared: [], gone: [] });
  });

  test('passages are matched by their place in the text', () => {
    const fewer = wordsOf({ one: ['boat', 'net'], two: ['net', 'school', 'school'] });
    const now = after(
      [
        [0.25, 0.75],
        [0.25, 0.75],
      ],
      phi,
      ['sea', 'young'],
      fewer,
    );
    const moved = whatMoved(study, before, now);
    expect(moved.compared).toBe(1);
    expect(moved.passages.map(({ passage }) => passage)).toEqual([0]);
  });
});
