import { done, refused } from '../refusal.ts';
import type { EvidenceKind, FitId, Study } from '../study.ts';
import { isModelled } from '../themes.ts';
import { isReferredTo, nameFault, outsideModel } from './themes.ts';
import { sameJson, withEntry, withoutEntry, type Rules } from './rule.ts';

const evidenceKinds: readonly EvidenceKind[] = ['steadiness', 'how many'];

export const fitRules: Rules<
  'modelFitted' | 'fitRemoved' | 'fitChosen' | 'fitRenamed' | 'evidenceGathered'
> = {
  modelFitted: {
    apply(study, { fit, found, before }) {
      if (study.fits.has(fit.id)) return refused('already there', fit.id);
      if (study.fit !== before) return refused('changed since', fit.id);
      const themes = new Map(study.themes);
      for (const theme of found) {
        if (themes.has(theme.id)) return refused('already there', theme.name ?? theme.id);
        const fault = theme.name === null ? null : nameFault(study, theme.name, theme.id);
        if (fault !== null) return fault;
        themes.set(theme.id, theme);
      }
      for (const id of fit.themes) {
        const theme = themes.get(id);
        if (theme === undefined) return refused('unknown theme', id);
        if (!isModelled(theme)) return outsideModel(theme);
      }
      for (const from of [fit.start.from, fit.start.rowsFrom ?? null]) {
        if (from !== null && !study.fits.has(from)) return refused('unknown fit', from);
      }
      return done({ ...study, themes, fits: withEntry(study.fits, fit.id, fit), fit: fit.id });
    },
    // Showing the fit before would not be enough: themes asked for would stay in use by a fit that
    // was taken back, and what came before it could not be undone any more.
    inverse: ({ fit, found, before }) => ({ kind: 'fitRemoved', fit, found, before }),
  },

  fitRemoved: {
    apply(study, { fit, found, before }) {
      const current = study.fits.get(fit.id);
      if (current === undefined) return refused('unknown fit', fit.id);
      if (before !== null && !study.fits.has(before)) return refused('unknown fit', before);
      const last = found.length === 0 ? [] : [...study.themes.values()].slice(-found.length);
      if (study.fit !== fit.id || !sameJson(current, fit) || !sameJson(last, found)) {
        return refused('changed since', fit.id);
      }
      const fits = withoutEntry(study.fits, fit.id);
      if (before === fit.id || isFitInUse(study, fit.id)) return refused('fit is in use', fit.id);
      const themes = new Map(study.themes);
      for (const { id, name } of found) {
        if (isReferredTo({ ...study, fits }, id)) return refused('theme in use', name ?? id);
        themes.delete(id);
      }
      return done({ ...study, themes, fits, fit: before });
    },
    inverse: ({ fit, found, before }) => ({ kind: 'modelFitted', fit, found, before }),
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

  evidenceGathered: {
    apply(study, { fit: id, what, result, before }) {
      const current = study.fits.get(id);
      if (current === undefined) return refused('unknown fit', id);
      if (!isPlain(result)) return refused('unusable value', what);
      const { evidence = {}, ...fit } = current;
      if (!sameJson(evidence[what] ?? null, before)) return refused('changed since', id);
      // In a fixed order, so that taking back restores the same bytes.
      const kept = evidenceKinds.flatMap((kind) => {
        const value = kind === what ? result : (evidence[kind] ?? null);
        return value === null ? [] : [[kind, value] as const];
      });
      const changed = kept.length === 0 ? fit : { ...fit, evidence: Object.fromEntries(kept) };
      return done({ ...study, fits: withEntry(study.fits, id, changed) });
    },
    inverse: ({ fit, what, result, before }) => ({
      kind: 'evidenceGathered',
      fit,
      what,
      result: before,
      before: result,
    }),
  },
};

/** Whether a value comes back from JSON as it was. */
function isPlain(value: unknown): boolean {
  if (typeof value === 'number') return Number.isFinite(value);
  if (value === null || typeof value === 'string' || typeof value === 'boolean') return true;
  return typeof value === 'object' && Object.values(value).every(isPlain);
}

function isFitInUse(study: Study, id: FitId): boolean {
  for (const { start } of study.fits.values()) {
    if (start.from === id || start.rowsFrom === id) return true;
  }
  for (const byId of [...study.codings.values(), ...study.nones.values()]) {
    for (const { under } of byId.values()) if (under.fit === id) return true;
  }
  for (const { scored } of study.draws.values()) if (scored?.fit === id) return true;
  return false;
}
