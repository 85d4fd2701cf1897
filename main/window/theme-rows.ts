import { shareOf } from '../../engine/themes/index.ts';
import { visibleThemes, type Theme } from '../../engine/study/index.ts';
import type { ThemeRowView } from '../api.ts';
import type { OpenStudy } from './open-study.ts';
import { wordsOfColumn } from './theme-words.ts';
import type { ThemesNow } from './themes-now.ts';

const wordsInRow = 8;

/** The themes in codebook order, what is set aside last. */
export function themeRows(open: OpenStudy): ThemeRowView[] {
  const coded = codedByTheme(open);
  const offered = offersByColumn(open);
  return visibleThemes(open.study)
    .sort((a, b) => Number(a.setAside) - Number(b.setAside))
    .map((theme) => themeRow(open, theme, coded, offered));
}

interface Tally {
  count: number;
  readonly people: Set<string>;
}

function themeRow(
  { study, now }: OpenStudy,
  theme: Theme,
  coded: ReadonlyMap<string, Tally>,
  offered: readonly Tally[],
): ThemeRowView {
  const { themes } = now;
  const column = themes.columnOf.get(theme.id);
  return {
    id: theme.id,
    name: theme.name,
    code: theme.definition.code ?? '',
    heading: study.under.get(theme.id) ?? null,
    label: now.label(theme.id),
    origin: theme.origin,
    pinned: theme.pinned,
    setAside: theme.setAside,
    modelled: column !== undefined,
    share: column === undefined ? null : shareOfColumn(themes, column),
    words: column === undefined ? [] : surfacesOf(themes)[column],
    confirmedPeople: coded.get(theme.id)?.people.size ?? 0,
    suggestedPeople: column === undefined ? 0 : offered[column].people.size,
    codings: coded.get(theme.id)?.count ?? 0,
    suggestions: column === undefined ? 0 : offered[column].count,
  };
}

function shareOfColumn({ fitted, rows }: ThemesNow, column: number): number {
  return fitted === null ? 0 : rows[column].reduce((sum, row) => sum + shareOf(fitted, row), 0);
}

const surfaces = new WeakMap<ThemesNow, readonly (readonly string[])[]>();

function surfacesOf(themes: ThemesNow): readonly (readonly string[])[] {
  const known =
    surfaces.get(themes) ??
    themes.columns.map((_, column) =>
      wordsOfColumn(themes, column, wordsInRow).map(({ surface }) => surface),
    );
  surfaces.set(themes, known);
  return known;
}

/** Confirmed codings and codings by hand of each theme, merges followed, and whose words they are. */
export function codedByTheme({ study, now }: OpenStudy): Map<string, Tally> {
  const tallies = new Map<string, Tally>();
  for (const [transcript, codings] of study.codings) {
    const placed = now.passagesIn(transcript);
    const { home } = now.decidedIn(transcript);
    for (const coding of codings.values()) {
      if (coding.standing === 'rejected') continue;
      const theme = now.themeOf(coding.theme) ?? coding.theme;
      const tally = tallies.get(theme) ?? { count: 0, people: new Set() };
      tallies.set(theme, tally);
      tally.count++;
      const at = home.get(coding.id);
      if (at !== undefined) tally.people.add(placed[at].participant);
    }
  }
  return tallies;
}

function offersByColumn({ study, now }: OpenStudy): Tally[] {
  const tallies = now.themes.columns.map((): Tally => ({ count: 0, people: new Set() }));
  for (const id of study.transcripts.keys()) {
    now.offersIn(id).columns.forEach(({ count, people }, column) => {
      tallies[column].count += count;
      for (const person of people) tallies[column].people.add(person);
    });
  }
  return tallies;
}
