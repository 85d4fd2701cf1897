import { resolveTheme, type Study, type ThemeId } from '../study/index.ts';
import { leadingRow, rowOf, strengthOf, type Fitted } from './fitted.ts';
import { topWords } from './top-words.ts';

/** A passage whose leading theme is another one after a re-fit. */
export interface MovedPassage {
  /** Index in the words of the new fit. */
  readonly passage: number;
  readonly from: ThemeId;
  readonly to: ThemeId;
  /** Strength of each of the two, before and after. */
  readonly strengths: {
    readonly fromBefore: number;
    readonly fromAfter: number;
    readonly toBefore: number;
    readonly toAfter: number;
  };
}

/** What a re-fit did to the words that a theme shows. */
export interface MovedWords {
  readonly theme: ThemeId;
  readonly gained: readonly string[];
  readonly lost: readonly string[];
}

export interface Moved {
  readonly passages: readonly MovedPassage[];
  readonly themes: readonly MovedWords[];
  /** Themes that only one of the two fits has. */
  readonly appeared: readonly ThemeId[];
  readonly gone: readonly ThemeId[];
  /** Passages that both fits have and that both counted words in. */
  readonly compared: number;
}

export interface MovedLimits {
  /** Least total variation between a passage's proportions before and after, 0 to 1. */
  readonly totalVariation: number;
  /** How many words of a theme are compared. */
  readonly words: number;
}

/** Measured: below this, changes of the leading theme are ties that fell the other way. */
export const movedLimits: MovedLimits = { totalVariation: 0.2, words: 15 };

/**
 * What moved between two fits: passages whose leading theme changed and whose proportions moved by
 * more than the limit, and the words each theme gained and lost among its first ones. Passages are
 * matched by their place in the text, themes by id with merges followed.
 */
export function whatMoved(
  study: Study,
  before: Fitted,
  after: Fitted,
  limits: MovedLimits = movedLimits,
): Moved {
  const earlier = new Map<string, number>();
  before.words.passages.forEach((passage, index) => {
    earlier.set(`${passage.transcript} ${passage.start} ${passage.end}`, index);
  });
  const idsBefore = before.fit.themes.map((id) => resolveTheme(study, id)?.id ?? id);
  const idsAfter = after.fit.themes.map((id) => resolveTheme(study, id)?.id ?? id);

  const passages: MovedPassage[] = [];
  let compared = 0;
  after.words.passages.forEach((passage, index) => {
    const old = earlier.get(`${passage.transcript} ${passage.start} ${passage.end}`);
    if (old === undefined) return;
    const rowBefore = leadingRow(before, old);
    const rowAfter = leadingRow(after, index);
    if (rowBefore < 0 || rowAfter < 0) return;
    compared++;
    const from = idsBefore[rowBefore];
    const to = idsAfter[rowAfter];
    if (from === to) return;
    const was = proportions(before, old, idsBefore);
    const is = proportions(after, index, idsAfter);
    if (totalVariation(was, is) <= limits.totalVariation) return;
    passages.push({
      passage: index,
      from,
      to,
      strengths: {
        fromBefore: was.get(from) ?? 0,
        fromAfter: is.get(from) ?? 0,
        toBefore: was.get(to) ?? 0,
        toAfter: is.get(to) ?? 0,
      },
    });
  });

  const both = idsAfter.filter((id) => idsBefore.includes(id));
  const themes = both.flatMap((theme) => {
    const was = shown(before, theme, limits.words);
    const is = shown(after, theme, limits.words);
    const gained = is.filter((word) => !was.includes(word));
    const lost = was.filter((word) => !is.includes(word));
    return gained.length + lost.length === 0 ? [] : [{ theme, gained, lost }];
  });
  return {
    passages,
    themes,
    appeared: idsAfter.filter((id) => !idsBefore.includes(id)),
    gone: [...new Set(idsBefore.filter((id) => !idsAfter.includes(id)))],
    compared,
  };
}

function proportions(
  fitted: Fitted,
  passage: number,
  ids: readonly ThemeId[],
): ReadonlyMap<ThemeId, number> {
  const shares = new Map<ThemeId, number>();
  ids.forEach((id, row) => {
    shares.set(id, (shares.get(id) ?? 0) + strengthOf(fitted, passage, row));
  });
  return shares;
}

function totalVariation(a: ReadonlyMap<ThemeId, number>, b: ReadonlyMap<ThemeId, number>): number {
  let sum = 0;
  for (const id of new Set([...a.keys(), ...b.keys()])) {
    sum += Math.abs((a.get(id) ?? 0) - (b.get(id) ?? 0));
  }
  return sum / 2;
}

function shown(fitted: Fitted, theme: ThemeId, count: number): string[] {
  const row = rowOf(fitted, theme);
  return row < 0 ? [] : topWords(fitted, row, count).map(({ form }) => form);
}
