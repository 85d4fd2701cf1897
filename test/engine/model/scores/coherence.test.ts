import { describe, expect, it } from 'vitest';
import { npmi, occurrences, umass } from '../../../../engine/model/index.ts';
import { countsOfTable } from '../planted.ts';

describe('coherence of words', () => {
  // Word 0 in every passage; 1 and 2 always together; 3 only where 1 is not; 4 nowhere.
  const where = occurrences(
    countsOfTable([
      [1, 2, 1, 0, 0],
      [1, 1, 3, 0, 0],
      [2, 0, 0, 1, 0],
      [1, 0, 0, 5, 0],
    ]),
  );

  it('npmi is 1 for words always together, -1 for words never together', () => {
    expect(npmi(where, [1, 2])).toBeCloseTo(1, 12);
    expect(npmi(where, [1, 3])).toBe(-1);
    expect(npmi(where, [0, 1])).toBeCloseTo(0, 12);
  });

  it('stays a number for words that stand nowhere, single words and none', () => {
    expect(npmi(where, [1, 4])).toBe(-1);
    expect(npmi(where, [1])).toBe(0);
    expect(npmi(where, [])).toBe(0);
    expect(umass(where, [4, 1])).toBe(0);
    expect(umass(where, [])).toBe(0);
  });

  it('npmi does not hang on the order of the words, umass does', () => {
    expect(npmi(where, [0, 1, 2])).toBeCloseTo(npmi(where, [2, 1, 0]), 12);
    expect(umass(where, [0, 1])).toBeCloseTo(Math.log(3 / 4), 12);
    expect(umass(where, [1, 0])).toBeCloseTo(Math.log(3 / 2), 12);
  });
});
