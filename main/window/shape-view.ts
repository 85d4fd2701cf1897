import type { Fit, Study } from '../../engine/study/index.ts';
import type { FitProgress, FitRow, FitView, ShapeView } from '../api.ts';
import { fitBefore } from '../commands/moved.ts';
import type { OpenStudy } from './open-study.ts';
import { themeRows } from './theme-rows.ts';

export function shapeView(open: OpenStudy): ShapeView {
  const { study, now } = open;
  const people = new Set<string>();
  for (const id of study.transcripts.keys()) {
    for (const { participant } of now.passagesIn(id)) people.add(participant);
  }
  const before = fitBefore(study);
  return {
    themes: themeRows(open),
    headings: [...study.headings.values()],
    people: people.size,
    fit: now.fitted === null ? null : fitView(study, now.fitted.fit),
    fits: fitRows(open),
    before: before !== null && study.fits.has(before) ? before : null,
  };
}

function fitView(study: Study, fit: Fit): FitView {
  return {
    id: fit.id,
    kind: kindOf(fit),
    answer: answerOf(study, fit),
    themes: fit.themes.length,
    passages: fit.passages,
    countedWords: fit.countedWords,
    bound: fit.bound,
    sweeps: fit.sweeps,
    stopReason: fit.stopReason,
    seed: fit.start.seed,
    trace: fit.trace.map(({ sweep, bound, change }, index): FitProgress => ({
      sweep,
      bound,
      change,
      fraction: (index + 1) / fit.trace.length,
    })),
  };
}

/** Every fit that is kept, oldest first. */
export function fitRows({ study, now }: OpenStudy): FitRow[] {
  const times = new Map<string, string>();
  for (const { edit, at } of now.trail.values()) {
    // A fit that was taken back and made again keeps its first time.
    if (edit.kind === 'modelFitted' && !times.has(edit.fit.id)) times.set(edit.fit.id, at);
  }
  return [...study.fits.values()].map((fit, index) => ({
    id: fit.id,
    label: fit.name ?? labelOf(study, fit, index + 1),
    name: fit.name,
    at: times.get(fit.id) ?? '',
    kind: kindOf(fit),
    themes: fit.themes.length,
    passages: fit.passages,
  }));
}

/** "3: from scratch, 12 themes", with "quick answer" where it is one. */
function labelOf(study: Study, fit: Fit, number: number): string {
  const quick = fit.start.kind === 'fresh' && answerOf(study, fit) === 'quick';
  return `${number}: ${fit.start.split === undefined ? kindOf(fit) : 'split'}, ${fit.themes.length} themes${quick ? ', quick answer' : ''}`;
}

function kindOf({ start }: Fit): FitView['kind'] {
  return start.kind === 'warm' ? 're-fit' : 'from scratch';
}

/** A re-fit keeps the themes that it began with, so its answer is that of the fit it goes back to. */
function answerOf(study: Study, fit: Fit): FitView['answer'] {
  let first = fit;
  while (first.start.from !== null) {
    const from = study.fits.get(first.start.from);
    if (from === undefined) break;
    first = from;
  }
  return first.settings['answer'] === 'quick' ? 'quick' : 'full';
}
