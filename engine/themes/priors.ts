import type { Priors } from '../model/index.ts';
import { belongsTo } from '../spans/index.ts';
import type { Prepared } from '../text/index.ts';
import type { FitJob, WordPlaces } from './fit-job.ts';
import { phiInVocabulary, rememberedPhi } from './warm-start.ts';

/**
 * A seed's extra prior counts: measured on two corpora, most of the work is done by where the word
 * starts; a share of its count holds it there, and the cap keeps a common seed from swallowing its
 * theme. Rare seeds get a floor, or they would not show among their theme's first words.
 */
const seedShare = 0.1;
const seedCap = 20;
const seedFloor = 3;

/** The part of a job that says what the model is to be. */
export type Deciding = Pick<
  FitJob,
  'themes' | 'decisions' | 'alpha' | 'eta' | 'pinnedFrom' | 'remembered'
>;

/**
 * Decisions as asymmetric Dirichlet priors (seeds as in Jagarlamudi, Daumé & Udupa 2012): seeds raise
 * a word in a theme, what is shut out gets exactly zero, a pinned theme keeps its distribution, a
 * confirmed theme gets as many prior words as the passage has counted ones, a rejected one zero.
 */
export function priorsOf(job: Deciding, words: Prepared, places: WordPlaces): Priors {
  const counts = wordCounts(words);
  const wordPriors: { theme: number; word: number; value: number }[] = [];
  job.themes.forEach(({ seeds, shutOut }, theme) => {
    for (const form of seeds) {
      const word = places(form);
      if (word === undefined) continue;
      const extra = Math.max(seedFloor, Math.min(seedCap, seedShare * counts[word]));
      wordPriors.push({ theme, word, value: job.eta + extra });
    }
    for (const form of shutOut) {
      const word = places(form);
      if (word !== undefined) wordPriors.push({ theme, word, value: 0 });
    }
  });
  return {
    themes: job.themes.length,
    alpha: job.alpha,
    eta: job.eta,
    themeAlpha: job.themes.flatMap(({ absorbed }, theme) =>
      absorbed.length === 0 ? [] : [{ theme, value: job.alpha * (1 + absorbed.length) }],
    ),
    wordPriors,
    passagePriors: passagePriors(job, words),
    frozen: frozen(job, words),
  };
}

function passagePriors(job: Deciding, words: Prepared): Priors['passagePriors'] {
  const rows = new Map(job.themes.map(({ id }, row) => [id, row]));
  const byTranscript = new Map<string, Deciding['decisions'][number][]>();
  for (const decided of job.decisions) {
    const here = byTranscript.get(decided.transcript);
    if (here === undefined) byTranscript.set(decided.transcript, [decided]);
    else here.push(decided);
  }
  const priors: { passage: number; theme: number; value: number }[] = [];
  words.passages.forEach((passage, index) => {
    const applies = new Map<number, boolean>();
    for (const decided of byTranscript.get(passage.transcript) ?? []) {
      const row = rows.get(decided.theme);
      if (row === undefined || !belongsTo(decided.span, passage)) continue;
      // Where two readers differ, the one who found the theme there is heard.
      applies.set(row, decided.applies || applies.get(row) === true);
    }
    // A passage with every theme rejected has nowhere to put its words: it keeps its plain prior.
    const rejected = [...applies.values()].filter((value) => !value).length;
    if (rejected === job.themes.length) return;
    for (const [theme, value] of [...applies].sort(([a], [b]) => a - b)) {
      priors.push({ passage: index, theme, value: value ? job.alpha + passage.countedWords : 0 });
    }
  });
  return priors;
}

function frozen(job: Deciding, words: Prepared): Priors['frozen'] {
  const { pinnedFrom, remembered = [] } = job;
  if (pinnedFrom === null) return [];
  return job.themes.flatMap(({ id, pinned }, theme) => {
    if (!pinned) return [];
    const row = pinnedFrom.themes.indexOf(id);
    if (row < 0) {
      const known = remembered.find((one) => one.theme === id);
      return known === undefined ? [] : [{ theme, phi: rememberedPhi(known, words.vocabulary) }];
    }
    return [{ theme, phi: phiInVocabulary(pinnedFrom, row, words.vocabulary) }];
  });
}

function wordCounts(words: Prepared): Float64Array {
  const totals = new Float64Array(words.vocabulary.length);
  const { indices, counts } = words.counts;
  for (let i = 0; i < indices.length; i++) totals[indices[i]] += counts[i];
  return totals;
}
