import { compareCodeUnits } from '../numbers/index.ts';
import {
  fittedThemes,
  isModelled,
  resolveTheme,
  themesWithDecisions,
  type Study,
  type Theme,
  type ThemeId,
} from '../study/index.ts';

/** A row of the model to be fitted and the decisions that shape it. */
export interface ModelledTheme {
  readonly id: ThemeId;
  readonly pinned: boolean;
  /** Its own seeds and those of the themes merged into it, less what is shut out; in order. */
  readonly seeds: readonly string[];
  readonly shutOut: readonly string[];
  /** Ids of the themes whose words went into it. */
  readonly absorbed: readonly ThemeId[];
}

/**
 * The themes that a fit models, in codebook order: those of the fit on screen, and those that a
 * person asked for or decided on. Other candidates of other fits stay out. A merged theme brings
 * its seeds along; what either side shut out stays out only where the theme that remains says so.
 */
export function modelledThemes(study: Study): ModelledTheme[] {
  const fitted = fittedThemes(study);
  const decided = themesWithDecisions(study);
  const absorbed = new Map<ThemeId, Theme[]>();
  for (const theme of study.themes.values()) {
    if (theme.mergedInto === null) continue;
    const target = resolveTheme(study, theme.id);
    if (target !== undefined) {
      absorbed.set(target.id, [...(absorbed.get(target.id) ?? []), theme]);
    }
  }
  return [...study.themes.values()]
    .filter(
      (theme) =>
        isModelled(theme) &&
        (theme.origin === 'asked for' ||
          theme.name !== null ||
          theme.pinned ||
          decided.has(theme.id) ||
          fitted.has(theme.id) ||
          (absorbed.get(theme.id) ?? []).some(({ id }) => fitted.has(id))),
    )
    .map((theme) => {
      const merged = absorbed.get(theme.id) ?? [];
      const shutOut = new Set(theme.shutOut);
      const seeds = new Set([theme, ...merged].flatMap((each) => each.seeds));
      return {
        id: theme.id,
        pinned: theme.pinned,
        seeds: [...seeds].filter((word) => !shutOut.has(word)).sort(compareCodeUnits),
        shutOut: theme.shutOut,
        absorbed: merged.map(({ id }) => id),
      };
    });
}
