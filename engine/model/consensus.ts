import type { DensePriors } from './dense-priors.ts';
import type { FitSettings } from './settings.ts';

/** What the consensus needs of a run. */
export interface RunThemes {
  /** K x V by rows. */
  readonly phi: Float32Array;
  /** K values, in words. */
  readonly sizes: Float64Array;
}

/**
 * One steady set of themes out of the themes of many runs, K x V by rows, each row summing to 1.
 *
 * A pinned theme is what it was. A theme that decisions draw together (`drawn`: seeded, or confirmed
 * in passages) stands in its own row in every run, and there its versions are averaged. All other
 * rows mean nothing by themselves: the runs' themes are pooled and gathered by k-means around the
 * places where they lie densest, and the averages fill the free rows from the largest down.
 *
 * Density of a theme: its mean cosine to its nearest neighbours in the pool; starts are chosen
 * farthest first, weighted by density squared; averages are weighted by density to the fourth.
 * After Kotliar et al. 2019 (eLife 8:e43803), who drop sparse outliers instead of weighting.
 *
 * A word shut out of a row has exactly 0 there.
 */
export function consensus(
  runs: readonly RunThemes[],
  priors: DensePriors,
  drawn: readonly boolean[],
  words: number,
  settings: FitSettings,
): Float32Array {
  const { themes, eta, pinned } = priors;
  const result = new Float32Array(themes * words);
  const free: number[] = [];
  for (let k = 0; k < themes; k++) {
    const phi = pinned[k];
    if (phi) result.set(phi, k * words);
    else if (drawn[k]) {
      const versions = runs.map((run) => unitTheme(run, k, words));
      const similar = similarities(versions);
      const neighbours = Math.max(1, runs.length - 1);
      const weights = densities(similar, versions.length, neighbours).map(fourthPower);
      const all = versions.map((_, i) => i);
      setRow(result, k, words, average(versions, all, weights, words).phi, eta);
    } else free.push(k);
  }
  if (free.length > 0) {
    const pool = runs.flatMap((run) => free.map((k) => unitTheme(run, k, words)));
    const gathered = gather(pool, free.length, runs.length, words, settings);
    fillRows(result, free, gathered, words, eta);
  }
  return result;
}

/** A theme of the pool: its distribution, that distribution at length 1, and its size in words. */
interface PoolTheme {
  readonly phi: Float32Array;
  readonly unit: Float32Array;
  readonly size: number;
}

interface Average {
  readonly phi: Float64Array;
  readonly size: number;
}

function unitTheme(run: RunThemes, k: number, words: number): PoolTheme {
  const phi = run.phi.subarray(k * words, (k + 1) * words);
  return { phi, unit: unitVector(phi), size: run.sizes[k] };
}

function unitVector(values: ArrayLike<number>): Float32Array {
  let squares = 0;
  for (let i = 0; i < values.length; i++) squares += values[i] * values[i];
  const scale = squares > 0 ? 1 / Math.sqrt(squares) : 0;
  return Float32Array.from(values, (value) => value * scale);
}

function dot(a: Float32Array, b: Float32Array): number {
  let total = 0;
  for (let i = 0; i < a.length; i++) total += a[i] * b[i];
  return total;
}

/** n x n cosines. */
function similarities(pool: readonly PoolTheme[]): Float64Array {
  const n = pool.length;
  const similar = new Float64Array(n * n);
  for (let i = 0; i < n; i++) {
    for (let j = i; j < n; j++) {
      similar[i * n + j] = dot(pool[i].unit, pool[j].unit);
      similar[j * n + i] = similar[i * n + j];
    }
  }
  return similar;
}

/** Mean cosine of each theme to its `neighbours` nearest others; 1 where there are no others. */
function densities(similar: Float64Array, n: number, neighbours: number): Float64Array {
  const result = new Float64Array(n).fill(1);
  const nearest = Math.min(neighbours, n - 1);
  if (nearest < 1) return result;
  for (let i = 0; i < n; i++) {
    const others = similar.slice(i * n, (i + 1) * n);
    others[i] = -1;
    others.sort();
    let total = 0;
    for (let rank = 1; rank <= nearest; rank++) total += others[n - rank];
    result[i] = total / nearest;
  }
  return result;
}

function fourthPower(x: number): number {
  return x * x * x * x;
}

