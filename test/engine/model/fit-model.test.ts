import { describe, expect, it } from 'vitest';
import { hash32 } from '../../../engine/numbers/index.ts';
import {
  adjustedRand,
  cosine,
  defaultFitSettings,
  fitModel,
  matchThemes,
  type Counts,
  type FitSettings,
  type ModelFit,
  type Priors,
  type Start,
} from '../../../engine/model/index.ts';
import { countsOfTable, plantedCorpus } from './planted.ts';

const settings: FitSettings = {
  ...defaultFitSettings,
  runs: 4,
  schedule: [
    { exponent: 0.75, sweeps: 10 },
    { exponent: 0.875, sweeps: 10 },
    { exponent: 1, sweeps: 15 },
  ],
};
const fresh: Start = { kind: 'fresh', seed: 1, leanings: [] };

function priors(themes: number, more: Partial<Priors> = {}): Priors {
  return { themes, alpha: 0.1, eta: 0.1, wordPriors: [], passagePriors: [], frozen: [], ...more };
}

function warm(fit: ModelFit, hold: number, leanings: Start['leanings'] = []): Start {
  const themes = fit.themeWords.length;
  return {
    kind: 'warm',
    theta: fit.theta,
    phi: fit.phi,
    leanings,
    hold: new Float32Array(themes).fill(hold),
  };
}

function leading(theta: Float32Array, themes: number): number[] {
  return Array.from({ length: theta.length / themes }, (_, d) => {
    const row = theta.subarray(d * themes, (d + 1) * themes);
    return row.indexOf(Math.max(...row));
  });
}

function firstWords(phi: Float32Array, theme: number, words: number, count: number): number[] {
  return Array.from({ length: words }, (_, w) => w)
    .sort((a, b) => phi[theme * words + b] - phi[theme * words + a] || a - b)
    .slice(0, count);
}

function occurrencesOf(counts: Counts, word: number): number {
  return counts.counts.reduce((n, count, j) => n + (counts.indices[j] === word ? count : 0), 0);
}

/** Sound in the ways that hold whatever was fitted. */
function expectSound(fit: ModelFit, counts: Counts, themes: number): void {
  expect(fit.theta.length).toBe(counts.passages * themes);
  expect(fit.phi.length).toBe(themes * counts.words);
  for (const array of [fit.theta, fit.phi, fit.themeWords, fit.unexplained]) {
    expect(array.every((value: number) => Number.isFinite(value) && value >= 0)).toBe(true);
  }
  for (let d = 0; d < counts.passages; d++) {
    const row = fit.theta.subarray(d * themes, (d + 1) * themes);
    expect(Math.abs(row.reduce((a, b) => a + b, 0) - 1)).toBeLessThan(1e-5);
  }
  for (let k = 0; k < themes && counts.words > 0; k++) {
    const row = fit.phi.subarray(k * counts.words, (k + 1) * counts.words);
    expect(Math.abs(row.reduce((a, b) => a + b, 0) - 1)).toBeLessThan(1e-4);
  }
  for (const value of Object.values(fit.boundTerms)) expect(Number.isFinite(value)).toBe(true);
  for (const point of fit.trace) {
    expect(point.bound === null || Number.isFinite(point.bound)).toBe(true);
    expect(point.likelihood === null || Number.isFinite(point.likelihood)).toBe(true);
    expect(Number.isFinite(point.change)).toBe(true);
  }
}

const planted = plantedCorpus(400, 500, 6, 50, 11);
const plain = fitModel(planted.counts, priors(6), fresh, settings);

