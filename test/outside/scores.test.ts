import { describe, expect, it } from 'vitest';
import {
  adjustedRand,
  cosine,
  hellinger,
  jensenShannon,
  matching,
  normalisedMutualInformation,
  npmi,
  occurrences,
  purity,
  rand,
  totalVariation,
  umass,
  variationOfInformation,
} from '../../engine/model/index.ts';
import { countsOf } from '../engine/model/planted.ts';
import coherence from './values/coherence.json' with { type: 'json' };
import values from './values/matching.json' with { type: 'json' };

// values/matching.json: scipy's documented examples and brute force; scikit-learn's metrics; Rand
// after Yeung & Ruzzo 2001; purity .71, NMI .36, Rand .68 after Manning, Raghavan & Schütze 2008,
// figure 16.4; variation of information after Meilă 2007. values/coherence.json: gensim 4.2.0, Mimno
// et al. 2011, Bouma 2009.

describe('best matching', () => {
  for (const { name, cost, columns, rows, total, optima } of values.matching) {
    it(`${name}: costs ${total}`, () => {
      const height = cost.length;
      const width = cost[0].length;
      const found = matching(cost.flat(), height, width);
      const taken = [...found].filter((column) => column >= 0);
      expect(new Set(taken).size).toBe(taken.length);
      expect(taken.length).toBe(Math.min(height, width));
      expect([...found].reduce((sum, c, r) => sum + (c < 0 ? 0 : cost[r][c]), 0)).toBe(total);
      if (optima === 1) rows.forEach((row, i) => expect(found[row]).toBe(columns[i]));
    });
  }
});

describe('agreement of partitions', () => {
  for (const given of values.partitions) {
    it(given.name, () => {
      const { a, b } = given;
      expect(rand(a, b)).toBeCloseTo(given.rand, 9);
      expect(adjustedRand(a, b)).toBeCloseTo(given.adjustedRand, 9);
      expect(normalisedMutualInformation(a, b)).toBeCloseTo(given.normalisedMutualInformation, 9);
      expect(variationOfInformation(a, b)).toBeCloseTo(given.variationOfInformation, 9);
      if (given.purity !== undefined) expect(purity(b, a)).toBeCloseTo(given.purity, 9);
    });
  }

  it('gives the published figures of the information retrieval textbook', () => {
    const { a, b } = values.partitions.find(({ name }) => name.startsWith('Manning'))!;
    expect(purity(b, a)).toBeCloseTo(0.71, 2);
    expect(normalisedMutualInformation(b, a)).toBeCloseTo(0.36, 2);
    expect(rand(b, a)).toBeCloseTo(0.68, 2);
  });
});

describe('distances of distributions', () => {
  values.distances.forEach((given, i) => {
    it(`pair ${i + 1}`, () => {
      expect(jensenShannon(given.p, given.q)).toBeCloseTo(given.jensenShannon, 12);
      expect(hellinger(given.p, given.q)).toBeCloseTo(given.hellinger, 12);
      expect(totalVariation(given.p, given.q)).toBeCloseTo(given.totalVariation, 12);
      expect(cosine(given.p, given.q)).toBeCloseTo(given.cosine, 12);
    });
  });
});

describe('coherence', () => {
  const vocabulary = [...new Set(coherence.docs.flat())].sort();
  const rows = coherence.docs.map((doc) => {
    const row = new Map<number, number>();
    for (const word of doc)
      row.set(vocabulary.indexOf(word), (row.get(vocabulary.indexOf(word)) ?? 0) + 1);
    return row;
  });
  const where = occurrences(countsOf(rows, vocabulary.length));
  coherence.topics.forEach((topic, i) => {
    it(`of ${topic.join(', ')}`, () => {
      const words = topic.map((word) => vocabulary.indexOf(word));
      expect(umass(where, words)).toBeCloseTo(coherence.umass[i], 10);
      expect(npmi(where, words)).toBeCloseTo(coherence.npmi[i], 10);
      // gensim adds 1e-12 to every joint probability, which shows only where a pair never meets.
      if (!coherence.npmiPairs[i].includes(-1)) {
        expect(npmi(where, words)).toBeCloseTo(coherence.gensimNpmi[i], 10);
      }
    });
  });
});
