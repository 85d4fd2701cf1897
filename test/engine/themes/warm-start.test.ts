import { describe, expect, test } from 'vitest';
import { phiInVocabulary, warmStart } from '../../../engine/themes/warm-start.ts';
import type { ModelledTheme } from '../../../engine/themes/index.ts';
import { previousOf, wordsOf } from './scene.ts';

const words = wordsOf({ one: ['boat', 'boat', 'net', 'net'], two: ['net', 'school'] });
const previous = previousOf(
  ['sea', 'young', 'rest'],
  words,
  [
    [0.5, 0.25, 0.25],
    [0.25, 0.5, 0.25],
  ],
  [
    [0.5, 0.25, 0.25],
    [0.125, 0.125, 0.75],
    [0.25, 0.5, 0.25],
  ],
);

function modelled(id: string, ...absorbed: string[]): ModelledTheme {
  return { id, pinned: false, seeds: [], shutOut: [], absorbed };
}

function start(themes: readonly ModelledTheme[], now = words) {
  const started = warmStart(themes, now, previous, []);
  if (started.kind !== 'warm') throw new Error(started.kind);
  return started;
}

const rows = (flat: Float32Array, width: number): number[][] =>
  Array.from({ length: flat.length / width }, (_, i) => [
    ...flat.subarray(i * width, (i + 1) * width),
  ]);

describe('a re-fit starts where the last fit ended', () => {
  test('with the same themes: its very bits, each theme held', () => {
    const same = start([modelled('sea'), modelled('young'), modelled('rest')]);
    expect(same.theta).toEqual(previous.theta);
    expect(same.phi).toEqual(previous.phi);
    expect(same.hold).toEqual(Float32Array.of(1, 1, 1));
  });

  test('rows follow ids, whatever their order', () => {
    const { theta, phi } = start([modelled('rest'), modelled('sea'), modelled('young')]);
    expect(rows(theta, 3)).toEqual([
      [0.25, 0.5, 0.25],
      [0.25, 0.25, 0.5],
    ]);
    expect(rows(phi, 3)[1]).toEqual([0.5, 0.25, 0.25]);
  });

  test('a theme that is gone leaves its part to the others', () => {
    const { theta } = start([modelled('sea'), modelled('rest')]);
    const [one, two] = rows(theta, 2);
    expect(one[0]).toBeCloseTo(2 / 3, 6);
    expect(two[0]).toBeCloseTo(1 / 2, 6);
  });

  test('a theme that was set aside starts from the words remembered of it, and is held to them', () => {
    const remembered = [
      {
        theme: 'back',
        vocabulary: ['net', 'oar', 'school'],
        phi: Float32Array.of(0.25, 0.5, 0.25),
      },
    ];
    const started = warmStart([modelled('sea'), modelled('back')], words, previous, [], remembered);
    if (started.kind !== 'warm') throw new Error(started.kind);
    // Nobody says "oar" any more; what is left sums to 1. The vocabulary: boat, net, school.
    expect(rows(started.phi, 3)[1]).toEqual([0, 0.5, 0.5]);
    expect(started.hold).toEqual(Float32Array.of(1, 1));
  });

  test('what is remembered of a theme that the last fit knows is not used', () => {
    const remembered = [{ theme: 'sea', vocabulary: ['net'], phi: Float32Array.of(1) }];
    const started = warmStart([modelled('sea')], words, previous, [], remembered);
    if (started.kind !== 'warm') throw new Error(started.kind);
    expect(started.phi).toEqual(previous.phi.slice(0, 3));
  });

  test('a new theme starts as the average of all words, with an even part, held by nothing', () => {
    const { theta, phi, hold } = start([
      modelled('sea'),
      modelled('young'),
      modelled('rest'),
      modelled('new'),
    ]);
    const average = rows(phi, 3)[3];
    [2 / 6, 3 / 6, 1 / 6].forEach((share, word) => expect(average[word]).toBeCloseTo(share, 6));
    for (const row of rows(theta, 4)) {
      expect(row[3]).toBeCloseTo(0.25 / 1.25, 6);
      expect(row.reduce((sum, value) => sum + value, 0)).toBeCloseTo(1, 6);
    }
    expect(hold).toEqual(Float32Array.of(1, 1, 1, 0));
  });

  test('a merged theme takes the proportions of both, and their words by size', () => {
    const { theta, phi, hold } = start([modelled('sea', 'young'), modelled('rest')]);
    expect(rows(theta, 2)).toEqual([
      [0.75, 0.25],
      [0.75, 0.25],
    ]);
    // Expected words: sea 4 x .5 + 2 x .25 = 2.5, young 4 x .25 + 2 x .5 = 2.
    const mixed = [0.5, 0.25, 0.25].map(
      (value, word) => (2.5 * value + 2 * [0.125, 0.125, 0.75][word]) / 4.5,
    );
    rows(phi, 3)[0].forEach((value, word) => expect(value).toBeCloseTo(mixed[word], 6));
    expect(hold).toEqual(Float32Array.of(1, 1));
  });

  test('a passage that the fit did not know starts even', () => {
    const more = wordsOf({
      one: ['boat', 'boat', 'net', 'net'],
      three: ['school'],
      two: ['net', 'school'],
    });
    const { theta } = start([modelled('sea'), modelled('young'), modelled('rest')], more);
    const [one, three, two] = rows(theta, 3);
    expect([one, two]).toEqual([
      [0.5, 0.25, 0.25],
      [0.25, 0.5, 0.25],
    ]);
    for (const value of three) expect(value).toBeCloseTo(1 / 3, 6);
  });
});

describe('a vocabulary that changed', () => {
  test('words keep their shares among those that stay; new ones start at zero', () => {
    const other = ['boat', 'ferry', 'net'];
    expect([...phiInVocabulary(previous, 0, other)]).toEqual([
      Math.fround(2 / 3),
      0,
      Math.fround(1 / 3),
    ]);
  });

  test('where none of the words stay every word is as likely', () => {
    expect([...phiInVocabulary(previous, 0, ['x', 'y'])]).toEqual([0.5, 0.5]);
  });
});
