import type { Edit, Entry, Fit, Study, Transcript } from '../../engine/study/index.ts';
import { settingsOf } from '../../engine/themes/index.ts';

/** What was decided since a fit was begun and still stands. */
export interface SinceFit {
  /** In order; what was taken back is left out, and what was done again stands once. */
  readonly entries: readonly Entry[];
  /** Transcripts whose passages or speakers may be others now, those that came and those that went. */
  readonly transcripts: ReadonlySet<string>;
  /** Whether a setting that turns texts into counted words is another one. */
  readonly textSettings: boolean;
  /** Whether a setting that divides texts into passages is another one. */
  readonly passageSettings: boolean;
  readonly stale: boolean;
}

const passageKeys = [
  'language',
  'passageMinimumWords',
  'passageMaximumWords',
  'shortTurnWords',
] as const;

export function sinceFit(study: Study, trail: Iterable<Entry>, fit: Fit): SinceFit {
  const entries = standing(trail, fit.basis);
  const transcripts = changedTranscripts(study, entries);
  const was = settingsOf(fit.settings).text;
  const is = settingsOf(study.settings).text;
  const textSettings = JSON.stringify(was) !== JSON.stringify(is);
  return {
    entries,
    transcripts,
    textSettings,
    passageSettings: passageKeys.some((key) => was[key] !== is[key]),
    stale: textSettings || transcripts.size > 0,
  };
}

/** Entries after `basis` that still have an effect. */
function standing(trail: Iterable<Entry>, basis: number): Entry[] {
  const left = new Map<number, Entry>();
  for (const entry of trail) {
    if (entry.sequence <= basis) continue;
    // An undo of something older, or a redo of something newer that was undone, has an effect of its
    // own; any other pair of a decision and its taking back has none.
    if (entry.undoes === undefined || !left.delete(entry.undoes)) left.set(entry.sequence, entry);
  }
  return [...left.values()];
}

function changedTranscripts(study: Study, entries: readonly Entry[]): Set<string> {
  const first = new Map<string, Edit>();
  for (const { edit } of entries) {
    const id = transcriptOf(edit);
    if (id !== null && !first.has(id)) first.set(id, edit);
  }
  const changed = new Set<string>();
  for (const [id, edit] of first) {
    if (!isAsBefore(study.transcripts.get(id), edit)) changed.add(id);
  }
  return changed;
}

/** Whether a transcript is again what it was before the first edit that touched it. */
function isAsBefore(now: Transcript | undefined, first: Edit): boolean {
  switch (first.kind) {
    case 'transcriptGathered':
      return now === undefined;
    case 'speakersAssigned':
      return now !== undefined && JSON.stringify(now.speakers) === JSON.stringify(first.from);
    default:
      return false;
  }
}

function transcriptOf(edit: Edit): string | null {
  switch (edit.kind) {
    case 'transcriptGathered':
    case 'transcriptRemoved':
      return edit.transcript.id;
    case 'speakersAssigned':
    case 'textRevised':
      return edit.transcript;
    case 'transcriptDescribed':
      return edit.from.facts?.language === edit.to.facts?.language ? null : edit.transcript;
    default:
      return null;
  }
}
