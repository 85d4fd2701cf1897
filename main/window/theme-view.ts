import type { Refused, ThemeView, ThemeWordView } from '../api.ts';
import { give } from './answers.ts';
import { memosOnTheme } from './memos.ts';
import type { OpenStudy } from './open-study.ts';
import { seedCautions } from './seed-check.ts';
import { spreadOf } from './spread.ts';
import { passageViews } from './theme-passages.ts';
import { themeRows } from './theme-rows.ts';
import {
  formFor,
  tellingWordsOfColumn,
  termScoresOf,
  wordsOfColumn,
  type WordOfTheme,
} from './theme-words.ts';
import { definitionView, earlierCodings, wordingViews } from './wordings.ts';

const wordsShown = 30;

export function themeView(
  open: OpenStudy,
  { theme: id }: { readonly theme: string },
): { readonly value: ThemeView } | Refused {
  const { study, now } = open;
  const theme = study.themes.get(id);
  if (theme === undefined) return open.refusal({ ok: false, code: 'unknown theme', subject: id });
  const row = themeRows(open).find((each) => each.id === id);
  if (row === undefined) {
    // Merged away, or a candidate of a fit that is not on screen.
    return open.refusal({
      ok: false,
      code: theme.mergedInto === null ? 'unknown theme' : 'merged theme',
      subject: id,
    });
  }
  const column = now.themes.columnOf.get(id);
  const spread = column === undefined ? undefined : spreadOf(open.desk, now.themes)[column];
  const people = new Set<string>();
  for (const { participant } of now.fitted?.words.passages ?? []) people.add(participant);
  const views = (wordsOf: typeof wordsOfColumn): readonly ThemeWordView[] =>
    column === undefined
      ? []
      : wordViews(open, column, wordsOf(now.themes, column, wordsShown), theme.seeds);
  return give({
    row,
    definition: definitionView(theme.definition),
    version: theme.version,
    wordings: wordingViews(open, theme),
    earlierCodings: earlierCodings(open, theme).length,
    words: views(wordsOfColumn),
    tellingWords: views(tellingWordsOfColumn),
    seeds: theme.seeds,
    seedCautions: seedCautions(open, id, theme.seeds),
    shutOut: theme.shutOut,
    people: spread?.people ?? 0,
    ofPeople: people.size,
    mostFromOnePerson: spread?.person
      ? { name: now.participantName(spread.person.participant), share: spread.person.share }
      : null,
    mostAfterOneQuestion: spread?.question
      ? { question: spread.question.text, share: spread.question.share }
      : null,
    passages: passageViews(open, id, 'strongest'),
    memos: memosOnTheme(study, id),
  });
}

function wordViews(
  { now }: OpenStudy,
  column: number,
  words: readonly WordOfTheme[],
  seeds: readonly string[],
): readonly ThemeWordView[] {
  const seeded = new Set(seeds.map((seed) => formFor(now, seed)));
  const scores = termScoresOf(now.themes);
  const from = column * (now.fitted?.words.vocabulary.length ?? 0);
  return words.map(({ word, form, surface, probability }) => ({
    form,
    surface,
    probability,
    termScore: scores[from + word],
    joins: (now.fitted?.words.surfaces[word] ?? []).slice(1).map((other) => other.form),
    seeded: seeded.has(form),
  }));
}
