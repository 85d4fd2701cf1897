import type { DensePriors } from './dense-priors.ts';
import { cosine } from './scores/cosine.ts';
import { matching } from './scores/matching.ts';
import type { FitSettings } from './settings.ts';
import type { FreshStart } from './collapsed/runs.ts';

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
 * places where they lie densest. A free row that is known by what it was (`like`) takes the average
 * most like it, all of these together; the averages that are left fill the other rows from the
 * largest down.
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
  like: FreshStart['like'] = [],
): Float32Array {
  const { themes, eta, pinned } = priors;
  const result = new Float32Array(themes * words);
  const free: number[] = [];
  for (let k = 0; k < themes; k++) {
    const phi = pinned[k];
    if (phi) result.set(phi, k * words);
    else if (drawn[k]) {
      const versions = runs.map((run) => poolTheme(run, k, words));
      const similar = similarities(versions);
      const neighbours = Math.max(1, runs.length - 1);
      const weights = densities(similar, versions.length, neighbours).map(weightOf);
      const all = versions.map((_, i) => i);
      setRow(result, k, words, average(versions, all, weights, words).phi, eta);
    } else free.push(k);
  }
  if (free.length > 0) {
    const pool = runs.flatMap((run) => free.map((k) => poolTheme(run, k, words)));
    const gathered = gather(pool, free.length, runs.length, words, settings);
    const known = like.filter(({ theme }) => free.includes(theme));
    fillRows(result, free, gathered, words, eta, known);
  }
  return result;
}

/** A theme of the pool: its distribution, that distribution's length, and its size in words. */
interface PoolTheme {
  readonly phi: Float32Array;
  readonly length: number;
  readonly size: number;
}

interface Average {
  readonly phi: Float64Array;
  readonly size: number;
}

function poolTheme(run: RunThemes, k: number, words: number): PoolTheme {
  const phi = run.phi.subarray(k * words, (k + 1) * words);
  return { phi, length: Math.sqrt(dot(phi, phi)), size: run.sizes[k] };
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
      const scale = pool[i].length * pool[j].length;
      similar[i * n + j] = scale > 0 ? dot(pool[i].phi, pool[j].phi) / scale : 0;
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

/** Density to the fourth; a theme that resembles no other still counts where it stands alone. */
function weightOf(density: number): number {
  return Math.max(density * density * density * density, 1e-12);
}

/**
 * k-means of the pool into `groups` averages, largest first. An average is a weighted sum of pool
 * themes, so its cosine to any theme follows from the themes' cosines: no round reads a word.
 */
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
  const weights = density.map(weightOf);
  const pulls = weights.map((weight, i) => weight * pool[i].length);

  let members = farthestFirst(similar, density, groups).map((i) => [i]);
  let belongs: number[] = [];
  for (let round = 0; round < Math.max(1, settings.consensusRounds); round++) {
    const scores = members.map((group) => cosinesToSum(similar, n, group, pulls));
    const nearest = pool.map((_, i) => indexOfMost(scores, i));
    if (nearest.every((group, i) => group === belongs[i])) break;
    belongs = nearest;
    // A group that all its themes left stays where it was.
    members = members.map((group, g) => {
      const now = [...belongs.keys()].filter((i) => belongs[i] === g);
      return now.length > 0 ? now : group;
    });
  }
  const averages = members.map((group) => average(pool, group, weights, words));
  const order = [...averages.keys()].sort((a, b) => averages[b].size - averages[a].size || a - b);
  return order.map((group) => averages[group]);
}

/** The cosine of each theme of the pool to the sum of a group's themes, each times its pull. */
function cosinesToSum(
  similar: Float64Array,
  n: number,
  group: readonly number[],
  pulls: Float64Array,
): Float64Array {
  const products = new Float64Array(n);
  for (const j of group) {
    for (let i = 0; i < n; i++) products[i] += pulls[j] * similar[j * n + i];
  }
  let square = 0;
  for (const j of group) square += pulls[j] * products[j];
  const length = Math.sqrt(square);
  return products.map((product) => (length > 0 ? product / length : 0));
}

/** The group whose score for theme i is greatest; the first of equals. */
function indexOfMost(scores: readonly Float64Array[], i: number): number {
  let best = 0;
  for (let group = 1; group < scores.length; group++) {
    if (scores[group][i] > scores[best][i]) best = group;
  }
  return best;
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
    weight += weights[i];
    size += weights[i] * pool[i].size;
    for (let w = 0; w < words; w++) phi[w] += weights[i] * pool[i].phi[w];
  }
  for (let w = 0; w < words; w++) phi[w] /= weight;
  return { phi, size: size / weight };
}

/**
 * Rows that are known by what they were take what is most like it; then rows with words shut out
 * choose, each the theme that loses least by it; the others are filled in order.
 */
function fillRows(
  result: Float32Array,
  free: readonly number[],
  gathered: readonly Average[],
  words: number,
  eta: Float64Array,
  like: NonNullable<FreshStart['like']>,
): void {
  const taken = new Map<number, Average>();
  if (like.length > 0) {
    const costs = like.flatMap((one) => gathered.map(({ phi }) => -cosine(one.phi, phi)));
    matching(costs, like.length, gathered.length).forEach((group, i) => {
      taken.set(like[i].theme, gathered[group]);
    });
  }
  const left = gathered.filter((one) => ![...taken.values()].includes(one));
  const masked = free.filter(
    (k) => !taken.has(k) && eta.subarray(k * words, (k + 1) * words).includes(0),
  );
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
