import {
  fitModel,
  methodNumber,
  type Counts,
  type ModelFit,
  type Priors,
  type Start,
  type Watcher,
} from '../model/index.ts';
import { sha256 } from '../numbers/index.ts';
import { prepare, preparationMethod, tallyLeftOut, type Prepared } from '../text/index.ts';
import { leaningsOf } from './asked.ts';
import type { FitJob, WordPlaces } from './fit-job.ts';
import { priorsOf } from './priors.ts';
import { packResult, packWords } from './stored.ts';
import { halvesOf, seedPlaces } from './split.ts';
import { likeBefore, phiInVocabulary, warmStart } from './warm-start.ts';
import { placesOf } from './word-places.ts';

export interface FitDone {
  readonly ok: true;
  /** Packed words, as they go into the study file; null where the job brought them counted. */
  readonly words: Uint8Array | null;
  /** Packed result. */
  readonly result: Uint8Array;
  readonly hashes: {
    readonly words: string;
    readonly priors: string;
    readonly result: string;
  };
  readonly method: number;
  readonly preparation: number;
  readonly passages: number;
  readonly vocabulary: number;
  readonly countedWords: number;
  readonly leftOut: ReturnType<typeof tallyLeftOut>;
  readonly sweeps: number;
  readonly stopReason: ModelFit['stopReason'];
  readonly bound: number;
  readonly boundTerms: ModelFit['boundTerms'];
  readonly trace: ModelFit['trace'];
  /** Seeds that no participant says: they could not be taken into account. */
  readonly unheardSeeds: readonly { readonly theme: string; readonly word: string }[];
}

export interface FitRefused {
  readonly ok: false;
  readonly code:
    | 'no words left'
    | 'more themes than passages'
    | 'no themes'
    | 'word without a theme'
    | 'does not split';
  readonly themes: number;
  readonly passages: number;
  /** 'word without a theme': the word that every theme shuts out. */
  readonly word?: string;
}

/** A fit with its words counted and its priors set: all that the model takes. */
export interface FitBegun {
  readonly ok: true;
  readonly job: FitJob;
  readonly words: Prepared;
  readonly priors: Priors;
  readonly start: Start;
}

/** From transcripts and decisions to a fit: counts words, sets priors, fits, packs the result. */
export function fitStudy(job: FitJob, watcher?: Watcher): FitDone | FitRefused {
  const begun = beginFit(job, watcher);
  if (!begun.ok) return begun;
  const { words, priors, start } = begun;
  return packFit(begun, fitModel(words.counts, priors, start, job.model, watcher));
}

/**
 * The part of `fitStudy` before the model; `packFit` is the part after it. Only a split takes long
 * enough here to be watched.
 */
export function beginFit(job: FitJob, watcher?: Watcher): FitBegun | FitRefused {
  const seeds = job.themes.flatMap((theme) => theme.seeds);
  const words = job.counted?.words ?? prepare(job.transcripts, job.text, job.lists, seeds);
  const passages = countedPassages(words.counts);
  const size = { themes: job.themes.length, passages };
  if (job.themes.length === 0) return { ok: false, code: 'no themes', ...size };
  if (words.vocabulary.length === 0) return { ok: false, code: 'no words left', ...size };
  if (job.themes.length > passages) {
    return { ok: false, code: 'more themes than passages', ...size };
  }

  const places = placesOf(words, job.text);
  const homeless = wordWithoutTheme(job, places);
  if (homeless !== undefined) {
    return { ok: false, code: 'word without a theme', ...size, word: homeless };
  }
  const priors = priorsOf(job, words, places);
  if (job.split !== undefined) {
    const frozen = splitThemes(job, words, priors, places, watcher);
    if (frozen === null) return { ok: false, code: 'does not split', ...size };
    const start = { kind: 'fresh' as const, seed: job.seed, leanings: [] };
    return { ok: true, job, words, priors: { ...priors, frozen }, start };
  }
  return { ok: true, job, words, priors, start: startOf(job, words, priors, places) };
}

