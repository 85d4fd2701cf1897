import type { ThemeRowView } from '../../../main/api.ts';

/** How a theme stands with people, in the few words that a list has room for. */
export function standingOf(theme: ThemeRowView, people: number): string {
  if (theme.setAside) return 'set aside';
  const met = `${theme.confirmedPeople} of ${people}`;
  if (theme.origin === 'by hand') return `by hand · ${met}`;
  if (theme.name === null && theme.confirmedPeople === 0) return 'candidate';
  return theme.pinned ? `pinned · ${met}` : `${met} people`;
}

export function percent(share: number): string {
  return `${Math.round(share * 100)} %`;
}

/** What stands for the name of a candidate in a list that says beside it that it is one. */
export function firstWords(theme: ThemeRowView): string {
  return theme.words.length === 0 ? theme.label : `${theme.words.slice(0, 3).join(', ')} …`;
}

/** A share, strength or cosine: two decimals, as in "0.91". */
export function share(value: number): string {
  return value.toFixed(2);
}
