import { done, refused } from '../refusal.ts';
import type { SettingValue } from '../study.ts';
import { sameJson, withEntry, withoutEntry, type Rules } from './rule.ts';

export const studyRules: Rules<
  'studyStarted' | 'studyRenamed' | 'settingsChanged' | 'readerAdded' | 'readerRemoved'
> = {
  studyStarted: {
    apply(study, { study: id, name }) {
      if (study.id !== '') return refused('study already started', study.name);
      return done({ ...study, id, name });
    },
    inverse: () => null,
  },

  studyRenamed: {
    apply(study, { from, to }) {
      if (to.trim() === '') return refused('empty name', from);
      if (study.name !== from) return refused('changed since', study.name);
      return done({ ...study, name: to });
    },
    inverse: ({ from, to }) => ({ kind: 'studyRenamed', from: to, to: from }),
  },

  settingsChanged: {
    apply(study, { changes }) {
      const settings: Record<string, SettingValue> = { ...study.settings };
      for (const { key, from, to } of changes) {
        if (!sameJson(settings[key] ?? null, from)) return refused('changed since', key);
        if (to === null) delete settings[key];
        else settings[key] = to;
      }
      return done({ ...study, settings });
    },
    inverse: ({ changes }) => ({
      kind: 'settingsChanged',
      changes: [...changes].reverse().map(({ key, from, to }) => ({ key, from: to, to: from })),
    }),
  },

  readerAdded: {
    apply(study, { reader }) {
      if (reader.name.trim() === '') return refused('empty name', reader.id);
      if (study.readers.has(reader.id)) return refused('already there', reader.name);
      return done({ ...study, readers: withEntry(study.readers, reader.id, reader) });
    },
    inverse: ({ reader }) => ({ kind: 'readerRemoved', reader }),
  },

  readerRemoved: {
    apply(study, { reader }) {
      if (!study.readers.has(reader.id)) return refused('unknown reader', reader.name);
      return done({ ...study, readers: withoutEntry(study.readers, reader.id) });
    },
    inverse: ({ reader }) => ({ kind: 'readerAdded', reader }),
  },
};
