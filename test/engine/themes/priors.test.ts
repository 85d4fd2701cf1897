import { describe, expect, test } from 'vitest';
import { defaultFitSettings } from '../../../engine/model/index.ts';
import { defaultTextSettings } from '../../../engine/text/index.ts';
import { priorsOf } from '../../../engine/themes/priors.ts';
import type { FitJob, ModelledTheme } from '../../../engine/themes/index.ts';
import { previousOf, wordsOf } from './scene.ts';

const words = wordsOf({
  one: ['boat', 'boat', 'net', 'net'],
  two: ['school', 'school', 'net'],
});
const places = (word: string): number | undefined => {
  const place = words.vocabulary.indexOf(word);
  return place < 0 ? undefined : place;
};
const [boat, net, school] = [0, 1, 2];

function modelled(id: string, changes: Partial<ModelledTheme> = {}): ModelledTheme {
  return { id, pinned: false, seeds: [], shutOut: [], absorbed: [], ...changes };
}

function priors(themes: readonly ModelledTheme[], changes: Partial<FitJob> = {}) {
  const job: FitJob = {
    transcripts: [],
    text: defaultTextSettings,
    lists: {},
    model: defaultFitSettings,
    alpha: 0.1,
    eta: 0.2,
    seed: 1,
    themes,
    decisions: [],
    previous: null,
    pinnedFrom: null,
    ...changes,
  };
  return priorsOf(job, words, places);
}

const decided = (transcript: string, theme: string, applies: boolean, start = 0, end = 30) => ({
  transcript,
  theme,
  applies,
  span: { start, end },
});

describe('decisions become priors', () => {
  test('without any: the base values alone', () => {
    expect(priors([modelled('a'), modelled('b')])).toEqual({
      themes: 2,
      alpha: 0.1,
      eta: 0.2,
      themeAlpha: [],
      wordPriors: [],
      passagePriors: [],
      frozen: [],
    });
  });

  test('a seed raises its word in its theme; one that nobody says is passed over', () => {
    const { wordPriors } = priors([modelled('a'), modelled('b', { seeds: ['net', 'storm'] })]);
    expect(wordPriors).toHaveLength(1);
    expect(wordPriors[0]).toMatchObject({ theme: 1, word: net });
    expect(wordPriors[0].value).toBeGreaterThan(0.2);
  });

  test('a word shut out gets exactly zero', () => {
    const { wordPriors } = priors([modelled('a', { shutOut: ['boat'] }), modelled('b')]);
    expect(wordPriors).toEqual([{ theme: 0, word: boat, value: 0 }]);
  });

  test('what took others in starts with as many times the base of the proportions', () => {
    const { themeAlpha } = priors([modelled('a', { absorbed: ['x', 'y'] }), modelled('b')]);
    expect(themeAlpha).toHaveLength(1);
    expect(themeAlpha?.[0].theme).toBe(0);
    expect(themeAlpha?.[0].value).toBeCloseTo(0.3, 12);
  });

  test('confirmed gets as many prior words as the passage has counted ones, rejected zero', () => {
    const { passagePriors } = priors([modelled('a'), modelled('b')], {
      decisions: [decided('one', 'b', false), decided('one', 'a', true, 0, 40)],
    });
    expect(passagePriors).toEqual([
      { passage: 0, theme: 0, value: 4.1 },
      { passage: 0, theme: 1, value: 0 },
    ]);
  });

  test('a decision that covers less than half of the passage, and of itself, says nothing of it', () => {
    const { passagePriors } = priors([modelled('a'), modelled('b')], {
      decisions: [decided('one', 'a', true, 30, 90)],
    });
    expect(passagePriors).toEqual([]);
  });

  test('where two readers differ, the one who found the theme is heard', () => {
    for (const order of [
      [true, false],
      [false, true],
    ]) {
      const { passagePriors } = priors([modelled('a'), modelled('b')], {
        decisions: order.map((applies) => decided('two', 'a', applies)),
      });
      expect(passagePriors).toEqual([{ passage: 1, theme: 0, value: 3.1 }]);
    }
  });

  test('a passage with every theme rejected keeps its plain prior', () => {
    const { passagePriors } = priors([modelled('a'), modelled('b')], {
      decisions: [decided('one', 'a', false), decided('one', 'b', false)],
    });
    expect(passagePriors).toEqual([]);
  });

  test('decisions on themes that are not modelled are passed over', () => {
    const { passagePriors } = priors([modelled('a')], { decisions: [decided('one', 'z', true)] });
    expect(passagePriors).toEqual([]);
  });

  test('a pinned theme keeps the words of the fit that is given, or those that are remembered of it', () => {
    const pinnedFrom = previousOf(
      ['b', 'a'],
      words,
      [
        [0.5, 0.5],
        [0.5, 0.5],
      ],
      [
        [0.25, 0.25, 0.5],
        [0.5, 0.25, 0.25],
      ],
    );
    const themes = [
      modelled('a', { pinned: true }),
      modelled('b'),
      modelled('c', { pinned: true }),
    ];
    expect(priors(themes, { pinnedFrom }).frozen).toEqual([
      { theme: 0, phi: Float32Array.of(0.5, 0.25, 0.25) },
    ]);
    expect(priors(themes).frozen).toEqual([]);
    const remembered = [{ theme: 'c', vocabulary: ['school'], phi: Float32Array.of(1) }];
    expect(priors(themes, { pinnedFrom, remembered }).frozen[1]).toEqual({
      theme: 2,
      phi: Float32Array.of(0, 0, 1),
    });
    expect(school).toBe(2);
  });
});
