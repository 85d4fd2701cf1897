import type { Watcher } from '../model/index.ts';
import { sha256 } from '../numbers/index.ts';
import type { BlobRef, Fit, FitId, Study, ThemeId } from '../study/index.ts';
import { decisions } from './decided.ts';
import type { FitJob, PreviousFit, RememberedTheme } from './fit-job.ts';
import { fitStudy, type FitDone, type FitRefused } from './fit-study.ts';
import { rowOf, type Fitted } from './fitted.ts';
import { modelledThemes, type ModelledTheme } from './modelled-theme.ts';
import { settingsOf } from './settings.ts';
import { unpackFitted, unpackWords } from './stored.ts';

/**
 * What a stored fit was made from: its words as stored, the study as it was when the fit was begun
 * (`then`: the trail up to `fit.basis`), and what it says of itself. `fitted` gives the stored fits
 * of `then`.
 */
export function storedJob(
  then: Study,
  fit: Fit,
  counted: { readonly words: Fitted['words']; readonly hash: string },
  fitted: (id: FitId) => Fitted,
): FitJob {
  const settings = settingsOf(fit.settings);
  const known = new Map(modelledThemes(then).map((theme) => [theme.id, theme]));
  const themes = fit.themes.map((id) => known.get(id) ?? foundTheme(id));
  const onScreen = then.fit === null ? null : fitted(then.fit);
  const { kind, from, seed, rowsFrom, split } = fit.start;
  return {
    transcripts: [],
    lists: {},
    counted,
    text: settings.text,
    model: settings.model,
    alpha: settings.alpha,
    eta: settings.eta,
    seed,
    themes,
    decisions: decisions(then),
    previous: kind === 'warm' && from !== null ? asPrevious(fitted(from)) : null,
    ...(split === undefined ? {} : { split }),
    rowsFrom: rowsFrom === undefined ? null : asPrevious(fitted(rowsFrom)),
    pinnedFrom: onScreen === null ? null : asPrevious(onScreen),
    remembered: onScreen === null ? [] : rememberedThemes(then, themes, onScreen.fit, fitted),
  };
}

/**
 * Makes a stored fit again from what is stored: equal hashes say that it holds. `then` is the study
 * with the trail up to `fit.basis` folded in, `read` gives the bytes of a blob. Fits of another
 * `method` than today's come out otherwise.
 */
export function refitFromStored(
  then: Study,
  fit: Fit,
  read: (blob: BlobRef) => Uint8Array,
  watcher?: Watcher,
): FitDone | FitRefused {
  const unpacked = new Map<number, Fitted['words']>();
  const wordsOf = ({ words: blob }: Fit): Fitted['words'] => {
    const words = unpacked.get(blob.sequence) ?? unpackWords(read(blob));
    unpacked.set(blob.sequence, words);
    return words;
  };
  const fitted = (id: FitId): Fitted => {
    const one = then.fits.get(id);
    if (one === undefined) {
      throw new Error(`refitFromStored: then.fits lacks ${id}; must hold every fit before`);
    }
    return unpackFitted(one, wordsOf(one), read(one.result));
  };
  const counted = { words: wordsOf(fit), hash: sha256(read(fit.words)) };
  return fitStudy(storedJob(then, fit, counted, fitted), watcher);
}

/** A candidate that the fit itself brought: nothing was decided about it before. */
export function foundTheme(id: ThemeId): ModelledTheme {
  return { id, pinned: false, seeds: [], shutOut: [], absorbed: [] };
}

export function asPrevious({ fit, words, theta, phi }: Fitted): PreviousFit {
  return { themes: fit.themes, words, theta, phi };
}

/** Themes that were in the model before, and not in the fit on screen: set aside and brought back. */
export function rememberedThemes(
  study: Study,
  themes: readonly ModelledTheme[],
  onScreen: Fit,
  fitted: (id: FitId) => Fitted,
): RememberedTheme[] {
  const fits = [...study.fits.values()].reverse();
  return themes.flatMap(({ id }) => {
    if (onScreen.themes.includes(id)) return [];
    const last = fits.find((one) => one.themes.includes(id));
    if (last === undefined) return [];
    const before = fitted(last.id);
    const { vocabulary } = before.words;
    const row = rowOf(before, id) * vocabulary.length;
    return [{ theme: id, vocabulary, phi: before.phi.slice(row, row + vocabulary.length) }];
  });
}
