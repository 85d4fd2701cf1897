import { resolveTheme, type Fit, type Refusal, type Theme } from '../engine/study/index.ts';
import {
  foundTheme,
  leadingRow,
  modelledThemes,
  rowOf,
  settingsOf,
  storedJob,
  type FitDone,
  type FitRefused,
  type Fitted,
} from '../engine/themes/index.ts';
import type { WordLists } from '../engine/text/index.ts';
import { countingOf } from './counting.ts';
import type { Desk, DeskResult } from './desk.ts';
import { candidate, recordFit, type FitRecord } from './fitting.ts';
import { hashOf } from './ids.ts';
import { runFit, type FitOptions } from './work/run-fit.ts';

/** A theme that leads fewer passages than this has nothing in it to be told apart. */
export const fewestToSplit = 6;

export type SplitRefused =
  | {
      readonly ok: false;
      readonly code: 'split by hand' | 'split pinned' | 'split before a re-fit';
      readonly subject: string;
    }
  | {
      readonly ok: false;
      readonly code: 'too small to split';
      readonly subject: string;
      readonly passages: number;
    };

type NotSplit =
  | Refusal
  | SplitRefused
  | FitRefused
  | {
      readonly ok: false;
      readonly code: 'no fit to start from' | 'changed while fitting' | 'stopped';
    };

/** A split as it would be: the fit with both halves, not yet recorded. */
export interface SplitTried {
  readonly record: FitRecord;
  readonly done: FitDone;
  readonly before: Fitted;
  /** The new theme. */
  readonly into: Theme;
}

/**
 * Splits a theme of the fit on screen in a worker and records nothing. All other themes keep their
 * words. Decisions that change what is modelled have to be taken up by a re-fit first; codings are
 * taken up here.
 */
export async function trySplit(
  desk: Desk,
  theme: string,
  lists: WordLists,
  { run = runFit, ...options }: FitOptions & { readonly run?: typeof runFit } = {},
): Promise<{ readonly ok: true; readonly value: SplitTried } | NotSplit> {
  const { study } = desk;
  const before = desk.fitted(study.fit);
  if (before === null) return { ok: false, code: 'no fit to start from' };
  const refused = splitFault(desk, before, theme, lists);
  if (refused !== null) return refused;
  const into = candidate(desk.context.mintId('theme'));
  const { words, fit } = before;
  const start: Fit['start'] = {
    kind: 'warm',
    seed: fit.start.seed,
    from: fit.id,
    split: { theme, into: into.id },
  };
  const job = storedJob(
    study,
    { ...fit, themes: [...fit.themes, into.id], start },
    { words, hash: fit.hashes.words },
    (id) => desk.fitted(id),
  );
  const done = await run(job, { ...options, workers: 1 });
  if (options.signal?.aborted === true) return { ok: false, code: 'stopped' };
  if (!done.ok) return done;
  if (desk.study.fit !== fit.id || splitFault(desk, before, theme, lists) !== null) {
    return { ok: false, code: 'changed while fitting' };
  }
  const record = {
    themes: job.themes.map(({ id }) => id),
    basis: study.sequence,
    start,
    settings: fit.settings,
    ...(fit.counting === undefined ? {} : { counting: fit.counting }),
  };
  return { ok: true, value: { record, done, before, into } };
}

/** Records a split: one decision, taken back as one. */
export function recordSplit(
  desk: Desk,
  { record, done, before, into }: SplitTried,
): DeskResult<Fit> {
  return recordFit(desk, record, done, [into], before);
}

function splitFault(
  desk: Desk,
  before: Fitted,
  id: string,
  lists: WordLists,
): Refusal | SplitRefused | null {
  const { study } = desk;
  const theme = study.themes.get(id);
  if (theme === undefined) return { ok: false, code: 'unknown theme', subject: id };
  if (theme.origin === 'by hand') return { ok: false, code: 'split by hand', subject: id };
  if (theme.pinned) return { ok: false, code: 'split pinned', subject: id };
  const row = rowOf(before, id);
  if (row < 0 || resolveTheme(study, id)?.id !== id || !isTakenUp(desk, before, lists)) {
    return { ok: false, code: 'split before a re-fit', subject: id };
  }
  const passages = before.words.passages.filter((_, d) => leadingRow(before, d) === row).length;
  return passages < fewestToSplit
    ? { ok: false, code: 'too small to split', subject: id, passages }
    : null;
}

/** Whether the fit on screen has taken up every decision on themes, words and texts. */
function isTakenUp(desk: Desk, { fit }: Fitted, lists: WordLists): boolean {
  const then = new Map(modelledThemes(desk.studyAt(fit.basis)).map((theme) => [theme.id, theme]));
  const was = fit.themes.map((id) => then.get(id) ?? foundTheme(id));
  const now = new Map(modelledThemes(desk.study).map((theme) => [theme.id, theme]));
  const is = fit.themes.map((id) => now.get(id) ?? null);
  if (now.size !== fit.themes.length || hashOf(was) !== hashOf(is)) return false;
  const { source } = countingOf(desk, settingsOf(desk.study.settings).text, lists, []);
  return fit.counting === undefined || fit.counting.source === source;
}
