import { proportionsWithoutDecisions, themeAlphaOf } from '../../engine/themes/index.ts';
import type { Study } from '../../engine/study/index.ts';
import type { ThemesNow } from './themes-now.ts';

const bases = new WeakMap<
  object,
  { readonly themes: unknown; readonly alpha: readonly number[] }
>();

/**
 * A passage's strength in each column as it would be without the decisions on it; null where the fit
 * counted nothing there.
 */
export function strengthsWithout(
  { study, themes }: { readonly study: Study; readonly themes: ThemesNow },
  row: number,
): Float64Array | null {
  const { fitted, columns, columnOfRow } = themes;
  if (fitted === null || row < 0 || fitted.words.passages[row].countedWords === 0) return null;
  let base = bases.get(fitted);
  if (base?.themes !== study.themes) {
    base = { themes: study.themes, alpha: themeAlphaOf(study, fitted) };
    bases.set(fitted, base);
  }
  const shares = proportionsWithoutDecisions(fitted, row, base.alpha);
  const strengths = new Float64Array(columns.length);
  shares.forEach((share, each) => {
    if (columnOfRow[each] >= 0) strengths[columnOfRow[each]] += share;
  });
  return strengths;
}