describe('a fit from scratch', () => {
  it('is sound and finds planted themes, each above cosine .9', () => {
    expectSound(plain, planted.counts, 6);
    const { cosines } = matchThemes(planted.phi, plain.phi, 500);
    for (const cosine of cosines) expect(cosine).toBeGreaterThan(0.9);
  });

  it('gives each passage the theme it was mostly drawn from', () => {
    const truth = leading(Float32Array.from(planted.theta), 6);
    expect(adjustedRand(truth, leading(plain.theta, 6))).toBeGreaterThan(0.7);
  });

  it('gives equal bits for equal arguments, whatever was computed in between', () => {
    fitModel(planted.counts, priors(4), { ...fresh, seed: 5 }, { ...settings, runs: 1 });
    expect(fitModel(planted.counts, priors(6), fresh, settings)).toEqual(plain);
  });

  it('puts the largest theme first', () => {
    const sizes = [...plain.themeWords];
    const total = sizes.reduce((a, b) => a + b, 0);
    expect(total).toBeCloseTo(400 * 50, 0);
    // Sizes in the pool order them; the fold moves them a little.
    expect(sizes[0]).toBeGreaterThan(sizes[5]);
  });

  it('agrees with itself under another seed', () => {
    const other = fitModel(planted.counts, priors(6), { ...fresh, seed: 2 }, settings);
    expect(other.phi).not.toEqual(plain.phi);
    const { cosines } = matchThemes(plain.phi, other.phi, 500);
    for (const cosine of cosines) expect(cosine).toBeGreaterThan(0.97);
  });

  it('keeps the history of its first run, and the answer as the last point', () => {
    expect(plain.stopReason).toBe('schedule completed');
    expect(plain.sweeps).toBe(4 * 35);
    expect(plain.trace.map(({ sweep }) => sweep)).toEqual(
      Array.from({ length: 36 }, (_, i) => i + 1),
    );
    expect(plain.trace.flatMap(({ sweep, bound }) => (bound === null ? [] : [sweep]))).toEqual([
      10, 20, 30, 36,
    ]);
    const { words, proportions, distributions } = plain.boundTerms;
    expect(plain.trace[35].bound).toBeCloseTo(words + proportions + distributions, 6);
  });

  it('calls a passage of words from nowhere in its themes the least explained', () => {
    // The rarest words of all, together in one passage.
    const rare = Array.from({ length: 500 }, (_, w) => w).sort(
      (a, b) => occurrencesOf(planted.counts, a) - occurrencesOf(planted.counts, b),
    );
    const odd = new Map(rare.slice(0, 50).map((w) => [w, 1]));
    const table = Array.from({ length: 401 }, (_, d) => {
      const row = new Array<number>(500).fill(0);
      if (d === 400) for (const w of odd.keys()) row[w] = 1;
      else {
        for (let j = planted.counts.offsets[d]; j < planted.counts.offsets[d + 1]; j++) {
          row[planted.counts.indices[j]] = planted.counts.counts[j];
        }
      }
      return row;
    });
    const fit = fitModel(countsOfTable(table), priors(6), fresh, { ...settings, runs: 1 });
    expect(fit.unexplained.indexOf(Math.max(...fit.unexplained))).toBe(400);
  });
});

