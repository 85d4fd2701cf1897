import {
  defaultFitSettings,
  fitModel,
  matchThemes,
  type Counts,
  type FitSettings,
  type ModelFit,
  type Priors,
  type Start,
} from '../../engine/model/index.ts';
import { hash32 } from '../../engine/numbers/index.ts';
import { addresses, demo } from './corpora.ts';
import { keep, machine, mean, say, table } from './machine.ts';

// Every kind of decision, taken on top of a full answer whose themes are frozen, and what the re-fit
// then does: whether the decision holds, and what else moved.

const quick = process.argv.includes('--quick');
const alpha = 0.1;
const eta = 0.1;
const settings: FitSettings = { ...defaultFitSettings, boundEvery: 0 };

interface Scene {
  readonly name: string;
  readonly counts: Counts;
  readonly themes: number;
  readonly before: ModelFit;
  readonly leading: Int32Array;
  /** Of those with a margin above .2. */
  readonly clear: readonly number[];
  readonly totals: Float64Array;
}

interface Line {
  readonly corpus: string;
  readonly decision: string;
  readonly variant: string;
  /** What the decision asks for, as a share of it that came true. */
  readonly holds: number | null;
  /** Leading themes kept where nothing was decided; of the clear ones. */
  readonly kept: number;
  readonly clear: number;
  /** Mean cosine of the themes that nothing was decided about to what they were. */
  readonly cosine: number;
}

function leadingOf(theta: Float32Array, themes: number): Int32Array {
  return Int32Array.from({ length: theta.length / themes }, (_, d) => {
    let best = 0;
    for (let k = 1; k < themes; k++) {
      if (theta[d * themes + k] > theta[d * themes + best]) best = k;
    }
    return best;
  });
}

function sceneOf(name: string, counts: Counts, themes: number, seed: number): Scene {
  const start = { kind: 'fresh', seed, leanings: [] } as const;
  const before = fitModel(counts, priorsOf(themes), start, settings);
  const leading = leadingOf(before.theta, themes);
  const clear = [...leading.keys()].filter((d) => {
    const row = [...before.theta.subarray(d * themes, (d + 1) * themes)].sort((a, b) => b - a);
    return counts.offsets[d + 1] > counts.offsets[d] && row[0] - (row[1] ?? 0) > 0.2;
  });
  const totals = new Float64Array(counts.words);
  counts.indices.forEach((w, j) => (totals[w] += counts.counts[j]));
  return { name, counts, themes, before, leading, clear, totals };
}

const priorsOf = (themes: number, changes: Partial<Priors> = {}): Priors => ({
  themes,
  alpha,
  eta,
  wordPriors: [],
  passagePriors: [],
  frozen: [],
  ...changes,
});

function warm(
  { before, themes }: Scene,
  leanings: Start['leanings'] = [],
  hold = 1,
): Extract<Start, { kind: 'warm' }> {
  const { theta, phi } = before;
  return { kind: 'warm', theta, phi, leanings, hold: new Float32Array(themes).fill(hold) };
}

/** Places of the largest values. */
function top(row: ArrayLike<number>, size: number): number[] {
  return Array.from(row, (value, w) => ({ value, w }))
    .sort((a, b) => b.value - a.value)
    .slice(0, size)
    .map(({ w }) => w);
}

const rowOf = (phi: Float32Array, k: number, words: number): Float32Array =>
  phi.subarray(k * words, (k + 1) * words);

function cosineOf(a: Float32Array, b: Float32Array): number {
  return matchThemes(a, b, a.length).cosines[0];
}

/** What stayed, apart from the passages and themes that were decided about. */
function stayed(
  scene: Scene,
  after: ModelFit,
  passages: ReadonlySet<number> = new Set(),
  themes: ReadonlySet<number> = new Set(),
): Pick<Line, 'kept' | 'clear' | 'cosine'> {
  const { counts, leading, clear, before } = scene;
  const now = leadingOf(after.theta, scene.themes);
  const share = (of: readonly number[]): number =>
    mean(of.map((d) => (now[d] === leading[d] ? 1 : 0)));
  const others = [...leading.keys()].filter(
    (d) => counts.offsets[d + 1] > counts.offsets[d] && !passages.has(d) && !themes.has(leading[d]),
  );
  const rest = new Set(others);
  const cosines = Array.from({ length: scene.themes }, (_, k) => k)
    .filter((k) => !themes.has(k))
    .map((k) =>
      cosineOf(rowOf(before.phi, k, counts.words), rowOf(after.phi, k, counts.words)),
    );
  return {
    kept: share(others),
    clear: share(clear.filter((d) => rest.has(d))),
    cosine: cosines.length > 0 ? mean(cosines) : 1,
  };
}