/** k-means of the pool into `groups` averages, largest first. */
function gather(
  pool: readonly PoolTheme[],
  groups: number,
  runs: number,
  words: number,
  settings: FitSettings,
): Average[] {
  const n = pool.length;
  const similar = similarities(pool);
  const neighbours = Math.max(2, Math.round(runs * settings.neighbours));
  const density = densities(similar, n, neighbours);
  const weights = density.map(fourthPower);

  let centres = farthestFirst(similar, density, groups).map((i) => pool[i].unit);
  let averages: Average[] = [];
  let belongs: number[] = [];
  for (let round = 0; round < Math.max(1, settings.consensusRounds); round++) {
    const nearest = pool.map(({ unit }) => nearestCentre(unit, centres));
    const settled = nearest.every((centre, i) => centre === belongs[i]);
    if (settled) break;
    belongs = nearest;
    averages = centres.map((centre, group) => {
      const members = [...belongs.keys()].filter((i) => belongs[i] === group);
      if (members.length > 0) return average(pool, members, weights, words);
      return averages[group] ?? { phi: Float64Array.from(centre), size: 0 };
    });
    centres = averages.map(({ phi }) => unitVector(phi));
  }
  const order = [...averages.keys()].sort((a, b) => averages[b].size - averages[a].size || a - b);
  return order.map((group) => averages[group]);
}

/** The densest theme, then again and again the one farthest from those chosen, by its density. */
function farthestFirst(similar: Float64Array, density: Float64Array, groups: number): number[] {
  const n = density.length;
  const chosen: number[] = [];
  const nearest = new Float64Array(n);
  while (chosen.length < groups) {
    let best = -1;
    let bestScore = -Infinity;
    for (let i = 0; i < n; i++) {
      if (chosen.includes(i)) continue;
      const score = density[i] * density[i] * (1 - nearest[i]);
      if (score > bestScore) {
        best = i;
        bestScore = score;
      }
    }
    chosen.push(best);
    for (let i = 0; i < n; i++) nearest[i] = Math.max(nearest[i], similar[best * n + i]);
  }
  return chosen;
}

function nearestCentre(unit: Float32Array, centres: readonly Float32Array[]): number {
  let best = 0;
  let bestScore = -Infinity;
  for (let group = 0; group < centres.length; group++) {
    const score = dot(unit, centres[group]);
    if (score > bestScore) {
      best = group;
      bestScore = score;
    }
  }
  return best;
}

function average(
  pool: readonly PoolTheme[],
  members: readonly number[],
  weights: Float64Array,
  words: number,
): Average {
  const phi = new Float64Array(words);
  let weight = 0;
  let size = 0;
  for (const i of members) {
    // A theme that resembles no other still counts for something where it stands alone.
    const own = Math.max(weights[i], 1e-12);
    weight += own;
    size += own * pool[i].size;
    const from = pool[i].phi;
    for (let w = 0; w < words; w++) phi[w] += own * from[w];
  }
  for (let w = 0; w < words; w++) phi[w] /= weight;
  return { phi, size: size / weight };
}

/**
 * Free rows with words shut out choose first, each the theme that loses least by it; the others are
 * filled in order.
 */
function fillRows(
  result: Float32Array,
  free: readonly number[],
  gathered: readonly Average[],
  words: number,
  eta: Float64Array,
): void {
  const left = [...gathered];
  const masked = free.filter((k) => eta.subarray(k * words, (k + 1) * words).includes(0));
  const taken = new Map<number, Average>();
  for (const k of masked) {
    const losses = left.map(({ phi }) => {
      let lost = 0;
      for (let w = 0; w < words; w++) if (eta[k * words + w] === 0) lost += phi[w];
      return lost;
    });
    const least = losses.indexOf(Math.min(...losses));
    taken.set(k, left.splice(least, 1)[0]);
  }
  for (const k of free) {
    const { phi } = taken.get(k) ?? left.shift()!;
    setRow(result, k, words, phi, eta);
  }
}

/** Writes a row with shut-out words at 0, summing to 1. */
function setRow(
  result: Float32Array,
  k: number,
  words: number,
  phi: Float64Array,
  eta: Float64Array,
): void {
  let total = 0;
  for (let w = 0; w < words; w++) if (eta[k * words + w] > 0) total += phi[w];
  for (let w = 0; w < words; w++) {
    result[k * words + w] = eta[k * words + w] > 0 && total > 0 ? phi[w] / total : 0;
  }
}