describe('decisions in a fit from scratch', () => {
  it('a seeded theme comes back in its own row with every seed of five or more among its first 15 words', () => {
    const { counts, phi } = planted;
    // For rows 0 to 4: two telling words of a planted theme, and rare words strewn over passages.
    const rare = Array.from({ length: 500 }, (_, w) => w).filter((w) => {
      const n = occurrencesOf(counts, w);
      return n >= 5 && n <= 10;
    });
    expect(rare.length).toBeGreaterThan(15);
    const leanings = [0, 1, 2, 3, 4].flatMap((theme) => [
      ...firstWords(Float32Array.from(phi), 5 - theme, 500, 2).map((word) => ({ theme, word })),
      ...rare.slice(theme * 3, theme * 3 + 3).map((word) => ({ theme, word })),
    ]);
    const wordPriors = leanings.map(({ theme, word }) => ({
      theme,
      word,
      value: 0.1 + Math.max(3, Math.min(20, 0.1 * occurrencesOf(counts, word))),
    }));
    const start: Start = { kind: 'fresh', seed: 1, leanings };
    const fit = fitModel(counts, priors(8, { wordPriors }), start, settings);
    expectSound(fit, counts, 8);
    for (const { theme, word } of leanings) {
      expect(firstWords(fit.phi, theme, 500, 15)).toContain(word);
    }
    const rows = matchThemes(phi, fit.phi, 500).partner;
    expect([...rows.slice(1)]).toEqual([4, 3, 2, 1, 0]);

    const again = fitModel(counts, priors(8, { wordPriors }), warm(fit, 1, leanings), settings);
    for (const { theme, word } of leanings) {
      expect(firstWords(again.phi, theme, 500, 15)).toContain(word);
    }
  });

  it('a word shut out has share exactly 0 in its theme, and the planted themes are still found', () => {
    const common = firstWords(plain.phi, 0, 500, 3);
    const wordPriors = common.map((word) => ({ theme: 2, word, value: 0 }));
    const fit = fitModel(planted.counts, priors(6, { wordPriors }), fresh, settings);
    expectSound(fit, planted.counts, 6);
    for (const word of common) expect(fit.phi[2 * 500 + word]).toBe(0);
    const { cosines } = matchThemes(planted.phi, fit.phi, 500);
    for (const cosine of cosines) expect(cosine).toBeGreaterThan(0.85);
  });

  it('a theme rejected in passages has share exactly 0 there', () => {
    const rejected = Array.from({ length: 100 }, (_, passage) => ({
      passage,
      theme: hash32(passage, 1, 1) % 6,
      value: 0,
    }));
    const fit = fitModel(planted.counts, priors(6, { passagePriors: rejected }), fresh, settings);
    expectSound(fit, planted.counts, 6);
    for (const { passage, theme } of rejected) expect(fit.theta[passage * 6 + theme]).toBe(0);
  });

  it('a confirmed theme leads its passages', () => {
    const truth = leading(Float32Array.from(planted.theta), 6);
    const confirmed = Array.from({ length: 40 }, (_, passage) => ({
      passage,
      theme: (truth[passage] + 1) % 6,
      value: 0.1 + 50,
    }));
    const fit = fitModel(planted.counts, priors(6, { passagePriors: confirmed }), fresh, settings);
    const leads = leading(fit.theta, 6);
    for (const { passage, theme } of confirmed) expect(leads[passage]).toBe(theme);
  });

  it('a passage with every theme rejected is taken as undecided', () => {
    const passagePriors = [0, 1, 2].map((theme) => ({ passage: 0, theme, value: 0 }));
    const counts = countsOfTable([
      [1, 2, 0],
      [0, 1, 1],
    ]);
    expectSound(fitModel(counts, priors(3, { passagePriors }), fresh, settings), counts, 3);
  });

  it('a pinned theme comes back bit for bit, and the others form around it', () => {
    const phi = plain.phi.slice(2 * 500, 3 * 500);
    const frozen = [{ theme: 4, phi }];
    const fit = fitModel(planted.counts, priors(6, { frozen }), fresh, settings);
    expectSound(fit, planted.counts, 6);
    expect(fit.phi.slice(4 * 500, 5 * 500)).toEqual(phi);
    const { cosines } = matchThemes(planted.phi, fit.phi, 500);
    for (const cosine of cosines) expect(cosine).toBeGreaterThan(0.85);
  });

  it('a word shut out of a pinned theme leaves its share to the theme’s other words', () => {
    const phi = plain.phi.slice(0, 500);
    const word = firstWords(plain.phi, 0, 500, 1)[0];
    const decided = priors(6, {
      frozen: [{ theme: 0, phi }],
      wordPriors: [{ theme: 0, word, value: 0 }],
    });
    const fit = fitModel(planted.counts, decided, fresh, { ...settings, runs: 1 });
    expect(fit.phi[word]).toBe(0);
    expectSound(fit, planted.counts, 6);
  });

  it('themes all pinned leave only the proportions to find: nothing moves', () => {
    const frozen = [0, 1, 2, 3, 4, 5].map((theme) => ({
      theme,
      phi: plain.phi.slice(theme * 500, (theme + 1) * 500),
    }));
    for (const start of [fresh, warm(plain, 1)]) {
      const fit = fitModel(planted.counts, priors(6, { frozen }), start, settings);
      expect(fit.phi).toEqual(plain.phi);
      expect(fit.theta).toEqual(plain.theta);
      expect(fit.sweeps).toBe(0);
    }
  });

  it('a word shut out everywhere and a theme without words do no harm', () => {
    const wordPriors = [
      ...[0, 1].map((theme) => ({ theme, word: 0, value: 0 })),
      ...[0, 1, 2].map((word) => ({ theme: 1, word, value: 0 })),
    ];
    const counts = countsOfTable([
      [3, 1, 0],
      [2, 0, 1],
    ]);
    const fit = fitModel(counts, priors(2, { wordPriors }), fresh, settings);
    expect([fit.phi[0], ...fit.phi.slice(3)]).toEqual([0, 0, 0, 0]);
    for (const array of [fit.theta, fit.phi, fit.unexplained]) {
      expect(array.every((value) => Number.isFinite(value))).toBe(true);
    }
    expect(Object.values(fit.boundTerms).every(Number.isFinite)).toBe(true);
  });
});

