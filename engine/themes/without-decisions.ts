import { defaultFitSettings } from '../model/index.ts';
import type { Study } from '../study/index.ts';
import { defaultSettings } from './settings.ts';
import type { Fitted } from './fitted.ts';

/**
 * A passage's proportions as they would be had nobody decided anything about it, K values that sum
 * to 1: its words folded in under the fit's own themes, from the base of the priors alone. Equal to
 * what is stored (within f32) where nothing was decided. A decision raises or shuts out its theme in
 * its passage, so a stored strength says nothing about how well the words alone would have served.
 *
 * One passage of the kernel's fold (model/fold-in.ts), in f64: CVB0 with frozen themes, each
 * occurrence left out of its own prediction. `themeAlpha` is the base of each row.
 */
export function proportionsWithoutDecisions(
  { fit, words, phi }: Fitted,
  passage: number,
  themeAlpha: readonly number[],
): Float64Array {
  const themes = fit.themes.length;
  const { offsets, indices, counts } = words.counts;
  const size = words.vocabulary.length;
  const from = offsets[passage];
  const entries = offsets[passage + 1] - from;
  const shares = new Float64Array(entries * themes);
  const expected = new Float64Array(themes);
  const weights = new Float64Array(themes);

  for (let entry = 0; entry < entries; entry++) {
    const word = indices[from + entry];
    const count = counts[from + entry];
    let total = 0;
    for (let k = 0; k < themes; k++) {
      weights[k] = themeAlpha[k] * phi[k * size + word];
      total += weights[k];
    }
    for (let k = 0; k < themes; k++) {
      shares[entry * themes + k] = total > 0 ? weights[k] / total : 0;
      expected[k] += count * shares[entry * themes + k];
    }
  }
  for (let pass = 1; pass < passesOf(fit.settings); pass++) {
    for (let entry = 0; entry < entries; entry++) {
      const word = indices[from + entry];
      const count = counts[from + entry];
      const one = Math.min(1, count);
      let total = 0;
      for (let k = 0; k < themes; k++) {
        const others = Math.max(0, expected[k] - one * shares[entry * themes + k]);
        weights[k] = (others + themeAlpha[k]) * phi[k * size + word];
        total += weights[k];
      }
      for (let k = 0; k < themes; k++) {
        const share = total > 0 ? weights[k] / total : 0;
        expected[k] += count * (share - shares[entry * themes + k]);
        shares[entry * themes + k] = share;
      }
    }
  }
  let all = 0;
  for (let k = 0; k < themes; k++) all += themeAlpha[k] + Math.max(0, expected[k]);
  return expected.map((words, k) => (themeAlpha[k] + Math.max(0, words)) / all);
}

/**
 * The base of the passage-theme prior in each row of a fit: alpha, times one more for each theme that
 * had been merged into it by then.
 */
export function themeAlphaOf(study: Study, { fit }: Pick<Fitted, 'fit'>): number[] {
  const { alpha } = fit.settings;
  const base = typeof alpha === 'number' ? alpha : defaultSettings.alpha;
  const rows = new Set(fit.themes);
  const absorbed = new Map<string, number>();
  for (const { id, mergedInto } of study.themes.values()) {
    // A theme that was merged later still has its own row.
    if (mergedInto === null || rows.has(id)) continue;
    const into = firstRow(study, mergedInto, rows);
    if (into !== null) absorbed.set(into, (absorbed.get(into) ?? 0) + 1);
  }
  return fit.themes.map((id) => base * (1 + (absorbed.get(id) ?? 0)));
}

/** The first theme with a row on the way that merges lead. */
function firstRow(study: Study, theme: string, rows: ReadonlySet<string>): string | null {
  let id: string | null = theme;
  while (id !== null && !rows.has(id)) id = study.themes.get(id)?.mergedInto ?? null;
  return id;
}

function passesOf(settings: Fitted['fit']['settings']): number {
  const passes = settings['model.foldPasses'];
  return typeof passes === 'number' ? passes : defaultFitSettings.foldPasses;
}
