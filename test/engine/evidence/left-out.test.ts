import { describe, expect, it } from 'vitest';
import { dealt, leftOut, leftOutEach } from '../../../engine/evidence/index.ts';

const thirteen = Array.from({ length: 13 }, (_, i) => 2 * i);

describe('who is left out', () => {
  it('is a fifth of the people, and one at least', () => {
    expect([4, 5, 7, 8, 13, 60].map(leftOutEach)).toEqual([1, 1, 1, 2, 3, 12]);
    for (const out of leftOut(thirteen, 20, 1)) expect(out).toHaveLength(3);
  });

  it('is nobody twice in one re-fit, and everybody as often as the others to within one time', () => {
    for (const seed of [0, 1, 2, 3, 4]) {
      const times = new Map<number, number>();
      for (const out of leftOut(thirteen, 17, seed)) {
        expect(new Set(out).size).toBe(out.length);
        expect(out.every((person) => thirteen.includes(person))).toBe(true);
        for (const person of out) times.set(person, (times.get(person) ?? 0) + 1);
      }
      const counted = thirteen.map((person) => times.get(person) ?? 0);
      expect(Math.max(...counted) - Math.min(...counted)).toBeLessThanOrEqual(1);
    }
  });

  it('follows from the seed, and one more re-fit changes none of those before', () => {
    expect(leftOut(thirteen, 9, 5)).toEqual(leftOut(thirteen, 10, 5).slice(0, 9));
    expect(leftOut(thirteen, 9, 5)).not.toEqual(leftOut(thirteen, 9, 6));
  });
});

describe('people dealt into groups', () => {
  it('stand in one group each, and the groups are as equal as can be', () => {
    const groups = dealt(thirteen, 5, 1);
    expect(groups.flat().sort((a, b) => a - b)).toEqual(thirteen);
    expect(groups.map((group) => group.length).sort()).toEqual([2, 2, 3, 3, 3]);
  });
});