/** Every theme with the words that it had before, but the one that is split. */
function splitThemes(
  job: FitJob,
  words: Prepared,
  priors: Priors,
  places: WordPlaces,
  watcher: Watcher | undefined,
): Priors['frozen'] | null {
  const { split, previous } = job;
  const at = job.themes.findIndex(({ id }) => id === split?.theme);
  const row = previous?.themes.indexOf(split?.theme ?? '') ?? -1;
  if (split === undefined || previous === null || at < 0 || row < 0) {
    throw new Error(
      `fitStudy: job.split.theme is ${split?.theme}; must be a theme of job.previous`,
    );
  }
  const confirmed = markedPassages(priors)[at];
  const seeds = seedPlaces(job.themes[at].seeds, places);
  const halves = halvesOf(previous, row, job, confirmed, seeds, watcher);
  if (halves === null) return null;
  return job.themes.map(({ id }, theme) => {
    if (id === split.theme) return { theme, phi: halves.kept };
    if (id === split.into) return { theme, phi: halves.parted };
    return { theme, phi: phiInVocabulary(previous, previous.themes.indexOf(id), words.vocabulary) };
  });
}

/** For each theme the passages that a decision gives to it. */
function markedPassages({ themes, passagePriors }: Priors): number[][] {
  const marked = Array.from({ length: themes }, (): number[] => []);
  for (const { passage, theme, value } of passagePriors) if (value > 0) marked[theme].push(passage);
  return marked;
}

/** What a model fitted to a fit's counts, priors and start is kept as. */
export function packFit({ job, words, priors }: FitBegun, fit: ModelFit): FitDone {
  const places = placesOf(words, job.text);
  const packedWords = job.counted === undefined ? packWords(words) : null;
  const packedResult = packResult(fit);
  return {
    ok: true,
    words: packedWords,
    result: packedResult,
    hashes: {
      words: packedWords === null ? (job.counted?.hash ?? '') : sha256(packedWords),
      priors: sha256(
        new TextEncoder().encode(JSON.stringify({ priors: hashed(priors), ...base(job) })),
      ),
      result: sha256(packedResult),
    },
    method: methodNumber,
    preparation: preparationMethod,
    passages: words.passages.length,
    vocabulary: words.vocabulary.length,
    countedWords: sum(words.counts.counts),
    leftOut: tallyLeftOut(words.leftOut),
    sweeps: fit.sweeps,
    stopReason: fit.stopReason,
    bound: fit.boundTerms.words + fit.boundTerms.proportions + fit.boundTerms.distributions,
    boundTerms: fit.boundTerms,
    trace: fit.trace,
    unheardSeeds: job.themes.flatMap(({ id, seeds: own }) =>
      own.filter((word) => places(word) === undefined).map((word) => ({ theme: id, word })),
    ),
  };
}

/** A counted word that every theme shuts out could belong nowhere. */
function wordWithoutTheme({ themes }: FitJob, places: WordPlaces): string | undefined {
  const shutOutEverywhere = (word: string): boolean =>
    places(word) !== undefined &&
    themes.every(({ shutOut }) => shutOut.some((other) => places(other) === places(word)));
  return themes[0].shutOut.find(shutOutEverywhere);
}

function startOf(job: FitJob, words: Prepared, priors: Priors, places: WordPlaces): Start {
  const leanings = leaningsOf(job, places);
  return job.previous === null
    ? { kind: 'fresh', seed: job.seed, leanings, like: likeBefore(job, words) }
    : warmStart(job.themes, words, job.previous, leanings, job.remembered, markedPassages(priors));
}

function countedPassages(counts: Counts): number {
  let counted = 0;
  for (let d = 0; d < counts.passages; d++) {
    if (counts.offsets[d + 1] > counts.offsets[d]) counted++;
  }
  return counted;
}

function sum(numbers: Float32Array): number {
  let all = 0;
  for (const value of numbers) all += value;
  return all;
}

function base({ alpha, eta, seed, model, previous, remembered = [] }: FitJob): object {
  const known = remembered.map(({ phi, ...rest }) => ({ ...rest, phi: [...phi] }));
  const start = previous === null ? 'fresh' : 'warm';
  return { alpha, eta, seed, model, start, ...(known.length > 0 ? { remembered: known } : {}) };
}

/** Typed arrays have no JSON of their own that other readers would agree on. */
function hashed(priors: ReturnType<typeof priorsOf>): unknown {
  return { ...priors, frozen: priors.frozen.map(({ theme, phi }) => ({ theme, phi: [...phi] })) };
}
