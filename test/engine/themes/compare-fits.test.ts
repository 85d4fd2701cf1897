import { describe, expect, test } from 'vitest';
import { compareFits } from '../../../engine/themes/index.ts';
import { fittedOf, previousOf, wordsOf } from './scene.ts';

const rows = { one: ['boat'], three: ['school'], two: ['boat'] };
const words = wordsOf(rows);
const sea = [0.75, 0.25];
const young = [0.25, 0.75];
const first = fittedOf(
  previousOf(
    ['sea', 'young'],
    words,
    [
      [0.75, 0.25],
      [0.25, 0.75],
      [0.75, 0.25],
    ],
    [sea, young],
  ),
);

describe('two fits side by side', () => {
  test('a fit agrees with itself altogether', () => {
    const { pairs, agreement, adjustedRand, compared } = compareFits(first, first);
    expect(pairs.map((pair) => [pair.first, pair.second, pair.cosine])).toEqual([
      [0, 0, expect.closeTo(1, 6)],
      [1, 1, expect.closeTo(1, 6)],
    ]);
    expect({ agreement, adjustedRand, compared }).toEqual({
      agreement: 1,
      adjustedRand: 1,
      compared: 3,
    });
  });

  test('themes are paired by their words, whatever their order and ids', () => {
    const second = fittedOf(
      previousOf(
        ['x', 'y', 'z'],
        words,
        [
          [0.125, 0.75, 0.125],
          [0.75, 0.125, 0.125],
          [0.75, 0.125, 0.125],
        ],
        [young, sea, [0.5, 0.5]],
      ),
    );
    const { pairs, onlyFirst, onlySecond, agreement } = compareFits(first, second);
    expect(pairs.map((pair) => [pair.first, pair.second])).toEqual([
      [0, 1],
      [1, 0],
    ]);
    expect(pairs.map(({ led }) => led)).toEqual([
      { first: 2, second: 1, both: 1 },
      { first: 1, second: 2, both: 1 },
    ]);
    expect([onlyFirst, onlySecond]).toEqual([[], [2]]);
    expect(agreement).toBeCloseTo(2 / 3, 12);
  });

  test('words and passages that one of them lacks are told', () => {
    const more = wordsOf({ ...rows, four: ['tide'] });
    const second = fittedOf(
      previousOf(
        ['x'],
        more,
        more.passages.map(() => [1]),
        [[0.5, 0.25, 0.25]],
      ),
    );
    const { compared, words: counted, onlyFirst, pairs } = compareFits(first, second);
    expect({ compared, counted }).toEqual({ compared: 3, counted: { both: 2, either: 3 } });
    expect(onlyFirst).toEqual([1]);
    // By hand: (.75 × .5 + .25 × .25) over the lengths √.625 and √.375.
    expect(pairs[0]?.cosine).toBeCloseTo(0.4375 / Math.sqrt(0.625 * 0.375), 6);
  });
});
