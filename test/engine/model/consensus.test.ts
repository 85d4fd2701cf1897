import { describe, expect, it } from 'vitest';
import { consensus, type RunThemes } from '../../../engine/model/consensus.ts';
import { densePriors } from '../../../engine/model/dense-priors.ts';
import { defaultFitSettings, type Priors } from '../../../engine/model/index.ts';
import { countsOfTable } from './planted.ts';

const counts = countsOfTable([[1, 1, 1, 1]]);

function dense(themes: number, more: Partial<Priors> = {}) {
  return densePriors('test', counts, {
    themes,
    alpha: 0.1,
    eta: 0.1,
    wordPriors: [],
    passagePriors: [],
    frozen: [],
    ...more,
  });
}

function run(rows: readonly (readonly number[])[], sizes: readonly number[]): RunThemes {
  return { phi: Float32Array.from(rows.flat()), sizes: Float64Array.from(sizes) };
}

function rowsOf(phi: Float32Array): number[][] {
  const rows: number[][] = [];
  for (let i = 0; i < phi.length; i += 4) rows.push([...phi.slice(i, i + 4)]);
  return rows;
}

const a = [0.7, 0.1, 0.1, 0.1];
const b = [0.1, 0.7, 0.1, 0.1];
const c = [0.1, 0.1, 0.1, 0.7];
const free = [false, false, false];

describe('consensus of the themes of many runs', () => {
  it('finds each theme wherever it stands in its run, the largest first', () => {
    const runs = [
      run([a, b, c], [10, 20, 30]),
      run([c, a, b], [30, 10, 20]),
      run([b, c, a], [20, 30, 10]),
    ];
    const rows = rowsOf(consensus(runs, dense(3), free, 4, defaultFitSettings));
    [c, b, a].forEach((row, k) => row.forEach((x, w) => expect(rows[k][w]).toBeCloseTo(x, 6)));
  });

  it('gives a theme of one run alone less weight than one that the runs share', () => {
    const odd = [0.05, 0.05, 0.85, 0.05];
    const runs = [
      run([a, b], [1, 1]),
      run([a, b], [1, 1]),
      run([a, b], [1, 1]),
      run([odd, b], [1, 1]),
    ];
    const rows = rowsOf(consensus(runs, dense(2), [false, false], 4, defaultFitSettings));
    const first = rows.find((row) => row[0] > 0.5)!;
    // A plain mean of the group would have a quarter of the odd theme in it: .19 and .54.
    expect(first[2]).toBeLessThan(0.15);
    expect(first[0]).toBeGreaterThan(0.6);
  });

  it('averages a drawn theme over its own row, whatever it looks like elsewhere', () => {
    const runs = [run([a, b, c], [1, 2, 3]), run([b, a, c], [1, 2, 3])];
    const drawn = [true, false, false];
    const rows = rowsOf(consensus(runs, dense(3), drawn, 4, defaultFitSettings));
    [0.4, 0.4, 0.1, 0.1].forEach((x, w) => expect(rows[0][w]).toBeCloseTo(x, 6));
  });

  it('returns a pinned theme as it was and does not offer it to the others', () => {
    const phi = Float32Array.of(0.25, 0.25, 0.25, 0.25);
    const runs = [run([b, [...phi], a], [1, 9, 2]), run([a, [...phi], b], [2, 9, 1])];
    const priors = dense(3, { frozen: [{ theme: 1, phi }] });
    const result = consensus(runs, priors, free, 4, defaultFitSettings);
    expect(result.slice(4, 8)).toEqual(phi);
    const rows = rowsOf(result);
    a.forEach((x, w) => expect(rows[0][w]).toBeCloseTo(x, 6));
    b.forEach((x, w) => expect(rows[2][w]).toBeCloseTo(x, 6));
  });

  it('gives a row with a word shut out the theme that loses least, with exactly 0 there', () => {
    const priors = dense(3, { wordPriors: [{ theme: 0, word: 3, value: 0 }] });
    const runs = [run([c, b, a], [3, 2, 1]), run([c, b, a], [3, 2, 1])];
    const rows = rowsOf(consensus(runs, priors, free, 4, defaultFitSettings));
    expect(rows[0][3]).toBe(0);
    expect(rows[0].reduce((x, y) => x + y, 0)).toBeCloseTo(1, 6);
    expect(rows.filter((row) => row[3] > 0.6).length).toBe(1);
    expect(rows[1][3]).toBeCloseTo(0.7, 6);
  });

  it('works with one run, and with more themes than differ', () => {
    const one = consensus([run([a, b, c], [1, 2, 3])], dense(3), free, 4, defaultFitSettings);
    expect(rowsOf(one).map((row) => row.indexOf(Math.max(...row)))).toEqual([3, 1, 0]);
    const same = [run([a, a, a], [1, 1, 1]), run([a, a, a], [1, 1, 1])];
    for (const row of rowsOf(consensus(same, dense(3), free, 4, defaultFitSettings))) {
      row.forEach((x, w) => expect(x).toBeCloseTo(a[w], 6));
    }
  });
});
