import { coldSampleOf, visibleThemes, type Entry, type Theme } from '../../engine/study/index.ts';
import type { Overview } from '../api.ts';
import { isDecided } from './decided-now.ts';
import { redoInWords, undoInWords } from './history.ts';
import type { OpenStudy } from './open-study.ts';
import type { Placed } from './passages-now.ts';
import { progress } from './reading-evidence.ts';
import { waitingInWords } from './waiting.ts';

/** What the frame shows on every place. The study must be settled. */
export function overview(open: OpenStudy): Overview {
  const { study, now, file, refinement } = open;
  let words = 0;
  let passages = 0;
  let unread = 0;
  let transcriptsRead = 0;
  for (const { id } of study.transcripts.values()) {
    const placed = now.passagesIn(id);
    words += wordsIn(placed);
    passages += placed.length;
    unread += now.decidedIn(id).unread;
    if (wasReadBeforeFit(open, id)) transcriptsRead++;
  }
  const cold = coldSampleOf(study);
  return {
    study: { id: study.id, name: study.name, path: file.path },
    readOnly: file.readOnly,
    hasPassword: file.locked,
    savedAt: lastOf(now.trail.values())?.at ?? null,
    revision: study.sequence,
    transcripts: study.transcripts.size,
    words,
    themes: themesInUse(open).length,
    passages,
    unread,
    transcriptsRead,
    fitted: now.fitted !== null,
    refining: refinement === null ? null : { fit: refinement.fit, fraction: refinement.fraction },
    stale: now.since?.stale ?? false,
    waiting: waitingInWords(now),
    followChanges: now.settings.followChanges,
    undo: file.readOnly ? null : undoInWords(open),
    redo: file.readOnly ? null : redoInWords(open),
    reader: { id: open.reader.id, name: open.reader.name },
    coldSample: cold === null ? null : { ...progress(open, cold), scored: cold.scored !== null },
  };
}

/** Themes that a person sees and that are not set aside, in codebook order. */
export function themesInUse({ study }: OpenStudy): Theme[] {
  return visibleThemes(study).filter((theme) => !theme.setAside);
}

const sums = new WeakMap<readonly Placed[], number>();

/** Words that participants say in passages. */
export function wordsIn(placed: readonly Placed[]): number {
  const known = sums.get(placed);
  if (known !== undefined) return known;
  const sum = placed.reduce((all, { words }) => all + words, 0);
  sums.set(placed, sum);
  return sum;
}

function wasReadBeforeFit({ now }: OpenStudy, transcript: string): boolean {
  const { passages, unread } = now.decidedIn(transcript);
  return (
    unread === 0 &&
    passages.length > 0 &&
    passages.every(
      (passage) =>
        isDecided(passage) &&
        [...passage.codings, ...passage.nones].some(({ under }) => under.fit === null),
    )
  );
}

function lastOf(entries: Iterable<Entry>): Entry | undefined {
  let last: Entry | undefined;
  for (const entry of entries) last = entry;
  return last;
}
