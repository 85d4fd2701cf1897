import { belongsTo } from '../../engine/spans/index.ts';
import { resolveTheme, type Memo, type Study } from '../../engine/study/index.ts';
import type { MemoView, PassagePlace } from '../api.ts';

const byTranscript = new WeakMap<Study['memos'], Map<string, Memo[]>>();

/** The memos on a transcript and on its passages. */
function memosIn({ memos }: Study, transcript: string): readonly Memo[] {
  let sorted = byTranscript.get(memos);
  if (sorted === undefined) {
    sorted = new Map();
    for (const memo of memos.values()) {
      const { subject } = memo;
      if (subject.kind !== 'transcript' && subject.kind !== 'passage') continue;
      const own = sorted.get(subject.transcript);
      if (own === undefined) sorted.set(subject.transcript, [memo]);
      else own.push(memo);
    }
    byTranscript.set(memos, sorted);
  }
  return sorted.get(transcript) ?? [];
}

export function memosOnStudy(study: Study): MemoView[] {
  return views(
    study,
    [...study.memos.values()].filter(({ subject }) => subject.kind === 'study'),
  );
}

export function memosOnTranscript(study: Study, transcript: string): MemoView[] {
  return views(
    study,
    memosIn(study, transcript).filter(({ subject }) => subject.kind === 'transcript'),
  );
}

export function memosOnPassage(study: Study, place: PassagePlace): MemoView[] {
  return views(
    study,
    memosIn(study, place.transcript).filter(
      ({ subject }) => subject.kind === 'passage' && belongsTo(subject.span, place),
    ),
  );
}

/** Memos on a theme and on those that were merged into it. */
export function memosOnTheme(study: Study, theme: string): MemoView[] {
  return views(
    study,
    [...study.memos.values()].filter(
      ({ subject }) => subject.kind === 'theme' && resolveTheme(study, subject.theme)?.id === theme,
    ),
  );
}

/** Oldest first. */
function views({ readers }: Study, memos: readonly Memo[]): MemoView[] {
  return memos
    .map(({ id, text, reader, at }) => ({ id, text, reader: readers.get(reader)?.name ?? '', at }))
    .sort((a, b) => (a.at < b.at ? -1 : a.at > b.at ? 1 : 0));
}
