import {
  alike,
  calibration,
  fewestJudged,
  type Calibration,
  type Judged,
} from '../../engine/evidence/index.ts';
import type { Draw, None } from '../../engine/study/index.ts';
import { drawnNow, type DrawnNow } from './draws.ts';
import { Kept } from './kept.ts';
import { rowsIn } from './passages-now.ts';
import type { StudyNow } from './study-now.ts';
import { strengthsOf, themesNow } from './themes-now.ts';

const kept = new WeakMap<StudyNow, Kept<Calibration>>();

/** Strength set against decisions, from random draws that were read with suggestions in sight. */
export function calibrationNow(now: StudyNow): Calibration {
  const { study } = now;
  const known = kept.get(now) ?? new Kept<Calibration>();
  kept.set(now, known);
  const on = [study.draws, study.codings, study.nones, study.settings, study.themes, now.fitted];
  return known.get(on, () => {
    const draws = [...study.draws.values()].filter(({ kind }) => kind === 'random draw');
    return calibration(draws.flatMap((draw) => judgedIn(now, draw)));
  });
}

/** Of suggestions about as strong, how many were judged and confirmed; null below ten. */
export function alikeNow(
  now: StudyNow,
  strength: number,
): { readonly judged: number; readonly confirmed: number } | null {
  if (now.study.draws.size === 0) return null;
  const bin = alike(calibrationNow(now), Math.min(1, strength));
  if (bin === undefined || bin.judged < fewestJudged) return null;
  return { judged: bin.judged, confirmed: bin.confirmed };
}

function judgedIn(now: StudyNow, draw: Draw): Judged[] {
  const threshold = now.settings.suggestions.strength;
  return drawnNow(now, draw).flatMap((drawn): Judged[] => {
    const { codings, nones } = now.decidedIn(drawn.transcript).passages[drawn.index];
    const here = codings.filter(({ under }) => under.drawnBy === draw.name && under.seenSuggestion);
    const decided = new Set(here.map(({ theme }) => now.themeOf(theme)));
    const answered = here
      .filter(({ strength }) => strength !== null && strength >= threshold)
      .map(({ strength, standing }) => ({
        strength: strength as number,
        confirmed: standing !== 'rejected',
      }));
    const none = nones.find(({ under }) => under.drawnBy === draw.name && under.seenSuggestion);
    const refused =
      none === undefined
        ? []
        : suggestedUnder(now, none, drawn).filter(([theme]) => !decided.has(theme));
    return [...answered, ...refused.map(([, strength]) => ({ strength, confirmed: false }))];
  });
}

/** What was suggested for a passage by the fit on screen when it was said that nothing applies. */
function suggestedUnder(
  now: StudyNow,
  { under, span }: None,
  { transcript }: DrawnNow,
): [theme: string, strength: number][] {
  const { study, desk, settings } = now;
  if (under.fit === null || !study.fits.has(under.fit)) return [];
  const fitted = desk.fitted(under.fit);
  if (fitted === null) return [];
  const row = rowsIn(fitted, transcript).find((each) => {
    const { start, end } = fitted.words.passages[each];
    return start === span.start && end === span.end;
  });
  if (row === undefined) return [];
  const limits = settings.suggestions;
  if (fitted.words.passages[row].countedWords < limits.countedWords) return [];
  const themes = fitted === now.fitted ? now.themes : themesNow(study, fitted);
  const found: [string, number][] = [];
  strengthsOf(themes, row)?.forEach((strength, column) => {
    if (themes.offered[column] === 0 || strength < limits.strength) return;
    found.push([themes.columns[column], Math.min(1, strength)]);
  });
  return found;
}
