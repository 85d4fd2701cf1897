import { describe, expect, it } from 'vitest';
import {
  concentration,
  sameQuestion,
  unexplainedPassages,
} from '../../../engine/evidence/index.ts';

describe('concentration', () => {
  const theta = Float32Array.of(1, 0, 0.5, 0.5, 0, 1, 0.25, 0.75);
  const words = [10, 20, 30, 40];
  const leads = [0, 0, 1, 1];

  it('is the share of a theme’s expected words in its largest group, and the groups it leads in', () => {
    const [first, second] = concentration(['a', 'b', 'b', 'c'], words, theta, leads, 2);
    // Theme 1: 10 + 10 + 0 + 10; theme 2: 0 + 10 + 30 + 30.
    expect(first).toEqual({ most: 'a', share: expect.closeTo(1 / 3, 12), led: 2 });
    expect(second).toEqual({ most: 'b', share: expect.closeTo(4 / 7, 12), led: 2 });
  });

  it('counts words outside all groups in the whole, and in no group', () => {
    const [, second] = concentration([null, null, 'b', null], words, theta, leads, 2);
    expect(second).toEqual({ most: 'b', share: expect.closeTo(3 / 7, 12), led: 1 });
  });

  it('is nothing for a theme without words, and without groups', () => {
    const none = { most: null, share: 0, led: 0 };
    expect(concentration(['a'], [5], Float32Array.of(1, 0), [0], 2)[1]).toEqual(none);
    expect(concentration([null], [5], Float32Array.of(1, 0), [0], 2)[0]).toEqual(none);
  });
});

describe('sameQuestion', () => {
  const asked = (text: string): string | null =>
    sameQuestion(text, { start: 0, end: text.length }, 'eng');

  it('is the same for one wording, whatever its capitals, spaces and marks', () => {
    expect(asked('How did you get there?')).toBe('how did you get there');
    expect(asked('  how did you\nget there …')).toBe(asked('How did you get there?'));
    expect(asked('How did she get there?')).not.toBe(asked('How did you get there?'));
  });

  it('is none without a question or without words', () => {
    expect(sameQuestion('text', null, 'eng')).toBe(null);
    expect(asked('[pause] …')).toBe(null);
  });
});

describe('unexplainedPassages', () => {
  it('lists the worst first, ties in order, and passes over those with too few words', () => {
    expect(unexplainedPassages([3, 9, 5, 5, 8], [20, 2, 20, 20, 20], 8, 3)).toEqual([
      { passage: 4, surprise: 8 },
      { passage: 2, surprise: 5 },
      { passage: 3, surprise: 5 },
    ]);
    expect(unexplainedPassages([0], [0], 0, 5)).toEqual([]);
  });
});
