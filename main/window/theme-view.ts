import type { Coding } from '../../engine/study/index.ts';
import type { Refused, ThemeView, ThemeWordView } from '../api.ts';
import { give } from './answers.ts';
import { carriedBy } from './carried-by.ts';
import type { DecidedPassage } from './decided-now.ts';
import { memosOnTheme } from './memos.ts';
import { oneEachFirst } from './one-each-first.ts';
import type { OpenStudy } from './open-study.ts';
import type { Placed } from './passages-now.ts';
import { spreadOf } from './spread.ts';
import { themeRows } from './theme-rows.ts';
import { formFor, wordsOfColumn } from './theme-words.ts';
import { strengthOf } from './themes-now.ts';

const wordsShown = 30;
const passagesShown = 40;

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
  return give({
    row,
    definition: theme.definition,
    version: theme.version,
    words: column === undefined ? [] : wordViews(open, column, theme.seeds),
    seeds: theme.seeds,
    shutOut: theme.shutOut,
    people: spread?.people ?? 0,
    ofPeople: people.size,
    mostFromOnePerson: spread?.person
      ? { name: now.participantName(spread.person.participant), share: spread.person.share }
      : null,
    mostAfterOneQuestion: spread?.question
      ? { question: spread.question.text, share: spread.question.share }
      : null,
    passages: passageViews(open, id, column),
    memos: memosOnTheme(study, id),
  });
}

function wordViews(
  { now }: OpenStudy,
  column: number,
  seeds: readonly string[],
): readonly ThemeWordView[] {
  const seeded = new Set(seeds.map((seed) => formFor(now, seed)));
  return wordsOfColumn(now.themes, column, wordsShown).map(
    ({ word, form, surface, probability }) => ({
      form,
      surface,
      probability,
      joins: (now.fitted?.words.surfaces[word] ?? []).slice(1).map((other) => other.form),
      seeded: seeded.has(form),
    }),
  );
}

interface Shown {
  readonly passage: Placed;
  readonly decided: DecidedPassage;
  readonly strength: number;
}

/**
 * The strongest passages by the fit on screen. A theme without words there shows what was coded with
 * it, in reading order.
 */
function passageViews(
  open: OpenStudy,
  theme: string,
  column: number | undefined,
): ThemeView['passages'] {
  const { study, now, desk } = open;
  const enough = Math.max(1, now.settings.suggestions.countedWords);
  const all: Shown[] = [];
  for (const { id } of now.transcripts) {
    const { passages } = now.decidedIn(id);
    now.passagesIn(id).forEach((passage, index) => {
      const decided = passages[index];
      const coded = codingOf(open, decided, theme) !== null;
      const strength = column === undefined ? null : strengthOf(now.themes, passage.row, column);
      if (coded || (strength !== null && passage.countedWords >= enough)) {
        all.push({ passage, decided, strength: strength ?? 0 });
      }
    });
  }
  all.sort((a, b) => b.strength - a.strength);
  return oneEachFirst(all, ({ passage }) => passage.participant)
    .slice(0, passagesShown)
    .map(({ passage, decided, strength }) => {
      const { transcript, start, end, startTime, row, countedWords } = passage;
      const coding = codingOf(open, decided, theme);
      return {
        transcript,
        start,
        end,
        transcriptName: study.transcripts.get(transcript)?.name ?? '',
        participant: now.participantName(passage.participant),
        time: startTime,
        text: desk.text(transcript).slice(start, end),
        carriedBy: column === undefined ? [] : carriedBy(now.themes, row, column),
        strength,
        countedWords,
        standing: coding?.standing ?? (decided.nones.length > 0 ? 'none' : 'suggested'),
        coding: coding?.id ?? null,
      };
    });
}

/** What stands of a theme in a passage: that it applies, before that it does not. */
function codingOf({ now }: OpenStudy, { codings }: DecidedPassage, theme: string): Coding | null {
  const own = codings.filter((coding) => now.themeOf(coding.theme) === theme);
  return own.find(({ standing }) => standing !== 'rejected') ?? own[0] ?? null;
}
