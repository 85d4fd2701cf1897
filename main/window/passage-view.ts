import { isHeldBack, type Coding } from '../../engine/study/index.ts';
import type { CodingView, PassagePlace, PassageView, Refused, SuggestionView } from '../api.ts';
import { refuse } from './answers.ts';
import { carriedBy } from './carried-by.ts';
import { alikeNow } from './judged.ts';
import { memosOnPassage } from './memos.ts';
import type { Offer } from './offers-now.ts';
import type { OpenStudy } from './open-study.ts';
import type { Placed } from './passages-now.ts';
import { strengthOf, strengthsOf } from './themes-now.ts';
import { strengthsWithout } from './without-decisions.ts';

// "Another theme" offers what the model sees a trace of; the rest is found by name.
const mostOffered = 5;
const leastOffered = 0.05;

/** A passage of now by its place, as an index in its transcript. */
export function indexOf(open: OpenStudy, place: PassagePlace): number | Refused {
  if (!open.study.transcripts.has(place.transcript)) {
    return open.refusal({ ok: false, code: 'unknown transcript', subject: place.transcript });
  }
  const index = open.now
    .passagesIn(place.transcript)
    .findIndex(({ start, end }) => start === place.start && end === place.end);
  return index < 0 ? refuse('place changed') : index;
}

export function passageView(open: OpenStudy, transcript: string, index: number): PassageView {
  const { study, now } = open;
  const passage = now.passagesIn(transcript)[index];
  const { codings, nones } = now.decidedIn(transcript).passages[index];
  const [none] = nones;
  const without = codings.length === 0 ? null : strengthsWithout(now, passage.row);
  return {
    start: passage.start,
    end: passage.end,
    number: passage.number,
    speaker: passage.speaker,
    participant: now.participantName(passage.participant),
    time: passage.startTime,
    segments: passage.segments,
    question: passage.questionBefore,
    words: passage.words,
    countedWords: passage.countedWords,
    suggestions: now
      .offersIn(transcript)
      .passages[index].map((offer) => suggestionView(open, passage, offer)),
    strongest: strongestIn(open, passage).map((offer) => suggestionView(open, passage, offer)),
    codings: codings.map((coding) => codingView(open, coding, without)),
    heldBack: isHeldBack(study, transcript, passage),
    none:
      none === undefined
        ? null
        : {
            id: none.id,
            reader: study.readers.get(none.under.reader)?.name ?? '',
            at: none.under.at,
          },
    memos: memosOnPassage(study, { transcript, start: passage.start, end: passage.end }),
  };
}

/** The themes that the model sees in a passage, whatever was decided on them; strongest first. */
export function strongestIn({ study, now }: OpenStudy, passage: Placed): Offer[] {
  const { themes } = now;
  if (isHeldBack(study, passage.transcript, passage)) return [];
  const strengths = strengthsOf(themes, passage.row);
  if (strengths === null) return [];
  return [...strengths]
    .map((strength, column) => ({ strength, column }))
    .filter(({ strength, column }) => strength >= leastOffered && themes.offered[column] === 1)
    .sort((a, b) => b.strength - a.strength)
    .slice(0, mostOffered);
}

/**
 * A theme's strength in a passage as decisions record it: what its words alone would have, where
 * something was decided there before. Null where the fit has none for it, or where it is held back.
 */
export function strengthIn(
  { study, now }: OpenStudy,
  passage: Placed,
  theme: string,
  decidedBefore: boolean,
): number | null {
  if (isHeldBack(study, passage.transcript, passage)) return null;
  const column = now.themes.columnOf.get(now.themeOf(theme) ?? '');
  if (column === undefined) return null;
  const strength = decidedBefore
    ? (strengthsWithout(now, passage.row)?.[column] ?? null)
    : strengthOf(now.themes, passage.row, column);
  // Sums of f32 may stand a hair above one.
  return strength === null ? null : Math.min(1, strength);
}

function suggestionView(
  { now }: OpenStudy,
  { row }: Placed,
  { column, strength }: Offer,
): SuggestionView {
  const { themes } = now;
  const theme = themes.columns[column];
  return {
    theme,
    themeName: now.label(theme),
    strength,
    carriedBy: carriedBy(themes, row, column),
    alike: alikeNow(now, strength),
  };
}

function codingView(
  { study, now }: OpenStudy,
  coding: Coding,
  without: Float64Array | null,
): CodingView {
  const theme = now.themeOf(coding.theme) ?? coding.theme;
  const column = now.themes.columnOf.get(theme);
  return {
    id: coding.id,
    span: coding.span,
    theme,
    themeName: now.label(theme),
    standing: coding.standing,
    memo: coding.memo,
    reader: study.readers.get(coding.under.reader)?.name ?? '',
    at: coding.under.at,
    strengthAtDecision: coding.strength,
    strengthWithout: column === undefined ? null : (without?.[column] ?? null),
    together: coding.under.together ?? null,
  };
}
