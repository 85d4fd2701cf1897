import { fold, type Study } from '../../engine/study/index.ts';
import {
  asPrevious,
  decisions,
  foundTheme,
  modelledThemes,
  settingsOf,
  unpackFitted,
  whatMoved,
  type FitJob,
  type Fitted,
} from '../../engine/themes/index.ts';
import type { MovedFloor } from '../api.ts';
import { runFit } from '../work/run-fit.ts';
import { give } from './answers.ts';
import type { OpenStudy } from './open-study.ts';
import type { CallContext } from './session-types.ts';

const kept = new WeakMap<OpenStudy, Map<string, MovedFloor>>();

/**
 * What a re-fit moves by itself: the fit before, fitted on from its own result with the decisions
 * that it was made with and no other. Null where the fit on screen is no re-fit of another one.
 */
export async function movedFloor(
  open: OpenStudy,
  _takes: null,
  { signal }: CallContext,
): Promise<{ readonly value: MovedFloor | null }> {
  const { fitted } = open.now;
  const { kind, from } = fitted?.fit.start ?? { kind: 'fresh', from: null };
  if (kind !== 'warm' || from === null || !open.study.fits.has(from)) return give(null);
  const known = kept.get(open) ?? new Map<string, MovedFloor>();
  kept.set(open, known);
  const floor = known.get(from);
  if (floor !== undefined) return give(floor);
  const before = open.desk.fitted(from) as Fitted;
  const then = studyThen(open, before.fit.basis);
  if (then === null) return give(null);
  const done = await runFit(jobOf(then, before), {
    signal: AbortSignal.any([signal, open.closing.signal]),
  });
  if (!done.ok || signal.aborted) return give(null);
  const again = unpackFitted(before.fit, before.words, done.result);
  const moved = whatMoved(open.study, before, again);
  const found = { passages: moved.passages.length, themes: moved.themes.length };
  known.set(from, found);
  return give(found);
}

/** The study with the trail up to a sequence number folded in. */
function studyThen({ now }: OpenStudy, basis: number): Study | null {
  const folded = fold([...now.trail.values()].filter(({ sequence }) => sequence <= basis));
  return folded.ok ? folded.value : null;
}

function jobOf(then: Study, before: Fitted): FitJob {
  const { fit, words } = before;
  const settings = settingsOf(fit.settings);
  const known = new Map(modelledThemes(then).map((theme) => [theme.id, theme]));
  return {
    transcripts: [],
    lists: {},
    counted: { words, hash: fit.hashes.words },
    text: settings.text,
    model: settings.model,
    alpha: settings.alpha,
    eta: settings.eta,
    seed: settings.seed,
    themes: fit.themes.map((id) => known.get(id) ?? foundTheme(id)),
    decisions: decisions(then),
    previous: asPrevious(before),
    rowsFrom: null,
    pinnedFrom: asPrevious(before),
    remembered: [],
  };
}
