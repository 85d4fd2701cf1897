import { done, refused, type Refusal } from '../refusal.ts';
import type { HeadingId, Study } from '../study.ts';
import { nameKey } from '../themes.ts';
import { label } from './themes.ts';
import { sameJson, withEntry, withEntryAt, withoutEntry, type Rules } from './rule.ts';

export const headingRules: Rules<
  'headingAdded' | 'headingRemoved' | 'headingRenamed' | 'themePutUnder'
> = {
  headingAdded: {
    apply(study, { heading, place }) {
      const { headings } = study;
      if (headings.has(heading.id)) return refused('already there', heading.name);
      if (place !== null && !(Number.isInteger(place) && place >= 0 && place <= headings.size)) {
        return refused('changed since', heading.name);
      }
      const fault = nameFault(study, heading.name, heading.id);
      if (fault !== null) return fault;
      return done({ ...study, headings: withEntryAt(headings, place, heading.id, heading) });
    },
    inverse: ({ heading, place }) => ({ kind: 'headingRemoved', heading, place }),
  },

  headingRemoved: {
    apply(study, { heading, place }) {
      const { headings } = study;
      const current = headings.get(heading.id);
      if (current === undefined) return refused('unknown heading', heading.name);
      const leaves = place ?? headings.size - 1;
      if (!sameJson(current, heading) || [...headings.keys()][leaves] !== heading.id) {
        return refused('changed since', current.name);
      }
      for (const over of study.under.values()) {
        if (over === heading.id) return refused('heading in use', current.name);
      }
      return done({ ...study, headings: withoutEntry(headings, heading.id) });
    },
    inverse: ({ heading, place }) => ({ kind: 'headingAdded', heading, place }),
  },

  headingRenamed: {
    apply(study, { heading: id, from, to }) {
      const current = study.headings.get(id);
      if (current === undefined) return refused('unknown heading', id);
      if (current.name !== from) return refused('changed since', current.name);
      const fault = nameFault(study, to, id);
      if (fault !== null) return fault;
      return done({ ...study, headings: withEntry(study.headings, id, { ...current, name: to }) });
    },
    inverse: ({ heading, from, to }) => ({ kind: 'headingRenamed', heading, from: to, to: from }),
  },

  themePutUnder: {
    apply(study, { theme: id, from, to }, restoring) {
      const theme = study.themes.get(id);
      if (theme === undefined) return refused('unknown theme', id);
      if ((study.under.get(id) ?? null) !== from) return refused('changed since', label(theme));
      if (to === from) return refused('same as before', label(theme));
      if (to !== null) {
        if (!study.headings.has(to)) return refused('unknown heading', to);
        if (theme.mergedInto !== null && !restoring) return refused('merged theme', label(theme));
      }
      const under = to === null ? withoutEntry(study.under, id) : withEntry(study.under, id, to);
      return done({ ...study, under });
    },
    inverse: ({ theme, from, to }) => ({ kind: 'themePutUnder', theme, from: to, to: from }),
  },
};

/** Refuses a name that is blank or another heading's. */
function nameFault(study: Study, name: string, except: HeadingId): Refusal | null {
  if (name.trim() === '') return refused('empty name', except);
  const key = nameKey(name);
  for (const other of study.headings.values()) {
    if (other.id !== except && nameKey(other.name) === key) return refused('name taken', name);
  }
  return null;
}