describe('a re-fit from the fit before', () => {
  it('keeps nearly all leading themes when nothing changed and themes are held', () => {
    const again = fitModel(planted.counts, priors(6), warm(plain, 1), settings);
    expectSound(again, planted.counts, 6);
    const before = leading(plain.theta, 6);
    const kept = leading(again.theta, 6).filter((theme, d) => theme === before[d]).length;
    expect(kept / 400).toBeGreaterThan(0.95);
  });

  it('judges itself settled by its likelihood, not before 20 sweeps, and stops at the limit', () => {
    const sweeps = (more: Partial<FitSettings>): [number, string] => {
      const given = { ...settings, ...more };
      const fit = fitModel(planted.counts, priors(6), warm(plain, 1), given);
      return [fit.sweeps, fit.stopReason];
    };
    expect(settings.sweepsAtLeast).toBe(20);
    expect(sweeps({ judgeEvery: 5, tolerance: 1e9 })).toEqual([20, 'converged']);
    expect(sweeps({ tolerance: -1e9 })).toEqual([40, 'sweep limit']);
    expect(sweeps({ sweepLimit: 3 })).toEqual([3, 'sweep limit']);
    // Going on pays while the likelihood rises: by default it stops between the two.
    expect(sweeps({})[0]).toBeGreaterThanOrEqual(20);
  });

  it('holds a theme where it was, the more the larger the share of its old counts', () => {
    // Other passages about other things: without a hold the themes leave their words.
    const { counts } = plantedCorpus(400, 500, 6, 50, 99);
    const kept = (hold: number): number => {
      const start = { ...warm(plain, hold), theta: new Float32Array(400 * 6) } as Start;
      const fit = fitModel(counts, priors(6), start, settings);
      const cosines = Array.from({ length: 6 }, (_, k) =>
        cosine(plain.phi, fit.phi, 500, k * 500, k * 500),
      );
      return cosines.reduce((a, b) => a + b, 0) / 6;
    };
    const [none, some, all] = [kept(0), kept(1), kept(10)];
    expect(some).toBeGreaterThan(none + 0.05);
    expect(all).toBeGreaterThan(some + 0.05);
    expect(all).toBeGreaterThan(0.95);
  });

  it('lets nothing shut out or rejected leak back from the fit before', () => {
    const words = firstWords(plain.phi, 1, 500, 2);
    const decided = priors(6, {
      wordPriors: words.map((word) => ({ theme: 1, word, value: 0 })),
      passagePriors: [0, 1, 2, 3].map((passage) => ({
        passage,
        theme: leading(plain.theta, 6)[passage],
        value: 0,
      })),
    });
    const fit = fitModel(planted.counts, decided, warm(plain, 1), settings);
    expectSound(fit, planted.counts, 6);
    for (const word of words) expect(fit.phi[500 + word]).toBe(0);
    for (const { passage, theme } of decided.passagePriors) {
      expect(fit.theta[passage * 6 + theme]).toBe(0);
    }
  });

  it('draws a newly seeded word to its theme', () => {
    const word = firstWords(plain.phi, 0, 500, 30)[29];
    const leanings = [{ theme: 5, word }];
    const decided = priors(6, { wordPriors: [{ theme: 5, word, value: 5.1 }] });
    const fit = fitModel(planted.counts, decided, warm(plain, 1, leanings), settings);
    expect(firstWords(fit.phi, 5, 500, 15)).toContain(word);
    expect(fit.phi[5 * 500 + word]).toBeGreaterThan(fit.phi[word]);
  });

  it('keeps a pinned theme bit for bit', () => {
    const phi = plain.phi.slice(500, 1000);
    const fit = fitModel(
      planted.counts,
      priors(6, { frozen: [{ theme: 1, phi }] }),
      warm(plain, 0),
      settings,
    );
    expect(fit.phi.slice(500, 1000)).toEqual(phi);
  });

  it('starts passages that the fit before did not know from their prior', () => {
    const theta = plain.theta.slice();
    theta.fill(0, 0, 6 * 50);
    const start = { ...warm(plain, 1), theta } as Start;
    const fit = fitModel(planted.counts, priors(6), start, settings);
    expectSound(fit, planted.counts, 6);
    const before = leading(plain.theta, 6).slice(0, 50);
    const kept = leading(fit.theta, 6).filter((theme, d) => theme === before[d]).length;
    expect(kept).toBeGreaterThan(40);
  });
});

