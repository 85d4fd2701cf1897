import { spawnSync } from 'node:child_process';
import { join } from 'node:path';
import { boundOf } from '../../engine/model/bound.ts';
import { prepare } from '../../engine/model/collapsed/prepare.ts';
import { poolRun } from '../../engine/model/collapsed/runs.ts';
import {
  defaultFitSettings,
  defaultMeanFieldSettings,
  fitMeanField,
  fitModel,
  heldOut,
  matchThemes,
  type Counts,
  type FitSettings,
  type Priors,
} from '../../engine/model/index.ts';
import { defaultKernel } from '../../engine/model/kernel/index.ts';
import type { Kernel } from '../../engine/model/kernel/kernel.ts';
import { plainKernel } from '../../engine/model/kernel/plain.ts';
import { createGenerator, hash32 } from '../../engine/numbers/index.ts';
import { addresses, demo, generated, type Corpus } from './corpora.ts';
import type { LargeFigures } from './large.ts';
import { keep, machine, mean, median, say, table, timed } from './machine.ts';
import { scikitLearn } from './outside.ts';

const quick = process.argv.includes('--quick');
/** What scikit-learn is given; its own default is 10. */
const outsideSteps = 60;
const prior = 0.1;
/** Sweeps and steps in which a bound must be reached. */
const limit = 300;

const plain = (themes: number): Priors => ({
  themes,
  alpha: prior,
  eta: prior,
  wordPriors: [],
  passagePriors: [],
  frozen: [],
});

/** Seconds until a bound is reached, evaluations of the bound not counted; null where it is not. */
type Reached = number | null;

function collapsedUntil(
  counts: Counts,
  themes: number,
  seed: number,
  target: number,
  kernels: readonly Kernel[],
): { reached: Reached[]; sweeps: number } {
  const start = { kind: 'fresh', seed, leanings: [] } as const;
  const settings = (sweeps: number, boundEvery: number): FitSettings => ({
    ...defaultFitSettings,
    schedule: [{ exponent: 1, sweeps }],
    boundEvery,
    judgeEvery: 1000,
  });
  const prepared = prepare('bench', counts, plain(themes), defaultKernel);
  const { trace } = poolRun(prepared, start, settings(limit, 1), 0, {
    progress: ({ bound }) => bound === null || bound < target,
  });
  const last = trace[trace.length - 1];
  const sweeps = last.bound !== null && last.bound >= target ? last.sweep : limit;
  const reached = kernels.map((kernel) => {
    // Once unmeasured, so that nothing is compiled while the clock runs.
    const once = prepare('bench', counts, plain(themes), kernel);
    poolRun(once, start, settings(2, 0), 1);
    const { seconds } = timed(() =>
      poolRun(prepare('bench', counts, plain(themes), kernel), start, settings(sweeps, 0), 0),
    );
    return sweeps === limit ? null : seconds;
  });
  return { reached, sweeps };
}

function meanFieldUntil(
  counts: Counts,
  themes: number,
  seed: number,
  target: number,
  kernels: readonly Kernel[],
): Reached[] {
  const chance = createGenerator(seed);
  const lambda = Float64Array.from({ length: themes * counts.words }, () => 0.5 + chance.uniform());
  const fit = (steps: number, kernel: Kernel) =>
    fitMeanField(counts, plain(themes), lambda, { ...defaultMeanFieldSettings, steps }, kernel);
  const { bounds } = fit(outsideSteps + 20, defaultKernel);
  const steps = bounds.findIndex((bound) => bound >= target);
  return kernels.map((kernel) =>
    steps < 0 ? null : timed(() => fit(Math.max(1, steps), kernel)).seconds,
  );
}

/** The exact bound at given distributions, its proportions run tight: the best that they can have. */
function boundAt(counts: Counts, themes: number, lambda: Float64Array): number {
  const settings = { steps: 0, innerLimit: 2000, innerTolerance: 1e-5, flatSteps: 1 };
  return boundOf(fitMeanField(counts, plain(themes), lambda, settings).boundTerms);
}

