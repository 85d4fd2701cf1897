import { compareCodeUnits } from '../../engine/numbers/index.ts';
import { belongsTo, overlap, type Span } from '../../engine/spans/index.ts';
import {
  resolveTheme,
  type Coding,
  type Standing,
  type Study,
  type Theme,
  type Transcript,
} from '../../engine/study/index.ts';
import { passagesOf, type Passage } from '../../engine/text/index.ts';
import {
  settingsOf,
  suggestions,
  type Fitted,
  type Suggestion,
} from '../../engine/themes/index.ts';
import { transcriptsInOrder, type Desk } from '../desk.ts';
import { hashOf } from '../ids.ts';
import { printedProportions, toSixDecimals } from './proportions.ts';
import { themeName } from './theme-name.ts';
import { themeShare } from './theme-table.ts';

/** Standings that can be reported; a suggestion waits for a person. */
export const reportable = ['confirmed', 'by hand', 'suggested', 'rejected'] as const;
export type Reportable = (typeof reportable)[number];

/** One theme on one stretch of talk, with all that a reader of a report needs to weigh it. */
export interface CodedExcerpt {
  /** Follows from transcript, place and theme, so that two reports can be compared. */
  readonly id: string;
  readonly transcript: string;
  readonly participant: string;
  readonly speaker: string;
  /** Milliseconds. */
  readonly startTime: number | null;
  readonly questionBefore: string;
  /** The number of its passage in the transcript, from 1. */
  readonly passage: number | null;
  readonly span: Span;
  readonly text: string;
  readonly themeId: string;
  readonly theme: string;
  readonly themeShare: number;
  readonly standing: Reportable;
  readonly strength: number | null;
  readonly strengthAtDecision: number | null;
  readonly seenSuggestion: boolean | null;
  readonly drawnBy: string;
  readonly reader: string;
  readonly decidedAt: string;
  readonly codebookVersion: number | null;
  readonly memo: string;
  readonly attributes: Readonly<Record<string, string>>;
}

type PlacedPassage = Passage & { readonly index: number | null };

/**
 * The excerpts of the given standings, ordered by their theme's share, theme id, strength (strongest
 * first), transcript and place.
 */
export function codedExcerpts(desk: Desk, standings: ReadonlySet<Reportable>): CodedExcerpt[] {
  const { study } = desk;
  const fitted = desk.fitted(study.fit);
  const settings = settingsOf(study.settings);
  const offered = new Map<number | null, Suggestion[]>();
  if (fitted !== null && standings.has('suggested')) {
    for (const offer of suggestions(study, fitted, settings.suggestions)) {
      const own = offered.get(offer.passage);
      if (own === undefined) offered.set(offer.passage, [offer]);
      else own.push(offer);
    }
  }
  const excerpts: CodedExcerpt[] = [];
  for (const transcript of transcriptsInOrder(study)) {
    const passages = passagesIn(desk, transcript, fitted);
    const context = { desk, fitted, transcript, passages };
    for (const coding of study.codings.get(transcript.id)?.values() ?? []) {
      if (standings.has(coding.standing)) excerpts.push(ofCoding(context, coding));
    }
    for (const passage of passages) {
      for (const { theme } of offered.get(passage.index) ?? []) {
        excerpts.push(ofSuggestion(context, passage, theme));
      }
    }
  }
  return excerpts.sort(
    (a, b) =>
      b.themeShare - a.themeShare ||
      compareCodeUnits(a.themeId, b.themeId) ||
      (b.strength ?? -1) - (a.strength ?? -1) ||
      compareCodeUnits(a.transcript, b.transcript) ||
      a.span.start - b.span.start ||
      a.span.end - b.span.end ||
      compareCodeUnits(a.standing, b.standing),
  );
}

interface Context {
  readonly desk: Desk;
  readonly fitted: Fitted | null;
  readonly transcript: Transcript;
  readonly passages: readonly PlacedPassage[];
}