/** A twentieth of the passages, by chance. */
function some({ counts }: Scene): number[] {
  return Array.from({ length: counts.passages }, (_, d) => d).filter(
    (d) => counts.offsets[d + 1] - counts.offsets[d] > 4 && hash32(d, 9, 9) % 20 === 0,
  );
}

const lengthOf = ({ counts }: Scene, d: number): number => {
  let length = 0;
  for (let j = counts.offsets[d]; j < counts.offsets[d + 1]; j++) length += counts.counts[j];
  return length;
};

type Made = Omit<Line, 'corpus'>;

function* decisions(scene: Scene): Generator<Made> {
  const { counts, themes, before, leading, totals } = scene;
  const { words } = counts;
  const all = Array.from({ length: themes }, (_, k) => k);

  for (const hold of [0, 0.3, 1, 3]) {
    const after = fitModel(counts, priorsOf(themes), warm(scene, [], hold), settings);
    const variant = `hold ${hold}`;
    yield { decision: 're-fit', variant, holds: null, ...stayed(scene, after) };
  }

  // Seeds: each of three themes is given two middling words that another theme leads.
  const seeds = [0, 1, 2].flatMap((theme) => {
    const from = (theme + 3) % themes;
    return top(rowOf(before.phi, from, words), 30)
      .slice(10)
      .filter((w) => totals[w] >= 5)
      .slice(0, 2)
      .map((word) => ({ theme, word }));
  });
  for (const [variant, prior] of [
    ['start alone', () => 1e-3],
    ['min(20, .1 c), 3 at least', (c: number) => Math.max(3, Math.min(20, 0.1 * c))],
    ['1 x c', (c: number) => c],
  ] as const) {
    const wordPriors = seeds.map(({ theme, word }) => {
      return { theme, word, value: eta + prior(totals[word]) };
    });
    const start = warm(scene, seeds);
    const after = fitModel(counts, priorsOf(themes, { wordPriors }), start, settings);
    const among = seeds.filter(({ theme, word }) =>
      top(rowOf(after.phi, theme, words), 15).includes(word),
    );
    const own = mean(
      [0, 1, 2].map((k) => {
        const then = top(rowOf(before.phi, k, words), 10);
        const now = new Set(top(rowOf(after.phi, k, words), 15));
        return mean(then.map((w) => (now.has(w) ? 1 : 0)));
      }),
    );
    yield {
      decision: 'seed (among the first 15)',
      variant: `${variant}; own words kept ${own.toFixed(2)}`,
      holds: among.length / seeds.length,
      ...stayed(scene, after, new Set(), new Set([0, 1, 2])),
    };
  }

  {
    const out = [0, 1, 2].map((theme) => {
      return { theme, word: top(rowOf(before.phi, theme, words), 1)[0] };
    });
    const wordPriors = out.map((one) => ({ ...one, value: 0 }));
    const after = fitModel(counts, priorsOf(themes, { wordPriors }), warm(scene), settings);
    yield {
      decision: 'shut out a first word',
      variant: 'prior 0',
      holds: mean(out.map(({ theme, word }) => (after.phi[theme * words + word] === 0 ? 1 : 0))),
      ...stayed(scene, after),
    };
  }

  for (const pinned of [[0], all]) {
    const frozen = pinned.map((theme) => ({ theme, phi: rowOf(before.phi, theme, words).slice() }));
    const after = fitModel(counts, priorsOf(themes, { frozen }), warm(scene), settings);
    const same = pinned.map((k) =>
      rowOf(after.phi, k, words).every((value, w) => value === before.phi[k * words + w]) ? 1 : 0,
    );
    const variant = pinned.length === 1 ? 'one theme' : 'every theme';
    yield { decision: 'pin', variant, holds: mean(same), ...stayed(scene, after) };
  }

  const chosen = some(scene);
  const decided = new Set(chosen);
  const second = (d: number): number =>
    top(before.theta.subarray(d * themes, (d + 1) * themes), 2)[1];
  for (const times of [0.1, 0.3, 1, 3]) {
    const passagePriors = chosen.map((passage) => {
      const value = alpha + times * lengthOf(scene, passage);
      return { passage, theme: second(passage), value };
    });
    const after = fitModel(counts, priorsOf(themes, { passagePriors }), warm(scene), settings);
    const now = leadingOf(after.theta, themes);
    yield {
      decision: 'confirm the second theme (it leads)',
      variant: `prior ${times} x words`,
      holds: mean(chosen.map((d) => (now[d] === second(d) ? 1 : 0))),
      ...stayed(scene, after, decided),
    };
  }

  for (const value of [0, 1e-3]) {
    const passagePriors = chosen.map((passage) => ({ passage, theme: leading[passage], value }));
    const after = fitModel(counts, priorsOf(themes, { passagePriors }), warm(scene), settings);
    const now = leadingOf(after.theta, themes);
    yield {
      decision: 'reject the leading theme (it does not lead)',
      variant: `prior ${value}`,
      holds: mean(chosen.map((d) => (now[d] === leading[d] ? 0 : 1))),
      ...stayed(scene, after, decided),
    };
  }

  yield* merges(scene);
  yield* aside(scene);
}