describe('small and strange studies stay numbers', () => {
  const cases: [string, number[][], number][] = [
    ['no passages', [], 3],
    [
      'passages without counted words',
      [
        [0, 0],
        [0, 0],
      ],
      2,
    ],
    [
      'some empty passages',
      [
        [1, 0, 2],
        [0, 0, 0],
        [0, 3, 1],
      ],
      2,
    ],
    [
      'one theme',
      [
        [1, 2],
        [2, 1],
      ],
      1,
    ],
    ['one passage', [[1, 2, 3, 1]], 2],
    [
      'a passage of one word',
      [
        [1, 0, 0],
        [2, 3, 1],
      ],
      2,
    ],
    ['one word in all', [[1], [1]], 2],
    [
      'a word in every passage',
      [
        [5, 1, 0],
        [4, 0, 1],
        [6, 1, 1],
      ],
      2,
    ],
    [
      'more themes than words or passages',
      [
        [1, 2],
        [2, 1],
      ],
      9,
    ],
    [
      'a word said very often',
      [
        [1e6, 1],
        [1, 1e6],
      ],
      2,
    ],
  ];
  for (const [name, table, themes] of cases) {
    it(name, () => {
      const counts = countsOfTable(table);
      const fit = fitModel(counts, priors(themes), fresh, settings);
      expectSound(fit, counts, themes);
      table.forEach((row, d) => {
        if (row.some((n) => n > 0)) return;
        const share = Math.fround(1 / themes);
        for (let k = 0; k < themes; k++) expect(fit.theta[d * themes + k]).toBeCloseTo(share, 6);
        expect(fit.unexplained[d]).toBe(0);
      });
      expectSound(fitModel(counts, priors(themes), warm(fit, 1), settings), counts, themes);
    });
  }

  it('an empty passage takes the mean of its own prior', () => {
    const decided = priors(2, { passagePriors: [{ passage: 1, theme: 0, value: 0.3 }] });
    const fit = fitModel(
      countsOfTable([
        [1, 2],
        [0, 0],
      ]),
      decided,
      fresh,
      settings,
    );
    expect(fit.theta[2]).toBeCloseTo(0.75, 6);
    expect(fit.theta[3]).toBeCloseTo(0.25, 6);
  });
});

