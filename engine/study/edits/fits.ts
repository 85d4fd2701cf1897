import { done, refused } from '../refusal.ts';
import { withEntry, type Rules } from './rule.ts';

export const fitRules: Rules<'modelFitted' | 'fitChosen' | 'fitRenamed'> = {
  modelFitted: {
    apply(study, { fit, found, before }) {
      if (study.fits.has(fit.id)) return refused('already there', fit.id);
      if (study.fit !== before) return refused('changed since', fit.id);
      const themes = new Map(study.themes);
      for (const theme of found) {
        if (themes.has(theme.id)) return refused('already there', theme.name ?? theme.id);
        themes.set(theme.id, theme);
      }
      for (const id of fit.themes) if (!themes.has(id)) return refused('unknown theme', id);
      return done({ ...study, themes, fits: withEntry(study.fits, fit.id, fit), fit: fit.id });
    },
    // The fit and its themes stay in the study: taking it back shows the one before, and a redo
    // computes nothing.
    inverse: ({ fit, before }) => ({ kind: 'fitChosen', from: fit.id, to: before }),
  },

  fitChosen: {
    apply(study, { from, to }) {
      if (study.fit !== from) return refused('changed since', from ?? '');
      if (to !== null && !study.fits.has(to)) return refused('unknown fit', to);
      return done({ ...study, fit: to });
    },
    inverse: ({ from, to }) => ({ kind: 'fitChosen', from: to, to: from }),
  },

  fitRenamed: {
    apply(study, { fit: id, from, to }) {
      const current = study.fits.get(id);
      if (current === undefined) return refused('unknown fit', id);
      if (current.name !== from) return refused('changed since', id);
      return done({ ...study, fits: withEntry(study.fits, id, { ...current, name: to }) });
    },
    inverse: ({ fit, from, to }) => ({ kind: 'fitRenamed', fit, from: to, to: from }),
  },
};
