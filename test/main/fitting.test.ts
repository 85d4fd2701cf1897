import { describe, expect, test } from 'vitest';
import { recordSplit, trySplit } from '../../main/splitting.ts';
import { wordLists } from '../../main/word-lists.ts';
import { askedFor, codingOn, decide, fitAt, madeAgain, talkingDesk } from './fitted-desk.ts';

describe('a stored fit', () => {
  test('of any kind is made again from what is stored, bit for bit', async () => {
    const desk = await talkingDesk();
    const first = await fitAt(desk, 'from scratch');
    const [one, two, three, four] = first.themes;
    decide(
      desk,
      { kind: 'themeRenamed', theme: one, from: null, to: 'First' },
      { kind: 'wordSeeded', theme: one, word: 'nurse' },
      { kind: 'wordShutOut', theme: two, word: 'bus' },
      { kind: 'themePinned', theme: three },
      codingOn(desk, 0, two),
      codingOn(desk, 1, one, 'rejected'),
    );
    const second = await fitAt(desk, 're-fit');
    decide(
      desk,
      { kind: 'themeAdded', theme: askedFor('asked', 'Asked for') },
      { kind: 'wordSeeded', theme: 'asked', word: 'bees' },
      { kind: 'themeRenamed', theme: four, from: null, to: 'Fourth' },
      { kind: 'themeSetAside', theme: four },
    );
    const third = await fitAt(desk, 're-fit');
    decide(
      desk,
      { kind: 'themeBroughtBack', theme: four },
      { kind: 'themesMerged', into: one, from: [two] },
    );
    const fourth = await fitAt(desk, 're-fit');
    const fifth = await fitAt(desk, 'from scratch', { themes: 5 });
    expect(fourth.themes).toContain(four);
    for (const fit of [first, second, third, fourth, fifth]) {
      const { stored, again } = madeAgain(desk, fit);
      expect(again).toEqual(stored);
    }
  });

  test('of the full answer behind a quick one, and of a split, is made again as well', async () => {
    const desk = await talkingDesk(4, { themes: 2 });
    const quick = await fitAt(desk, 'from scratch', { answer: 'quick' });
    decide(desk, { kind: 'wordShutOut', theme: quick.themes[0], word: 'bus' });
    const full = await fitAt(desk, 'refinement', { answer: 'full' });
    expect(full.themes).toEqual(quick.themes);
    decide(desk, codingOn(desk, 3, full.themes[1]), codingOn(desk, 4, full.themes[0], 'rejected'));
    const tried = await trySplit(desk, full.themes[1], wordLists);
    if (!tried.ok) throw new Error(tried.code);
    const split = recordSplit(desk, tried.value);
    if (!split.ok) throw new Error(split.code);
    // Others keep their words exactly.
    const before = desk.fitted(full.id);
    const after = desk.fitted(split.value.id);
    const size = before.words.vocabulary.length;
    expect(after.phi.slice(0, size)).toEqual(before.phi.slice(0, size));
    const last = await fitAt(desk, 're-fit');
    for (const fit of [quick, full, split.value, last]) {
      const { stored, again } = madeAgain(desk, fit);
      expect(again).toEqual(stored);
    }
    // The words were the same throughout, so they are stored once.
    expect(new Set([full, split.value, last].map(({ words }) => words.sequence)).size).toBe(1);
  });

  test('comes out otherwise where what is said of it is not what it was made from', async () => {
    const desk = await talkingDesk();
    const fit = await fitAt(desk, 'from scratch');
    const { stored, again } = madeAgain(desk, fit, { start: { ...fit.start, seed: 99 } });
    expect(again).not.toEqual(stored);
  });
});