/** The two themes that are most alike become one; passages of both are to be led by it. */
function* merges(scene: Scene): Generator<Made> {
  const { counts, themes, before, leading } = scene;
  const { words } = counts;
  let pair = [0, 1];
  let best = -1;
  for (let a = 0; a < themes; a++) {
    for (let b = a + 1; b < themes; b++) {
      const like = cosineOf(rowOf(before.phi, a, words), rowOf(before.phi, b, words));
      if (like > best) [best, pair] = [like, [a, b]];
    }
  }
  const [into, gone] = pair;
  const rows = Array.from({ length: themes }, (_, k) => k).filter((k) => k !== gone);
  const to = (k: number): number => rows.indexOf(k === gone ? into : k);
  const theta = new Float32Array(counts.passages * rows.length);
  for (let d = 0; d < counts.passages; d++) {
    for (let k = 0; k < themes; k++) {
      theta[d * rows.length + to(k)] += before.theta[d * themes + k];
    }
  }
  const phi = new Float32Array(rows.length * words);
  const size = before.themeWords[into] + before.themeWords[gone];
  rows.forEach((k, row) => phi.set(rowOf(before.phi, k, words), row * words));
  for (let w = 0; w < words; w++) {
    const mixed =
      before.themeWords[into] * before.phi[into * words + w] +
      before.themeWords[gone] * before.phi[gone * words + w];
    phi[to(into) * words + w] = mixed / size;
  }
  const both = [...leading.keys()].filter((d) => leading[d] === into || leading[d] === gone);
  const others = [...leading.keys()].filter(
    (d) => counts.offsets[d + 1] > counts.offsets[d] && !both.includes(d),
  );
  for (const [variant, hold, sweeps, doubled] of [
    ['no sweeps (fold alone)', 1, 0, true],
    ['hold 1, 5 sweeps', 1, 5, true],
    ['hold 1, as a re-fit', 1, 40, true],
    ['hold 1, as a re-fit, alpha not doubled', 1, 40, false],
    ['hold 0, as a re-fit', 0, 40, true],
  ] as const) {
    const priors = priorsOf(rows.length, {
      themeAlpha: doubled ? [{ theme: to(into), value: 2 * alpha }] : [],
      frozen: sweeps === 0 ? rows.map((_, row) => ({ theme: row, phi: rowOf(phi, row, words).slice() })) : [],
    });
    const start = {
      kind: 'warm',
      theta,
      phi,
      leanings: [],
      hold: new Float32Array(rows.length).fill(hold),
    } as const;
    const limited = { ...settings, sweepLimit: Math.max(1, sweeps) };
    const after = fitModel(counts, priors, start, limited);
    const now = leadingOf(after.theta, rows.length);
    const share = (of: readonly number[]): number =>
      mean(of.map((d) => (now[d] === to(leading[d]) ? 1 : 0)));
    const known = new Set(others);
    yield {
      decision: 'merge the two most alike (it leads where either led)',
      variant,
      holds: share(both),
      kept: share(others),
      clear: share(scene.clear.filter((d) => known.has(d))),
      cosine: mean(
        rows.flatMap((k, row) =>
          k === into ? [] : [cosineOf(rowOf(before.phi, k, words), rowOf(after.phi, row, words))],
        ),
      ),
    };
  }
}

