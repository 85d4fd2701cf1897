import type { Study, Theme, ThemeId } from './study.ts';

/** Follows merges to the theme that now holds an earlier theme's codings and words. */
export function resolveTheme(study: Study, id: ThemeId): Theme | undefined {
  let theme = study.themes.get(id);
  while (theme !== undefined && theme.mergedInto !== null) {
    theme = study.themes.get(theme.mergedInto);
  }
  return theme;
}

/** Whether a theme takes part in the model: not by hand, not set aside, not merged away. */
export function isModelled(theme: Theme): boolean {
  return theme.origin !== 'by hand' && !theme.setAside && theme.mergedInto === null;
}

/**
 * The themes of the fit on screen and of the fits that it was warmed up from. A re-fit drops a theme
 * only where a person set it aside or merged it, so that one brought back is still known by this.
 */
export function fittedThemes(study: Study): ReadonlySet<ThemeId> {
  const themes = new Set<ThemeId>();
  let id = study.fit;
  while (id !== null) {
    const fit = study.fits.get(id);
    if (fit === undefined) break;
    for (const theme of fit.themes) themes.add(theme);
    id = fit.start.kind === 'warm' ? fit.start.from : null;
  }
  return themes;
}

/**
 * The themes that a person sees, in codebook order: merged ones are gone, and so are unnamed
 * candidates of fits other than the one on screen unless a decision refers to them.
 */
export function visibleThemes(study: Study): Theme[] {
  const fitted = fittedThemes(study);
  const decided = themesWithDecisions(study);
  return [...study.themes.values()].filter(
    (theme) =>
      theme.mergedInto === null &&
      (theme.origin !== 'fitted' ||
        theme.name !== null ||
        theme.setAside ||
        fitted.has(theme.id) ||
        decided.has(theme.id)),
  );
}

/** Themes that carry a decision of any kind, and so may not vanish with a fit. */
export function themesWithDecisions(study: Study): ReadonlySet<ThemeId> {
  const decided = new Set<ThemeId>();
  for (const theme of study.themes.values()) {
    if (
      theme.name !== null ||
      theme.pinned ||
      theme.setAside ||
      theme.seeds.length > 0 ||
      theme.shutOut.length > 0 ||
      theme.version > 1
    ) {
      decided.add(theme.id);
    }
    if (theme.mergedInto !== null) {
      const target = resolveTheme(study, theme.id);
      if (target !== undefined) decided.add(target.id);
    }
  }
  for (const id of study.under.keys()) {
    const theme = resolveTheme(study, id);
    if (theme !== undefined) decided.add(theme.id);
  }
  for (const { subject } of study.memos.values()) {
    if (subject.kind === 'theme') {
      const theme = resolveTheme(study, subject.theme);
      if (theme !== undefined) decided.add(theme.id);
    }
  }
  for (const byId of study.codings.values()) {
    for (const coding of byId.values()) {
      const theme = resolveTheme(study, coding.theme);
      if (theme !== undefined) decided.add(theme.id);
    }
  }
  return decided;
}

/** Two names are one where only case or surrounding and doubled spaces differ. */
export function nameKey(name: string): string {
  return name.normalize('NFC').trim().replace(/\s+/gu, ' ').toLowerCase();
}
