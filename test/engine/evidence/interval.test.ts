import { describe, expect, it } from 'vitest';
import { alike, atMost, calibration, wilson } from '../../../engine/evidence/index.ts';

describe('the score interval of a share', () => {
  // Newcombe 1998, Statistics in Medicine 17:857-872, table I, method 3 (from memory).
  it.each([
    [81, 263, 0.2553, 0.3662],
    [15, 148, 0.0624, 0.1605],
    [0, 20, 0, 0.1611],
    [1, 29, 0.0061, 0.1718],
    [29, 29, 0.883, 1],
  ])('of %i in %i is as published', (count, of, low, high) => {
    expect(wilson(count, of).low).toBeCloseTo(low, 4);
    expect(wilson(count, of).high).toBeCloseTo(high, 4);
  });

  it('mirrors itself when found and not found change places', () => {
    for (const [count, of] of [
      [3, 10],
      [0, 7],
      [31, 40],
    ]) {
      const { low, high } = wilson(count, of);
      const other = wilson(of - count, of);
      expect(other.low).toBeCloseTo(1 - high, 12);
      expect(other.high).toBeCloseTo(1 - low, 12);
    }
  });

  it('refuses what is no count', () => {
    expect(() => wilson(0, 0)).toThrow(/wilson: of is 0/u);
    expect(() => wilson(3, 2)).toThrow(/wilson: count is 3/u);
    expect(() => wilson(0.5, 2)).toThrow(/wilson: count is 0.5/u);
  });
});

describe('the most that may be missed', () => {
  // Hanley & Lippman-Hand 1983, JAMA 249:1743-1745: none found of n leaves at most about 3 / n
  // (from memory); its exact value is 1 - .05^(1/n).
  it.each([
    [10, 0.26],
    [20, 0.14],
    [30, 0.1],
    [60, 0.05],
    [100, 0.03],
  ])('where none was found in %i is about three in as many', (of, published) => {
    expect(atMost(0, of)).toBeCloseTo(published, 2);
    expect(atMost(0, of)).toBeLessThan(3 / of);
    expect(atMost(0, of)).toBeCloseTo(1 - Math.pow(0.05, 1 / of), 12);
  });

  // 95 % points of the beta distribution with count + 1 and of - count (Clopper & Pearson 1934), by
  // scipy 1.10: scipy.stats.beta.ppf(.95, count + 1, of - count).
  it.each([
    [1, 10, 0.39416330243650466],
    [2, 60, 0.10123589492416163],
    [5, 100, 0.1022533776432745],
    [3, 1000, 0.007735244718479458],
    [59, 60, 0.9991454770730508],
  ])('where %i were found in %i is the exact binomial bound', (count, of, value) => {
    expect(atMost(count, of)).toBeCloseTo(value, 11);
  });

  it('is everything where nothing was drawn, or all was found', () => {
    expect(atMost(0, 0)).toBe(1);
    expect(atMost(4, 4)).toBe(1);
  });
});

describe('strength set against decisions', () => {
  const judged = (strength: number, confirmed: boolean) => ({ strength, confirmed });

  it('says nothing below ten judged', () => {
    const nine = Array.from({ length: 9 }, () => judged(0.7, true));
    expect(calibration(nine)).toEqual({ judged: 9, confirmed: 9, bins: [] });
    expect(calibration([...nine, judged(0.7, false)]).bins).toHaveLength(1);
  });

  it('counts by tenths of strength, with the interval of each', () => {
    const all = [
      ...Array.from({ length: 40 }, (_, i) => judged(0.6 + i / 500, i < 31)),
      ...Array.from({ length: 5 }, () => judged(1, true)),
      judged(0.9, false),
    ];
    const { bins, ...sums } = calibration(all);
    expect(sums).toEqual({ judged: 46, confirmed: 36 });
    expect(bins).toEqual([
      { from: 0.6, to: 0.7, confirmed: 31, judged: 40, ...wilson(31, 40) },
      { from: 0.9, to: 1, confirmed: 5, judged: 6, ...wilson(5, 6) },
    ]);
    expect(alike({ bins }, 0.65)?.confirmed).toBe(31);
    expect(alike({ bins }, 1)?.judged).toBe(6);
    expect(alike({ bins }, 0.75)).toBeUndefined();
  });

  it('refuses a strength that is none', () => {
    expect(() => calibration([judged(1.2, true)])).toThrow(/strength is 1.2/u);
  });
});
