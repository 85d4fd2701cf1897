import {
  emptyDefinition,
  themesWithDecisions,
  type BlobRef,
  type Edit,
  type Fit,
  type FitId,
  type Study,
  type Theme,
} from '../engine/study/index.ts';
import type { WordLists } from '../engine/text/index.ts';
import {
  asPrevious,
  decisions,
  foundTheme,
  modelledThemes,
  recordedSettings,
  rememberedThemes,
  settingsOf,
  type FitDone,
  type FitJob,
  type FitRefused,
  type Fitted,
  type ModelledTheme,
} from '../engine/themes/index.ts';
import { countedBefore, countingOf } from './counting.ts';
import type { Desk, DeskResult, Draft } from './desk.ts';
import { hashOf } from './ids.ts';
import { runFit, type FitOptions } from './work/run-fit.ts';

/** 'refinement': the full answer in place of the quick one on screen, for the same themes. */
export type FitKind = 'from scratch' | 're-fit' | 'refinement';

export type FitMade =
  | DeskResult<{ readonly fit: Fit; readonly done: FitDone }>
  | FitRefused
  | { readonly ok: false; readonly code: 'no fit to start from' }
  | { readonly ok: false; readonly code: 'changed while fitting' }
  | { readonly ok: false; readonly code: 'stopped' };

export interface FitStudyOptions extends FitOptions {
  /** From scratch: how many themes; the study's setting unless told, and its setting from then on. */
  readonly themes?: number;
  /** Which answer, where it is not the one that the study's setting asks for. */
  readonly answer?: 'quick' | 'full';
  /** Let go of the result of a fit that was stopped, so that the study stays as it was. */
  readonly discardStopped?: boolean;
  /** What carries out the job; workers unless told. */
  readonly run?: typeof runFit;
}

/**
 * Fits the study in a worker and records the result. From scratch, themes that carry no decision are
 * found anew; a re-fit starts from the fit on screen and keeps every theme. A refinement is made from
 * scratch and keeps every theme of the fit on screen, each in the row that is most like it.
 *
 * Decisions made meanwhile wait for the next fit; where the words or the set of themes changed, the
 * result is let go.
 */
export async function fit(
  desk: Desk,
  kind: FitKind,
  lists: WordLists,
  options: FitStudyOptions = {},
): Promise<FitMade> {
  const before = desk.study;
  const previous = desk.fitted(before.fit);
  if (kind !== 'from scratch' && previous === null) {
    return { ok: false, code: 'no fit to start from' };
  }
  const values =
    options.answer === undefined ? before.settings : { ...before.settings, answer: options.answer };
  const settings = settingsOf(values);
  const asked = kind === 'from scratch' ? (options.themes ?? settings.themes) : settings.themes;
  const found = kind === 'from scratch' ? newThemes(desk, asked) : [];
  const kept = keptBy(before, kind);
  const themes = [...kept, ...found.map(({ id }) => foundTheme(id))];
  const seeds = themes.flatMap((theme) => theme.seeds);
  const counting = countingOf(desk, settings.text, lists, [...new Set(seeds)].sort());
  const counted = countedBefore(previous, counting, settings.text);
  const job: FitJob = {
    transcripts: counted === undefined ? desk.transcriptTexts() : [],
    text: settings.text,
    lists,
    ...(counted === undefined ? {} : { counted }),
    model: settings.model,
    alpha: settings.alpha,
    eta: settings.eta,
    seed: settings.seed,
    themes,
    decisions: decisions(before),
    previous: kind === 're-fit' && previous !== null ? asPrevious(previous) : null,
    rowsFrom: kind !== 're-fit' && previous !== null ? asPrevious(previous) : null,
    pinnedFrom: previous === null ? null : asPrevious(previous),
    remembered:
      previous === null
        ? []
        : rememberedThemes(before, kept, previous.fit, (id) => desk.fitted(id)),
  };
  const basis = basisOf(before, kind);
  const done = await (options.run ?? runFit)(job, options);
  if (options.discardStopped === true && options.signal?.aborted === true) {
    return { ok: false, code: 'stopped' };
  }
  if (!done.ok) return done;
  if (basisOf(desk.study, kind) !== basis || desk.study.fit !== before.fit) {
    return { ok: false, code: 'changed while fitting' };
  }

  const setting: Edit = {
    kind: 'settingsChanged',
    changes: [{ key: 'themes', from: desk.study.settings['themes'] ?? null, to: asked }],
  };
  const record: FitRecord = {
    themes: job.themes.map((theme) => theme.id),
    basis: before.sequence,
    start: startOf(kind, settings.seed, before.fit),
    settings: { ...recordedSettings(values), themes: asked, lists: hashOf(lists) },
    counting,
  };
  const first = asked === settings.themes ? [] : [{ edit: setting }];
  const made = recordFit(desk, record, done, found, previous, first);
  return made.ok ? { ok: true, value: { fit: made.value, done } } : made;
}

