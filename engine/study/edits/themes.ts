import type { Edit } from '../edit.ts';
import { done, refused, type Refusal, type Result } from '../refusal.ts';
import type { Study, Theme, ThemeId } from '../study.ts';
import { isModelled, nameKey, visibleThemes } from '../themes.ts';
import { sameJson, withEntry, withEntryAt, withoutEntry, type Rules } from './rule.ts';

export const themeRules: Rules<
  | 'themeAdded'
  | 'themeRemoved'
  | 'themeRenamed'
  | 'themeDefined'
  | 'themePinned'
  | 'themeUnpinned'
  | 'themeSetAside'
  | 'themeBroughtBack'
  | 'themesMerged'
  | 'themesUnmerged'
  | 'themesOrdered'
> = {
  themeAdded: {
    apply(study, { theme, place = null }, restoring) {
      if (study.themes.has(theme.id)) return refused('already there', label(theme));
      if (!restoring) {
        if (theme.mergedInto !== null) return refused('merged theme', label(theme));
        const fault = nameOrNoneFault(study, theme.name, theme);
        if (fault !== null) return fault;
      }
      if (
        place !== null &&
        !(Number.isInteger(place) && place >= 0 && place <= study.themes.size)
      ) {
        return refused('changed since', label(theme));
      }
      return done({ ...study, themes: withEntryAt(study.themes, place, theme.id, theme) });
    },
    inverse: ({ theme, place = null }) => ({ kind: 'themeRemoved', theme, place }),
  },

  themeRemoved: {
    apply(study, { theme, place }) {
      const current = study.themes.get(theme.id);
      if (current === undefined) return refused('unknown theme', label(theme));
      const leaves = place ?? study.themes.size - 1;
      if (!sameJson(current, theme) || [...study.themes.keys()][leaves] !== theme.id) {
        return refused('changed since', label(current));
      }
      if (isReferredTo(study, theme.id)) return refused('theme in use', label(current));
      return done({ ...study, themes: withoutEntry(study.themes, theme.id) });
    },
    inverse: ({ theme, place }) => ({ kind: 'themeAdded', theme, place }),
  },

  themeRenamed: {
    apply(study, { theme: id, from, to }) {
      return change(study, id, (theme) => {
        if (theme.name !== from) return refused('changed since', theme.name ?? id);
        return nameOrNoneFault(study, to, theme) ?? done({ ...theme, name: to });
      });
    },
    inverse: ({ theme, from, to }) => ({ kind: 'themeRenamed', theme, from: to, to: from }),
  },

  themeDefined: {
    apply(study, { theme: id, from, to }) {
      return change(study, id, (theme) => {
        const { version, definition } = theme;
        if (!sameJson({ version, definition }, from)) return refused('changed since', label(theme));
        const fault = codeFault(study, to.definition.code ?? '', id);
        if (fault !== null) return fault;
        return done({ ...theme, ...to });
      });
    },
    inverse: ({ theme, from, to }) => ({ kind: 'themeDefined', theme, from: to, to: from }),
  },

  themePinned: flag('themeUnpinned', (theme, restoring) =>
    !isModelled(theme) && !restoring
      ? outsideModel(theme)
      : theme.pinned
        ? refused('same as before', label(theme))
        : done({ ...theme, pinned: true }),
  ),

  themeUnpinned: flag('themePinned', (theme) =>
    theme.pinned ? done({ ...theme, pinned: false }) : refused('same as before', label(theme)),
  ),

  themeSetAside: flag('themeBroughtBack', (theme) =>
    theme.setAside ? refused('same as before', label(theme)) : done({ ...theme, setAside: true }),
  ),

  themeBroughtBack: flag('themeSetAside', (theme) =>
    theme.setAside ? done({ ...theme, setAside: false }) : refused('same as before', label(theme)),
  ),

  themesMerged: {
    apply(study, { into, from }, restoring) {
      const target = study.themes.get(into);
      if (target === undefined) return refused('unknown theme', into);
      if (!restoring) {
        if (target.mergedInto !== null) return refused('merged theme', label(target));
        if (target.setAside) return refused('theme set aside', label(target));
      }
      if (from.length === 0 || from.includes(into)) {
        return refused('merge into itself', label(target));
      }
      const themes = new Map(study.themes);
      for (const id of from) {
        const theme = themes.get(id);
        if (theme === undefined) return refused('unknown theme', id);
        if (theme.mergedInto !== null) return refused('merged theme', label(theme));
        if (theme.setAside) return refused('theme set aside', label(theme));
        // Its words would have nowhere to go. The other way round, codings by hand join a theme.
        if (target.origin === 'by hand' && theme.origin !== 'by hand') {
          return refused('theme by hand', label(target));
        }
        themes.set(id, { ...theme, mergedInto: into });
      }
      return done({ ...study, themes });
    },
    inverse: ({ into, from }) => ({ kind: 'themesUnmerged', into, from }),
  },

  themesUnmerged: {
    apply(study, { into, from }) {
      if (from.length === 0) return refused('same as before', into);
      const themes = new Map(study.themes);
      for (const id of from) {
        const theme = themes.get(id);
        if (theme === undefined) return refused('unknown theme', id);
        if (theme.mergedInto !== into) return refused('changed since', label(theme));
        const fault = theme.name === null ? null : nameFault({ ...study, themes }, theme.name, id);
        if (fault !== null) return fault;
        themes.set(id, { ...theme, mergedInto: null });
      }
      return done({ ...study, themes });
    },
    inverse: ({ into, from }) => ({ kind: 'themesMerged', into, from }),
  },

  themesOrdered: {
    apply(study, { from, to }) {
      if (!sameJson([...study.themes.keys()], from)) return refused('changed since', '');
      if (to.length !== from.length || new Set(to).size !== to.length) {
        return refused('unknown theme', '');
      }
      const themes = new Map<ThemeId, Theme>();
      for (const id of to) {
        const theme = study.themes.get(id);
        if (theme === undefined) return refused('unknown theme', id);
        themes.set(id, theme);
      }
      return done({ ...study, themes });
    },
    inverse: ({ from, to }) => ({ kind: 'themesOrdered', from: to, to: from }),
  },
};