function ofCoding(context: Context, coding: Coding): CodedExcerpt {
  const { study } = context.desk;
  const { span, under } = coding;
  const passage = passageOf(context.passages, span);
  const theme = resolveTheme(study, coding.theme) as Theme;
  return {
    ...placeOf(context, span, passage),
    ...themeOf(context, span, theme),
    standing: coding.standing,
    strength: strengthIn(context, passage, theme),
    strengthAtDecision: coding.strength,
    seenSuggestion: under.seenSuggestion,
    drawnBy: under.drawnBy,
    reader: study.readers.get(under.reader)?.name ?? under.reader,
    decidedAt: under.at,
    codebookVersion: coding.codebookVersion,
    memo: coding.memo,
  };
}

function ofSuggestion(context: Context, passage: PlacedPassage, themeId: string): CodedExcerpt {
  const span = { start: passage.start, end: passage.end };
  const theme = context.desk.study.themes.get(themeId) as Theme;
  return {
    ...placeOf(context, span, passage),
    ...themeOf(context, span, theme),
    standing: 'suggested',
    strength: strengthIn(context, passage, theme),
    strengthAtDecision: null,
    seenSuggestion: null,
    drawnBy: '',
    reader: '',
    decidedAt: '',
    codebookVersion: null,
    memo: '',
  };
}

function placeOf({ desk, transcript }: Context, span: Span, passage: PlacedPassage | null) {
  const text = desk.text(transcript.id);
  const turn = transcript.turns.find((one) => one.start < span.end && span.start < one.end);
  const label = passage?.speaker ?? turn?.speaker ?? null;
  const id = transcript.speakers.find((speaker) => speaker.label === label)?.participant;
  const participant = id ? desk.study.participants.get(id) : undefined;
  const question = passage?.questionBefore ?? null;
  return {
    transcript: transcript.name,
    participant: participant?.name ?? '',
    speaker: label ?? '',
    startTime: passage?.startTime ?? turn?.startTime ?? null,
    questionBefore: question === null ? '' : text.slice(question.start, question.end),
    passage: passage?.number ?? null,
    span: { start: span.start, end: span.end },
    text: text.slice(span.start, span.end),
    attributes: participant?.attributes ?? {},
  };
}

function themeOf({ desk, fitted, transcript }: Context, span: Span, theme: Theme) {
  return {
    id: hashOf([transcript.name, span.start, span.end, theme.id]).slice(0, 16),
    themeId: theme.id,
    theme: themeName(theme, fitted),
    themeShare: themeShare(desk.study, fitted, theme.id) ?? 0,
  };
}

/** The passage that a coding lies in: of those it belongs to, the one it shares most with. */
function passageOf(passages: readonly PlacedPassage[], span: Span): PlacedPassage | null {
  let best: PlacedPassage | null = null;
  for (const passage of passages) {
    if (!belongsTo(span, passage)) continue;
    if (best === null || overlap(span, passage) > overlap(span, best)) best = passage;
  }
  return best;
}

function strengthIn(
  { desk, fitted }: Context,
  passage: PlacedPassage | null,
  theme: Theme,
): number | null {
  if (fitted === null || passage === null || passage.index === null) return null;
  const proportions = printedProportions(fitted, passage.index);
  const own = proportions.filter(
    (_, row) => resolveTheme(desk.study, fitted.fit.themes[row])?.id === theme.id,
  );
  return own.length === 0 ? null : toSixDecimals(own.reduce((sum, value) => sum + value, 0));
}

function passagesIn(desk: Desk, transcript: Transcript, fitted: Fitted | null): PlacedPassage[] {
  if (fitted !== null) {
    return fitted.words.passages.flatMap((passage, index) =>
      passage.transcript === transcript.id ? [{ ...passage, index }] : [],
    );
  }
  const text = desk.transcriptText(transcript.id);
  return passagesOf(text, settingsOf(desk.study.settings).text).map((passage) => ({
    ...passage,
    index: null,
  }));
}

/** All attribute names of a study, in code-unit order. */
export function attributeNames(study: Study): string[] {
  const names = new Set(
    [...study.participants.values()].flatMap(({ attributes }) => Object.keys(attributes)),
  );
  return [...names].sort(compareCodeUnits);
}

export type { Standing };
