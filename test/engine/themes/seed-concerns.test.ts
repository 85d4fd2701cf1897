import { describe, expect, test } from 'vitest';
import { seedConcern } from '../../../engine/themes/index.ts';
import { fittedOf, previousOf, wordsOf } from './scene.ts';

// Vocabulary: boat, day, net, tide. Each passage belongs to one theme altogether.
const words = wordsOf({
  one: ['boat', 'boat', 'boat', 'day'],
  three: ['tide', 'tide', 'day', 'tide'],
  two: ['net', 'net', 'day', 'net'],
});
const theta = [
  [1, 0, 0],
  [0, 1, 0],
  [0, 0, 1],
];
const fitted = fittedOf(
  previousOf(['sea', 'shore', 'work'], words, theta, [
    [0.75, 0.25, 0, 0],
    [0, 0.25, 0, 0.75],
    [0, 0.25, 0.75, 0],
  ]),
);

describe('a seed word before it is seeded', () => {
  test('that belongs to one theme is not spread', () => {
    expect(seedConcern(fitted, 0, [0])).toMatchObject({
      occurrences: 3,
      spread: 1,
      themes: 1,
      isSpread: false,
    });
  });

  test('that three themes use alike is spread over three', () => {
    const concern = seedConcern(fitted, 1, [0]);
    expect(concern?.spread).toBeCloseTo(3, 12);
    expect(concern).toMatchObject({ occurrences: 3, themes: 3 });
    expect(seedConcern(fitted, 1, [0], { spread: 2.9, part: 1 })?.isSpread).toBe(true);
  });

  test('would swallow a theme of which it would be a quarter or more', () => {
    // 4 words there already, and 3 that come: 3 of 7.
    const concern = seedConcern(fitted, 2, [0]);
    expect(concern?.part).toBeCloseTo(3 / 7, 12);
    expect(concern?.wouldSwallow).toBe(true);
    // 4 words there, of which 1 is the word already, and 2 that come: 3 of 6.
    expect(seedConcern(fitted, 1, [0])?.part).toBeCloseTo(3 / 6, 12);
    expect(seedConcern(fitted, 2, [0], { spread: 9, part: 0.5 })?.wouldSwallow).toBe(false);
  });

  test('for a new theme is set against a theme of middling size', () => {
    expect(seedConcern(fitted, 2, [])?.part).toBeCloseTo(3 / 7, 12);
  });

  test('that is not counted gives nothing', () => {
    expect(seedConcern(fitted, -1, [0])).toBeNull();
  });
});