describe('watching and stopping', () => {
  it('tells progress that never falls and ends at 1', () => {
    const fractions: number[] = [];
    const watcher = { progress: (_: unknown, fraction: number) => fractions.push(fraction) > 0 };
    expect(fitModel(planted.counts, priors(6), fresh, settings, watcher)).toEqual(plain);
    expect(fractions.length).toBe(4 * 35);
    expect(fractions).toEqual([...fractions].sort((a, b) => a - b));
    expect(fractions[fractions.length - 1]).toBe(1);
  });

  it('ends a cancelled fit with what it has', () => {
    for (const [start, after] of [
      [fresh, 3],
      [fresh, 50],
      [warm(plain, 1), 2],
    ] as const) {
      let told = 0;
      const fit = fitModel(planted.counts, priors(6), start, settings, {
        progress: () => ++told < after,
      });
      expect(told).toBe(after);
      expect(fit.stopReason).toBe('stopped by a person');
      expectSound(fit, planted.counts, 6);
    }
  });
});

describe('refusals name the argument, its value and what it must be', () => {
  const counts = countsOfTable([
    [1, 2],
    [2, 1],
  ]);
  const refused = (given: Counts, decided: Priors, start: Start = fresh): (() => unknown) => {
    return () => fitModel(given, decided, start, settings);
  };

  it('counts', () => {
    const unsorted = { ...counts, indices: Int32Array.of(1, 0, 0, 1) };
    expect(refused(unsorted, priors(2))).toThrow('fitModel: counts.indices[1] is 0; must be asc');
    const outside = { ...counts, indices: Int32Array.of(0, 2, 0, 1) };
    expect(refused(outside, priors(2))).toThrow('fitModel: counts.indices[1] is 2; must be from 0');
    const zero = { ...counts, counts: Float32Array.of(1, 0, 1, 1) };
    expect(refused(zero, priors(2))).toThrow('fitModel: counts.counts[1] is 0; must be finite');
    const short = { ...counts, offsets: Int32Array.of(0, 4) };
    expect(refused(short, priors(2))).toThrow('fitModel: counts.offsets.length is 2');
  });

  it('priors', () => {
    expect(refused(counts, priors(0))).toThrow('fitModel: priors.themes is 0; must be at least 1');
    expect(refused(counts, priors(2, { alpha: 0 }))).toThrow('fitModel: priors.alpha is 0');
    const word = priors(2, { wordPriors: [{ theme: 0, word: 7, value: 1 }] });
    expect(refused(counts, word)).toThrow('fitModel: priors.wordPriors.word is 7');
    const negative = priors(2, { passagePriors: [{ passage: 0, theme: 0, value: -1 }] });
    expect(refused(counts, negative)).toThrow('fitModel: priors.passagePriors.value is -1');
    const phi = priors(2, { frozen: [{ theme: 0, phi: Float32Array.of(1) }] });
    expect(refused(counts, phi)).toThrow('fitModel: priors.frozen.phi.length is 1; must be words');
  });

  it('starts', () => {
    const theta = new Float32Array(3);
    const phi = new Float32Array(4);
    const hold = new Float32Array(2);
    const start: Start = { kind: 'warm', theta, phi, hold, leanings: [] };
    expect(refused(counts, priors(2), start)).toThrow(
      'fitModel: start.theta.length is 3; must be 4',
    );
    const leanings = [{ theme: 2, word: 0 }];
    expect(refused(counts, priors(2), { ...fresh, leanings })).toThrow('start.leanings: theme 2');
  });
});
