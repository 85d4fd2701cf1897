import { done, refused, type Refusal } from '../refusal.ts';
import type { MemoSubject, Study } from '../study.ts';
import { spanFault } from './codings.ts';
import { sameJson, withEntry, withoutEntry, type Rules } from './rule.ts';

export const memoRules: Rules<'memoWritten' | 'memoErased' | 'memoRevised'> = {
  memoWritten: {
    apply(study, { memo }, restoring) {
      if (!restoring) {
        const fault = subjectFault(study, memo.subject);
        if (fault !== null) return fault;
        if (!study.readers.has(memo.reader)) return refused('unknown reader', memo.reader);
      }
      if (study.memos.has(memo.id)) return refused('already there', memo.id);
      return done({ ...study, memos: withEntry(study.memos, memo.id, memo) });
    },
    inverse: ({ memo }) => ({ kind: 'memoErased', memo }),
  },

  memoErased: {
    apply(study, { memo }) {
      const current = study.memos.get(memo.id);
      if (current === undefined) return refused('unknown memo', memo.id);
      if (!sameJson(current, memo)) return refused('changed since', memo.id);
      return done({ ...study, memos: withoutEntry(study.memos, memo.id) });
    },
    inverse: ({ memo }) => ({ kind: 'memoWritten', memo }),
  },

  memoRevised: {
    apply(study, { memo: id, from, to }) {
      const current = study.memos.get(id);
      if (current === undefined) return refused('unknown memo', id);
      if (current.text !== from) return refused('changed since', id);
      return done({ ...study, memos: withEntry(study.memos, id, { ...current, text: to }) });
    },
    inverse: ({ memo, from, to }) => ({ kind: 'memoRevised', memo, from: to, to: from }),
  },
};

function subjectFault(study: Study, subject: MemoSubject): Refusal | null {
  switch (subject.kind) {
    case 'study':
      return null;
    case 'transcript':
      return study.transcripts.has(subject.transcript)
        ? null
        : refused('unknown transcript', subject.transcript);
    case 'passage':
      return spanFault(study, subject.transcript, subject.span);
    case 'theme':
      return study.themes.has(subject.theme) ? null : refused('unknown theme', subject.theme);
  }
}