/** A theme is set aside, the rest re-fitted; then it is brought back, and the rest re-fitted again. */
function* aside(scene: Scene): Generator<Made> {
  const { counts, themes, before, leading, totals } = scene;
  const { words } = counts;
  const last = themes - 1;
  const fewer = themes - 1;
  const without = new Float32Array(counts.passages * fewer);
  for (let d = 0; d < counts.passages; d++) {
    const row = before.theta.subarray(d * themes, d * themes + fewer);
    const sum = row.reduce((a, b) => a + b, 0);
    row.forEach((value, k) => (without[d * fewer + k] = value / sum));
  }
  const start = (theta: Float32Array, phi: Float32Array, hold: readonly number[]) =>
    ({ kind: 'warm', theta, phi, leanings: [], hold: Float32Array.from(hold) }) as const;
  const held = new Array<number>(fewer).fill(1);
  const middle = fitModel(
    counts,
    priorsOf(fewer),
    start(without, before.phi.slice(0, fewer * words), held),
    settings,
  );
  const now = leadingOf(middle.theta, fewer);
  const others = [...leading.keys()].filter(
    (d) => counts.offsets[d + 1] > counts.offsets[d] && leading[d] !== last,
  );
  const known = new Set(others);
  const share = (of: readonly number[]): number =>
    mean(of.map((d) => (now[d] === leading[d] ? 1 : 0)));
  yield {
    decision: 'set aside',
    variant: 'the last theme',
    holds: null,
    kept: share(others),
    clear: share(scene.clear.filter((d) => known.has(d))),
    cosine: mean(
      held.map((_, k) => cosineOf(rowOf(before.phi, k, words), rowOf(middle.phi, k, words))),
    ),
  };

  const all = totals.reduce((a, b) => a + b, 0);
  const average = Float32Array.from(totals, (count) => count / all);
  const old = rowOf(before.phi, last, words);
  for (const [variant, phi, share, hold] of [
    ['from the average word, even', average, () => 1 / themes, 0],
    ['from its words, even', old, () => 1 / themes, 1],
    ['from its words and its old shares', old, (d: number) => before.theta[d * themes + last], 1],
  ] as const) {
    const theta = new Float32Array(counts.passages * themes);
    for (let d = 0; d < counts.passages; d++) {
      const own = share(d);
      for (let k = 0; k < fewer; k++) {
        theta[d * themes + k] = (1 - own) * middle.theta[d * fewer + k];
      }
      theta[d * themes + last] = own;
    }
    const rows = new Float32Array(themes * words);
    rows.set(middle.phi);
    rows.set(phi, last * words);
    const back = fitModel(counts, priorsOf(themes), start(theta, rows, [...held, hold]), settings);
    const then = leadingOf(back.theta, themes);
    const mine = [...leading.keys()].filter((d) => leading[d] === last);
    yield {
      decision: 'bring back (it leads where it led)',
      variant: `${variant}; its cosine ${cosineOf(old, rowOf(back.phi, last, words)).toFixed(2)}`,
      holds: mean(mine.map((d) => (then[d] === last ? 1 : 0))),
      ...stayed(scene, back, new Set(), new Set([last])),
    };
  }
}

const where = machine();
say(where);
const recent = addresses(quick ? 2000 : 1980);
const scenes = [
  [await demo(), 8],
  [recent, 12],
  ...(quick ? [] : ([[recent, 20]] as const)),
] as const;
const seeds = quick ? [1] : [1, 2];
const found: Line[] = [];
for (const [{ name, words }, themes] of scenes) {
  const runs = seeds.map((seed) => {
    const corpus = `${name}, ${themes} themes`;
    const scene = sceneOf(corpus, words.counts, themes, seed);
    return [...decisions(scene)].map((made): Line => ({ corpus, ...made }));
  });
  const lines = runs[0].map((line, i): Line => {
    const average = (of: (one: Line) => number): number => mean(runs.map((run) => of(run[i])));
    return {
      ...line,
      holds: line.holds === null ? null : average(({ holds }) => holds ?? 0),
      kept: average(({ kept }) => kept),
      clear: average(({ clear }) => clear),
      cosine: average(({ cosine }) => cosine),
    };
  });
  found.push(...lines);
  say(`\n${name}, ${themes} themes; means over ${seeds.length} full answers`);
  say(
    table(
      ['decision', 'variant', 'holds', 'kept', 'clear', 'cosine'],
      lines.map((line) => [
        line.decision,
        line.variant,
        line.holds === null ? '–' : line.holds.toFixed(2),
        line.kept.toFixed(2),
        line.clear.toFixed(2),
        line.cosine.toFixed(3),
      ]),
    ),
  );
}
keep('decisions', { where, seeds, lines: found });