/** What a refusal calls a theme. */
export function label(theme: Theme): string {
  return theme.name ?? theme.id;
}

/** Refuses what only makes sense for a theme with a word distribution. */
export function outsideModel(theme: Theme): Refusal {
  if (theme.mergedInto !== null) return refused('merged theme', label(theme));
  if (theme.setAside) return refused('theme set aside', label(theme));
  return refused('theme by hand', label(theme));
}

/** Replaces one theme by what `step` makes of it; a merged theme takes no more changes. */
export function change(
  study: Study,
  id: ThemeId,
  step: (theme: Theme) => Result<Theme>,
): Result<Study> {
  const theme = study.themes.get(id);
  if (theme === undefined) return refused('unknown theme', id);
  if (theme.mergedInto !== null) return refused('merged theme', label(theme));
  const changed = step(theme);
  if (!changed.ok) return changed;
  return done({ ...study, themes: withEntry(study.themes, id, changed.value) });
}

function flag<Back extends 'themePinned' | 'themeUnpinned' | 'themeSetAside' | 'themeBroughtBack'>(
  back: Back,
  step: (theme: Theme, restoring: boolean) => Result<Theme>,
) {
  return {
    apply: (study: Study, { theme: id }: { readonly theme: ThemeId }, restoring: boolean) =>
      change(study, id, (theme) => step(theme, restoring)),
    inverse: ({ theme }: { readonly theme: ThemeId }): Edit => ({ kind: back, theme }),
  };
}

/** Only a candidate may go without a name. */
function nameOrNoneFault(study: Study, name: string | null, theme: Theme): Refusal | null {
  if (name !== null) return nameFault(study, name, theme.id);
  return theme.origin === 'fitted' ? null : refused('empty name', label(theme));
}

/** Refuses a name that is blank or another visible theme's. */
export function nameFault(study: Study, name: string, except: ThemeId): Refusal | null {
  if (name.trim() === '') return refused('empty name', except);
  const key = nameKey(name);
  for (const other of visibleThemes(study)) {
    if (other.id !== except && other.name !== null && nameKey(other.name) === key) {
      return refused('name taken', other.name);
    }
  }
  return null;
}

/** Refuses a code that is another visible theme's. */
function codeFault(study: Study, code: string, except: ThemeId): Refusal | null {
  const key = nameKey(code);
  if (key === '') return null;
  const taken = visibleThemes(study).some(
    (other) => other.id !== except && nameKey(other.definition.code ?? '') === key,
  );
  return taken ? refused('code taken', code) : null;
}

/** Whether a merge, a fit, a heading, a coding or a memo would lose its theme. */
export function isReferredTo(study: Study, id: ThemeId): boolean {
  if (study.under.has(id)) return true;
  for (const theme of study.themes.values()) if (theme.mergedInto === id) return true;
  for (const fit of study.fits.values()) if (fit.themes.includes(id)) return true;
  for (const byId of study.codings.values()) {
    for (const coding of byId.values()) if (coding.theme === id) return true;
  }
  for (const { subject } of study.memos.values()) {
    if (subject.kind === 'theme' && subject.theme === id) return true;
  }
  return false;
}