function rows(lambda: Float64Array, words: number): Float32Array {
  const phi = new Float32Array(lambda.length);
  for (let start = 0; start < lambda.length; start += words) {
    let sum = 0;
    for (let w = 0; w < words; w++) sum += lambda[start + w];
    for (let w = 0; w < words; w++) phi[start + w] = lambda[start + w] / sum;
  }
  return phi;
}

/** One passage in ten by chance is held out. */
function split(counts: Counts): [Counts, Counts] {
  const part = (held: boolean): Counts => {
    const offsets = [0];
    const entries: number[] = [];
    for (let d = 0; d < counts.passages; d++) {
      if ((hash32(d, 1, 2) % 10 === 0) !== held) continue;
      for (let j = counts.offsets[d]; j < counts.offsets[d + 1]; j++) entries.push(j);
      offsets.push(entries.length);
    }
    return {
      passages: offsets.length - 1,
      words: counts.words,
      offsets: Int32Array.from(offsets),
      indices: Int32Array.from(entries, (j) => counts.indices[j]),
      counts: Float32Array.from(entries, (j) => counts.counts[j]),
    };
  };
  return [part(false), part(true)];
}

/** Mean cosine of matched themes over all pairs of repetitions. */
function agreement(phis: readonly Float32Array[], words: number): number {
  const cosines = phis.flatMap((a, i) =>
    phis.slice(i + 1).map((b) => mean(matchThemes(a, b, words).cosines)),
  );
  return mean(cosines);
}

function beside({ name, words }: Corpus, themes: number, repeats: number) {
  const [counts, held] = split(words.counts);
  const kernels = [defaultKernel, plainKernel];
  const kinds = [
    'scikit-learn, batch',
    'CVB0 kernel',
    'CVB0 plain',
    'mean-field kernel',
    'mean-field plain',
    'full answer, one thread',
  ] as const;
  const seconds = kinds.map((): Reached[] => []);
  const predicted = kinds.map((): number[] => []);
  const found = kinds.map((): Float32Array[] => []);
  const whole: number[] = [];
  const sweepsToBound: number[] = [];
  const score = (kind: number, phi: Float32Array): void => {
    found[kind].push(phi);
    predicted[kind].push(heldOut(held, plain(themes), phi, 10, 1).perplexity);
  };
  let version: string | null = null;
  for (let seed = 1; seed <= repeats; seed++) {
    const outside = scikitLearn(counts, themes, prior, outsideSteps, seed);
    let target = -Infinity;
    if (outside !== null) {
      version = outside.version;
      target = boundAt(counts, themes, outside.lambda);
      seconds[0].push(outside.seconds);
      score(0, rows(outside.lambda, counts.words));
    }
    const start = { kind: 'fresh', seed, leanings: [] } as const;
    if (outside !== null) {
      const { reached, sweeps } = collapsedUntil(counts, themes, seed, target, kernels);
      sweepsToBound.push(sweeps);
      reached.forEach((value, i) => seconds[1 + i].push(value));
      meanFieldUntil(counts, themes, seed, target, kernels).forEach((value, i) =>
        seconds[3 + i].push(value),
      );
    }
    const one = { ...defaultFitSettings, schedule: [{ exponent: 1, sweeps: 100 } as const] };
    score(1, poolRun(prepare('bench', counts, plain(themes)), start, one, 1).phi);
    const full = timed(() =>
      fitModel(counts, plain(themes), start, { ...defaultFitSettings, boundEvery: 0 }),
    );
    whole.push(full.seconds);
    score(5, full.value.phi);
  }
  seconds[5] = whole;
  return {
    corpus: name,
    passages: counts.passages,
    vocabulary: counts.words,
    countedWords: counts.counts.reduce((a, b) => a + b, 0),
    themes,
    repeats,
    scikitLearn: version,
    sweepsToBound: sweepsToBound.length > 0 ? median(sweepsToBound) : null,
    kinds: kinds.map((kind, i) => ({
      kind,
      // A repetition that never reached the bound is no number: there is then no median either.
      seconds:
        seconds[i].length > 0 && seconds[i].every((value) => value !== null)
          ? median(seconds[i] as number[])
          : null,
      heldOut: predicted[i].length > 0 ? median(predicted[i]) : null,
      cosine: found[i].length > 1 ? agreement(found[i], counts.words) : null,
    })),
  };
}

