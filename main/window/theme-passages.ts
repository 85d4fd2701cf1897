import { isHeldBack, type Coding } from '../../engine/study/index.ts';
import type { Api, Refused, ThemePassageList, ThemePassageView } from '../api.ts';
import { give } from './answers.ts';
import { carriedBy } from './carried-by.ts';
import type { DecidedPassage } from './decided-now.ts';
import { oneEachFirst } from './one-each-first.ts';
import type { OpenStudy } from './open-study.ts';
import type { Placed } from './passages-now.ts';
import { earlierCodings } from './wordings.ts';
import { strengthOf } from './themes-now.ts';

const passagesShown = 40;

interface Shown {
  readonly passage: Placed;
  readonly decided: DecidedPassage;
  readonly strength: number;
}

export function themePassages(
  open: OpenStudy,
  { theme, list }: Api['themePassages']['takes'],
): { readonly value: readonly ThemePassageView[] } | Refused {
  return open.study.themes.has(theme)
    ? give(passageViews(open, theme, list))
    : open.refusal({ ok: false, code: 'unknown theme', subject: theme });
}

/**
 * Passages of a theme by the fit on screen, one a participant before a second from anyone: the
 * strongest (a theme without words there shows what was coded with it, in reading order); those
 * nearest to where suggestions begin, on either side, that nobody decided on; those that a person
 * rejected; those that were coded under an earlier wording.
 */
export function passageViews(
  open: OpenStudy,
  theme: string,
  list: ThemePassageList,
): readonly ThemePassageView[] {
  const { study, now } = open;
  const column = now.themes.columnOf.get(theme);
  const all: Shown[] = [];
  const isShown = filterFor(open, theme, list);
  for (const { id } of now.transcripts) {
    const { passages } = now.decidedIn(id);
    now.passagesIn(id).forEach((passage, index) => {
      const decided = passages[index];
      const strength =
        column === undefined || isHeldBack(study, id, passage)
          ? null
          : strengthOf(now.themes, passage.row, column);
      if (isShown(passage, decided, strength)) {
        all.push({ passage, decided, strength: strength ?? 0 });
      }
    });
  }
  const edge = now.settings.suggestions.strength;
  if (list === 'nearest the edge') {
    all.sort((a, b) => Math.abs(a.strength - edge) - Math.abs(b.strength - edge));
  } else {
    all.sort((a, b) => b.strength - a.strength);
  }
  return oneEachFirst(all, ({ passage }) => passage.participant)
    .slice(0, passagesShown)
    .map((shown) => passageView(open, theme, column, shown));
}

function filterFor(
  open: OpenStudy,
  theme: string,
  list: ThemePassageList,
): (passage: Placed, decided: DecidedPassage, strength: number | null) => boolean {
  const { now, study } = open;
  const enough = Math.max(1, now.settings.suggestions.countedWords);
  const isCounted = (passage: Placed, strength: number | null): boolean =>
    strength !== null && passage.countedWords >= enough;
  switch (list) {
    case 'strongest':
      return (passage, decided, strength) =>
        codingOf(open, decided, theme) !== null || isCounted(passage, strength);
    case 'nearest the edge':
      return (passage, decided, strength) =>
        isCounted(passage, strength) &&
        codingOf(open, decided, theme) === null &&
        decided.nones.length === 0;
    case 'rejected':
      return (_passage, decided) => codingOf(open, decided, theme)?.standing === 'rejected';
    case 'earlier wording': {
      const current = study.themes.get(theme);
      const earlier = new Set(current === undefined ? [] : earlierCodings(open, current));
      return (_passage, decided) => decided.codings.some((coding) => earlier.has(coding));
    }
  }
}

function passageView(
  open: OpenStudy,
  theme: string,
  column: number | undefined,
  { passage, decided, strength }: Shown,
): ThemePassageView {
  const { study, now, desk } = open;
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
    version: coding?.codebookVersion ?? null,
  };
}

/** What stands of a theme in a passage: that it applies, before that it does not. */
function codingOf({ now }: OpenStudy, { codings }: DecidedPassage, theme: string): Coding | null {
  const own = codings.filter((coding) => now.themeOf(coding.theme) === theme);
  return own.find(({ standing }) => standing !== 'rejected') ?? own[0] ?? null;
}
