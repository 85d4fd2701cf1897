import {
  emptyDefinition,
  themesWithDecisions,
  type BlobRef,
  type Edit,
  type Fit,
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
  type ModelledTheme,
} from '../engine/themes/index.ts';
import type { Desk, DeskResult } from './desk.ts';
import { hashOf } from './ids.ts';
import { runFit, type FitOptions } from './work/run-fit.ts';

export type FitKind = 'from scratch' | 're-fit';

export type FitMade =
  | DeskResult<{ readonly fit: Fit; readonly done: FitDone }>
  | FitRefused
  | { readonly ok: false; readonly code: 'no fit to start from' }
  | { readonly ok: false; readonly code: 'changed while fitting' }
  | { readonly ok: false; readonly code: 'stopped' };

export interface FitStudyOptions extends FitOptions {
  /** From scratch: how many themes; the study's setting unless told, and its setting from then on. */
  readonly themes?: number;
  /** Let go of the result of a fit that was stopped, so that the study stays as it was. */
  readonly discardStopped?: boolean;
}

/**
 * Fits the study in a worker and records the result. From scratch, themes that carry no decision are
 * found anew; a re-fit starts from the fit on screen and keeps every theme. Decisions made meanwhile
 * wait for the next fit; where the words or the set of themes changed, the result is let go.
 */
export async function fit(
  desk: Desk,
  kind: FitKind,
  lists: WordLists,
  options: FitStudyOptions = {},
): Promise<FitMade> {
  const before = desk.study;
  const previous = desk.fitted(before.fit);
  if (kind === 're-fit' && previous === null) return { ok: false, code: 'no fit to start from' };
  const settings = settingsOf(before.settings);
  const asked = kind === 'from scratch' ? (options.themes ?? settings.themes) : settings.themes;
  const found = kind === 'from scratch' ? newThemes(desk, asked) : [];
  const kept = kind === 'from scratch' ? keptThemes(before) : modelledThemes(before);
  const job: FitJob = {
    transcripts: desk.transcriptTexts(),
    text: settings.text,
    lists,
    model: settings.model,
    alpha: settings.alpha,
    eta: settings.eta,
    seed: settings.seed,
    themes: [...kept, ...found.map(({ id }) => foundTheme(id))],
    decisions: decisions(before),
    previous: kind === 're-fit' && previous !== null ? asPrevious(previous) : null,
    pinnedFrom: previous === null ? null : asPrevious(previous),
    remembered:
      previous === null
        ? []
        : rememberedThemes(before, kept, previous.fit, (id) => desk.fitted(id)),
  };
  const basis = basisOf(before, kind);
  const done = await runFit(job, options);
  if (options.discardStopped === true && options.signal?.aborted === true) {
    return { ok: false, code: 'stopped' };
  }
  if (!done.ok) return done;
  if (basisOf(desk.study, kind) !== basis || desk.study.fit !== before.fit) {
    return { ok: false, code: 'changed while fitting' };
  }

  const id = desk.context.mintId('fit');
  const sameWords = previous?.fit.hashes.words === done.hashes.words ? previous.fit.words : null;
  const record = (words: BlobRef, result: BlobRef): Fit => ({
    id,
    name: null,
    themes: job.themes.map((theme) => theme.id),
    basis: before.sequence,
    start: {
      kind: kind === 're-fit' ? 'warm' : 'fresh',
      seed: settings.seed,
      from: kind === 're-fit' ? before.fit : null,
    },
    method: done.method,
    preparation: done.preparation,
    settings: { ...recordedSettings(before.settings), themes: asked, lists: hashOf(lists) },
    passages: done.passages,
    vocabulary: done.vocabulary,
    countedWords: done.countedWords,
    sweeps: done.sweeps,
    stopReason: done.stopReason,
    bound: done.bound,
    boundTerms: { ...done.boundTerms },
    trace: done.trace,
    hashes: { ...done.hashes, previousResult: previous?.fit.hashes.result ?? null },
    words,
    result,
  });
  const edit = (refs: readonly BlobRef[]): Edit => {
    const [words, result] = sameWords === null ? refs : [sameWords, ...refs];
    return { kind: 'modelFitted', fit: record(words, result), found, before: before.fit };
  };
  const blobs =
    sameWords === null && done.words !== null ? [done.words, done.result] : [done.result];
  const { themes = null } = desk.study.settings;
  const setting: Edit = {
    kind: 'settingsChanged',
    changes: [{ key: 'themes', from: themes, to: asked }],
  };
  const made = desk.make(
    [...(asked === settings.themes ? [] : [{ edit: setting }]), { blobs, edit }],
    {
      group: desk.context.mintId('group'),
    },
  );
  if (!made.ok) return made;
  return { ok: true, value: { fit: desk.study.fits.get(id) as Fit, done } };
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
  return Array.from({ length: missing }, () => ({
    id: desk.context.mintId('theme'),
    name: null,
    origin: 'fitted' as const,
    definition: emptyDefinition,
    version: 1,
    pinned: false,
    setAside: false,
    mergedInto: null,
    seeds: [],
    shutOut: [],
  }));
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
  const themes = kind === 're-fit' ? modelledThemes(study) : keptThemes(study);
  return hashOf([texts, settings, themes.map(({ id, absorbed }) => [id, absorbed])]);
}