export type FitRecord = Pick<Fit, 'themes' | 'basis' | 'start' | 'settings' | 'counting'>;

/**
 * Records a fit as one decision, together with the drafts `first`. Words that are stored with the fit
 * before are not stored again.
 */
export function recordFit(
  desk: Desk,
  record: FitRecord,
  done: FitDone,
  found: readonly Theme[],
  previous: Fitted | null,
  first: readonly Draft[] = [],
): DeskResult<Fit> {
  const id = desk.context.mintId('fit');
  const known = previous?.fit.hashes.words === done.hashes.words ? previous.fit.words : null;
  const fitWith = (words: BlobRef, result: BlobRef): Fit => ({
    id,
    name: null,
    ...record,
    method: done.method,
    preparation: done.preparation,
    passages: done.passages,
    vocabulary: done.vocabulary,
    countedWords: done.countedWords,
    sweeps: done.sweeps,
    stopReason: done.stopReason,
    bound: done.bound,
    boundTerms: { ...done.boundTerms },
    trace: done.trace.map((point) => ({
      ...point,
      terms: point.terms === null ? null : { ...point.terms },
    })),
    hashes: { ...done.hashes, previousResult: previous?.fit.hashes.result ?? null },
    words,
    result,
  });
  const edit = (refs: readonly BlobRef[]): Edit => {
    const [words, result] = known === null ? refs : [known, ...refs];
    const before = previous?.fit.id ?? null;
    return { kind: 'modelFitted', fit: fitWith(words, result), found, before };
  };
  const own = known === null && done.words !== null ? [done.words] : [];
  const made = desk.make([...first, { blobs: [...own, done.result], edit }], {
    group: desk.context.mintId('group'),
  });
  return made.ok ? { ok: true, value: desk.study.fits.get(id) as Fit } : made;
}

function startOf(kind: FitKind, seed: number, onScreen: FitId | null): Fit['start'] {
  if (kind === 're-fit') return { kind: 'warm', seed, from: onScreen };
  return { kind: 'fresh', seed, from: null, ...(onScreen === null ? {} : { rowsFrom: onScreen }) };
}

/** The themes of a study that a fit of this kind has rows for, besides those that it finds. */
function keptBy(study: Study, kind: FitKind): ModelledTheme[] {
  if (kind === 're-fit') return modelledThemes(study);
  return kind === 'from scratch' ? keptThemes(study) : themesOnScreen(study);
}

function themesOnScreen(study: Study): ModelledTheme[] {
  const known = new Map(modelledThemes(study).map((theme) => [theme.id, theme]));
  const onScreen = study.fit === null ? [] : (study.fits.get(study.fit)?.themes ?? []);
  return onScreen.flatMap((id) => known.get(id) ?? []);
}

/** Themes that a fit from scratch must keep: whatever a person named, asked for or decided on. */
function keptThemes(study: Study): ModelledTheme[] {
  const decided = themesWithDecisions(study);
  return modelledThemes(study).filter(({ id }) => {
    const theme = study.themes.get(id);
    return theme !== undefined && (theme.name !== null || decided.has(id));
  });
}

/** Candidates to fill up with, so that the model has as many themes as the study asks for. */
function newThemes(desk: Desk, themes: number): Theme[] {
  const missing = Math.max(0, themes - keptThemes(desk.study).length);
  return Array.from({ length: missing }, () => candidate(desk.context.mintId('theme')));
}

export function candidate(id: string): Theme {
  return {
    id,
    name: null,
    origin: 'fitted',
    definition: emptyDefinition,
    version: 1,
    pinned: false,
    setAside: false,
    mergedInto: null,
    seeds: [],
    shutOut: [],
  };
}

/** What may not change while a fit runs: the words, and which themes there are. */
function basisOf(study: Study, kind: FitKind): string {
  const texts = [...study.transcripts.values()].map(({ id, text, turns, speakers }) => [
    id,
    text,
    turns.length,
    speakers,
  ]);
  const settings = Object.entries(study.settings).filter(([key]) => key.startsWith('text.'));
  const themes = kind === 'from scratch' ? keptThemes(study) : modelledThemes(study);
  return hashOf([texts, settings, themes.map(({ id, absorbed }) => [id, absorbed])]);
}
