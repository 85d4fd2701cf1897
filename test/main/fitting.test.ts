import { describe, expect, test } from 'vitest';
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

  test('comes out otherwise where what is said of it is not what it was made from', async () => {
    const desk = await talkingDesk();
    const fit = await fitAt(desk, 'from scratch');
    const { stored, again } = madeAgain(desk, fit, { start: { ...fit.start, seed: 99 } });
    expect(again).not.toEqual(stored);
  });
});
