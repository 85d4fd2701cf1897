import { done, refused } from '../refusal.ts';
import type { ReaderId, SettingValue, Study } from '../study.ts';
import { sameJson, withEntry, withoutEntry, type Rules } from './rule.ts';

export const studyRules: Rules<
  'studyStarted' | 'studyRenamed' | 'settingsChanged' | 'readerAdded' | 'readerRemoved'
> = {
  studyStarted: {
    apply(study, { study: id, name }) {
      if (study.id !== '') return refused('study already started', study.name);
      if (name.trim() === '') return refused('empty name', id);
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
        const current = Object.hasOwn(settings, key) ? settings[key] : null;
        if (!sameJson(current, from)) return refused('changed since', key);
        if (key === '__proto__' || !isSettingValue(to)) return refused('unusable value', key);
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
      const current = study.readers.get(reader.id);
      if (current === undefined) return refused('unknown reader', reader.name);
      if (!sameJson(current, reader)) return refused('changed since', current.name);
      if (isReaderInUse(study, reader.id)) return refused('reader in use', current.name);
      return done({ ...study, readers: withoutEntry(study.readers, reader.id) });
    },
    inverse: ({ reader }) => ({ kind: 'readerAdded', reader }),
  },
};

/** The file is JSON, which turns NaN and infinities into null. Edits of it come from outside. */
function isSettingValue(value: unknown): value is SettingValue {
  if (Array.isArray(value)) return value.every((item) => typeof item === 'string');
  if (typeof value === 'number') return Number.isFinite(value);
  return value === null || typeof value === 'string' || typeof value === 'boolean';
}

function isReaderInUse(study: Study, reader: ReaderId): boolean {
  for (const memo of study.memos.values()) if (memo.reader === reader) return true;
  for (const byId of [...study.codings.values(), ...study.nones.values()]) {
    for (const { under } of byId.values()) if (under.reader === reader) return true;
  }
  for (const draw of study.draws.values()) {
    if (draw.reader === reader || draw.scored?.reader === reader) return true;
  }
  return false;
}
