import type { SuggestionView, ThemeRowView } from '../../../main/api.ts';

export interface ThemeOffer {
  readonly theme: ThemeRowView;
  /** From 1 in the codebook: the digit that chooses it, up to nine. */
  readonly place: number;
  /** Where it is one of the strongest here. */
  readonly strength: number | null;
}

/**
 * The themes to choose from. With nothing typed: the strongest here, then the codebook. Otherwise
 * those whose name holds every typed word, names that begin with the text first.
 */
export function offersFor(
  themes: readonly ThemeRowView[],
  strongest: readonly SuggestionView[],
  typed: string,
): ThemeOffer[] {
  const strengths = new Map(strongest.map(({ theme, strength }) => [theme, strength]));
  const all = themes.map((theme, index) => ({
    theme,
    place: index + 1,
    strength: strengths.get(theme.id) ?? null,
  }));
  const sought = typed.trim().toLowerCase();
  if (sought === '') {
    const rank = new Map(strongest.map(({ theme }, index) => [theme, index]));
    const at = ({ theme }: ThemeOffer): number => rank.get(theme.id) ?? Infinity;
    return [
      ...all.filter((offer) => rank.has(offer.theme.id)).sort((a, b) => at(a) - at(b)),
      ...all.filter((offer) => !rank.has(offer.theme.id)),
    ];
  }
  const words = sought.split(/\s+/u);
  const found = all.filter(({ theme }) => {
    const label = theme.label.toLowerCase();
    return words.every((word) => label.includes(word));
  });
  const begins = ({ theme }: ThemeOffer): boolean => theme.label.toLowerCase().startsWith(sought);
  return [...found.filter(begins), ...found.filter((offer) => !begins(offer))];
}
