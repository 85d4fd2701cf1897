import { describe, expect, it } from 'vitest';
import { shuffled } from '../../../engine/evidence/index.ts';
import { countsOfTable } from '../model/planted.ts';
import { planted } from './spoken.ts';

const { counts } = planted;

function totals(of: typeof counts): { passages: number[]; words: number[] } {
  const passages = new Array<number>(of.passages).fill(0);
  const words = new Array<number>(of.words).fill(0);
  for (let d = 0; d < of.passages; d++) {
    for (let j = of.offsets[d]; j < of.offsets[d + 1]; j++) {
      passages[d] += of.counts[j];
      words[of.indices[j]] += of.counts[j];
    }
  }
  return { passages, words };
}

describe('shuffled words', () => {
  it('leave every passage as long and every word as common as it was', () => {
    expect(totals(shuffled(counts, 3))).toEqual(totals(counts));
  });

  it('keep empty passages empty, and indices ascending within each passage', () => {
    const dealt = shuffled(
      countsOfTable([
        [2, 0, 1],
        [0, 0, 0],
        [0, 4, 1],
      ]),
      1,
    );
    expect(dealt.offsets[2] - dealt.offsets[1]).toBe(0);
    for (let d = 0; d < dealt.passages; d++) {
      const row = dealt.indices.slice(dealt.offsets[d], dealt.offsets[d + 1]);
      expect([...row]).toEqual([...new Set(row)].sort((a, b) => a - b));
    }
  });

  it('follow from the seed', () => {
    expect(shuffled(counts, 3)).toEqual(shuffled(counts, 3));
    expect(shuffled(counts, 3).indices).not.toEqual(shuffled(counts, 4).indices);
    expect(shuffled(counts, 3).indices).not.toEqual(counts.indices);
  });

  it('do not stay together: no passage keeps more of its own words than chance gives it', () => {
    const dealt = shuffled(counts, 9);
    let shared = 0;
    for (let d = 0; d < counts.passages; d++) {
      const own = new Set(counts.indices.slice(counts.offsets[d], counts.offsets[d + 1]));
      for (let j = dealt.offsets[d]; j < dealt.offsets[d + 1]; j++) {
        if (own.has(dealt.indices[j])) shared++;
      }
    }
    let other = 0;
    for (let d = 0; d < counts.passages; d++) {
      const e = (d + 1) % counts.passages;
      const own = new Set(counts.indices.slice(counts.offsets[e], counts.offsets[e + 1]));
      for (let j = dealt.offsets[d]; j < dealt.offsets[d + 1]; j++) {
        if (own.has(dealt.indices[j])) other++;
      }
    }
    expect(Math.abs(shared - other)).toBeLessThan(0.05 * other);
  });
});