const figure = (value: number | null, digits: number): string =>
  value === null ? '–' : value.toFixed(digits);

function show(result: ReturnType<typeof beside>): void {
  say(
    `\n${result.corpus}: ${result.passages} passages, ${result.countedWords} counted words of ` +
      `${result.vocabulary}, ${result.themes} themes, ${result.repeats} repetitions, medians; ` +
      `scikit-learn ${result.scikitLearn ?? 'is not installed'}, ${outsideSteps} iterations`,
  );
  const outside = result.kinds[0].seconds;
  say(
    table(
      ['', 'seconds', 'times sooner', 'held-out', 'cosine'],
      result.kinds.map(({ kind, seconds, heldOut: score, cosine }) => [
        kind,
        figure(seconds, 3),
        seconds === null || outside === null ? '–' : (outside / seconds).toFixed(1),
        figure(score, 0),
        figure(cosine, 2),
      ]),
    ),
  );
}

/** Each in a process of its own, whose memory is then its own as well. */
function large(all: number, themes: number): LargeFigures {
  const file = join(import.meta.dirname, 'large.js');
  const words = [file, String(all), String(themes), ...(quick ? ['--quick'] : [])];
  const { status, stdout } = spawnSync(process.execPath, words, {
    encoding: 'utf8',
    stdio: ['ignore', 'pipe', 'inherit'],
  });
  if (status !== 0) throw new Error(`large: ended with code ${status}`);
  return JSON.parse(stdout) as LargeFigures;
}

const where = machine();
say(where);
const repeats = quick ? 2 : 3;
const corpora: [Corpus, number][] = [
  [generated(quick ? 60_000 : 200_000), 12],
  [await demo(), 8],
  [addresses(quick ? 2000 : 1980), 12],
  ...(quick ? [] : [[addresses(1980), 20] as [Corpus, number]]),
];
say(
  'Seconds until scikit-learn’s final bound is reached, on one thread (mean field with its bound at ' +
    'every step); held-out perplexity of a tenth of the passages by document completion (CVB0: one ' +
    'run of 100 sweeps); cosine of matched themes between repetitions.',
);
const results = corpora.map(([corpus, themes]) => {
  const result = beside(corpus, themes, repeats);
  show(result);
  return result;
});

const all = quick ? 200_000 : 1_000_000;
const figures = (quick ? [12] : [12, 20, 40]).map((themes) => large(all, themes));
say(`\nA generated study of ${all} spoken words, seconds; fits with their words counted, re-fits with them stored`);
say(
  table(
    [
      'themes',
      'words alone',
      'quick answer',
      'full answer',
      'full, one thread',
      're-fit',
      're-fit, model',
      'fold, model',
      'how many, one',
      'peak MB',
      'processor: quick, full, re-fit',
    ],
    figures.map((row) => [
      String(row.themes),
      row.words.toFixed(1),
      row.quick.toFixed(1),
      row.full.toFixed(1),
      figure(row.fullOneThread, 1),
      row.refit.toFixed(2),
      row.refitModel.toFixed(2),
      row.foldModel.toFixed(2),
      figure(row.howMany, 1),
      row.peakMegabytes.toFixed(0),
      Object.values(row.processor)
        .map((value) => value.toFixed(1))
        .join(', '),
    ]),
  ),
);
keep('engine', { where, repeats, beside: results, large: { words: all, figures } });
