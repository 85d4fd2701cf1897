import { materialOf, planHowMany } from '../../engine/evidence/index.ts';
import {
  defaultFitSettings,
  fitModel,
  quickFitSettings,
  type FitSettings,
} from '../../engine/model/index.ts';
import { defaultTextSettings } from '../../engine/text/index.ts';
import {
  beginFit,
  unpackFitted,
  unpackWords,
  type FitDone,
  type FitJob,
  type PreviousFit,
} from '../../engine/themes/index.ts';
import type { Fit } from '../../engine/study/index.ts';
import { runEvidence } from '../../main/work/run-evidence.ts';
import { runFit } from '../../main/work/run-fit.ts';
import { wordLists } from '../../main/word-lists.ts';
import { spoken } from './corpora.ts';
import { timed } from './machine.ts';

interface Processor {
  quick: number;
  full: number;
  refit: number;
}

/** Seconds, each measured once. */
export interface LargeFigures {
  readonly themes: number;
  readonly passages: number;
  readonly countedWords: number;
  /** Counting the words alone, which every fit does unless they are stored. */
  readonly words: number;
  readonly quick: number;
  readonly full: number;
  readonly fullOneThread: number | null;
  /** With the words as they are stored, as long as nothing they were counted from has changed. */
  readonly refit: number;
  /** Without the words, on one thread. */
  readonly refitModel: number;
  readonly foldModel: number;
  readonly howMany: number | null;
  /** Of the whole process with its workers, up to and with the full answer and the re-fit. */
  readonly peakMegabytes: number;
  /** Processor seconds of all threads: they say the same on a busy machine as on an idle one. */
  readonly processor: Readonly<Processor>;
}

// large.js WORDS THEMES [--quick]: prints the figures as JSON.
const all = Number(process.argv[2]);
const themes = Number(process.argv[3]);
const quickly = process.argv.includes('--quick');

const ids = Array.from({ length: themes }, (_, k) => `theme ${k}`);
const job = (model: FitSettings, previous: PreviousFit | null): FitJob => ({
  transcripts,
  text: defaultTextSettings,
  lists: wordLists,
  model,
  alpha: 0.1,
  eta: 0.1,
  seed: 1,
  themes: ids.map((id) => ({ id, pinned: false, seeds: [], shutOut: [], absorbed: [] })),
  decisions: [],
  previous,
  pinnedFrom: previous,
});

async function seconds(work: () => Promise<unknown>): Promise<number> {
  const began = performance.now();
  await work();
  return (performance.now() - began) / 1000;
}

const processor: Processor = { quick: 0, full: 0, refit: 0 };

async function measured(name: keyof Processor, work: () => Promise<unknown>): Promise<number> {
  const { user, system } = process.cpuUsage();
  const wall = await seconds(work);
  const after = process.cpuUsage();
  processor[name] = (after.user + after.system - user - system) / 1e6;
  return wall;
}

const transcripts = spoken(all, 15, Math.ceil(all / 25_000));
let done: FitDone | null = null;
const quick = await measured('quick', () => runFit(job(quickFitSettings, null)));
const full = await measured('full', async () => {
  done = (await runFit(job(defaultFitSettings, null))) as FitDone;
});
const { words: packed, result, passages, countedWords } = done as unknown as FitDone;
const words = unpackWords(packed as Uint8Array);
const { theta, phi } = unpackFitted({ themes: ids } as unknown as Fit, words, result);
const previous: PreviousFit = { themes: ids, words, theta, phi };
const refitJob = job(defaultFitSettings, previous);
const stored: FitJob = { ...refitJob, transcripts: [], counted: { words, hash: '' } };
const refit = await measured('refit', () => runFit(stored));
// Kilobytes on every system that Node says it for.
const peakMegabytes = process.resourceUsage().maxRSS / 1024;

const counting = timed(() => beginFit(refitJob));
if (!counting.value.ok) throw new Error(counting.value.code);
const { priors, start } = counting.value;
const refitModel = timed(() => fitModel(words.counts, priors, start, defaultFitSettings)).seconds;
const frozen = ids.map((_, theme) => ({
  theme,
  phi: phi.slice(theme * words.vocabulary.length, (theme + 1) * words.vocabulary.length),
}));
const foldModel = timed(() =>
  fitModel(words.counts, { ...priors, frozen }, start, defaultFitSettings),
).seconds;
const fullOneThread = quickly
  ? null
  : await seconds(() => runFit(job(defaultFitSettings, null), { workers: 1 }));

let howMany: number | null = null;
if (!quickly && themes <= 20) {
  const material = materialOf(
    { priors, leanings: [], seed: 1, settings: quickFitSettings, counts: words.counts, phi },
    words.passages.map(({ participant }) => participant),
  );
  const plan = planHowMany(material, [themes], 1);
  if (plan.ok) howMany = await seconds(() => runEvidence(plan.material, plan.tasks));
}

const figures: LargeFigures = {
  themes,
  passages,
  countedWords,
  words: counting.seconds,
  quick,
  full,
  fullOneThread,
  refit,
  refitModel,
  foldModel,
  howMany,
  peakMegabytes,
  processor,
};
process.stdout.write(JSON.stringify(figures));
