import { sameSpan } from '../../engine/spans/index.ts';
import {
  isHeldBack,
  resolveTheme,
  type Coding,
  type DecidedUnder,
  type Edit,
  type MemoSubject,
  type Theme,
} from '../../engine/study/index.ts';
import type { Api, CodeRequest, PassageView, Refused, Span, UnderView } from '../api.ts';
import { give, isRefused, refuse } from './answers.ts';
import { passagesOfSpan } from './decided-now.ts';
import { drawSample, scoreColdSample } from './draws.ts';
import type { OpenStudy } from './open-study.ts';
import { indexOf, passageView, strengthIn, strongestIn } from './passage-view.ts';
import type { Placed } from './passages-now.ts';
import { readingList } from './reading-list.ts';
import type { Room } from './room.ts';
import { selectionIn } from './selection.ts';
import type { Handlers } from './session-types.ts';

const longestText = 1_000_000;

export function readingHandlers(
  room: Room,
): Pick<
  Handlers,
  | 'readingList'
  | 'passageView'
  | 'confirm'
  | 'reject'
  | 'codeByHand'
  | 'keepCoding'
  | 'removeCoding'
  | 'markNone'
  | 'clearNone'
  | 'moveCoding'
  | 'codeTogether'
  | 'drawSample'
  | 'scoreColdSample'
  | 'writeMemo'
  | 'reviseMemo'
> {
  return {
    readingList: room.look(readingList),

    passageView: room.look((open, { place }: Api['passageView']['takes']) => {
      const index = indexOf(open, place);
      if (typeof index !== 'number') return index;
      return give<PassageView>(passageView(open, place.transcript, index));
    }),

    confirm: room.decide(confirm),
    reject: room.decide(reject),
    codeByHand: room.decide(codeByHand),

    keepCoding: room.decide((open, { transcript, coding: id }: Api['keepCoding']['takes']) => {
      const coding = open.study.codings.get(transcript)?.get(id);
      return coding === undefined
        ? open.refusal({ ok: false, code: 'unknown coding', subject: id })
        : open.decide(keptUnder(open, coding));
    }),

    removeCoding: room.decide((open, { transcript, coding: id }: Api['removeCoding']['takes']) => {
      const coding = open.study.codings.get(transcript)?.get(id);
      return coding === undefined
        ? open.refusal({ ok: false, code: 'unknown coding', subject: id })
        : open.decide([{ kind: 'codingRemoved', coding }]);
    }),

    markNone: room.decide(markNone),

    clearNone: room.decide((open, { transcript, none: id }: Api['clearNone']['takes']) => {
      const none = open.study.nones.get(transcript)?.get(id);
      return none === undefined
        ? open.refusal({ ok: false, code: 'unknown coding', subject: id })
        : open.decide([{ kind: 'noneCleared', none }]);
    }),

    moveCoding: room.decide(moveCoding),
    codeTogether: room.decide(codeTogether),
    drawSample: room.decide(drawSample),
    scoreColdSample: room.decide(scoreColdSample),

    writeMemo: room.decide(writeMemo),

    reviseMemo: room.decide((open, { memo: id, text }: Api['reviseMemo']['takes']) => {
      const memo = open.study.memos.get(id);
      if (memo === undefined) return open.refusal({ ok: false, code: 'unknown memo', subject: id });
      if (text.length > longestText) return refuse('too long');
      if (text === memo.text) return null;
      // A memo without a word says nothing: it goes.
      return open.decide([
        text.trim() === ''
          ? { kind: 'memoErased', memo }
          : { kind: 'memoRevised', memo: id, from: memo.text, to: text },
      ]);
    }),
  };
}

/** A passage that is being decided on, and the theme in question. */
interface Question {
  readonly passage: Placed;
  readonly span: Span;
  readonly theme: Theme;
  /** What stands in the passage already: about this theme, and by this reader. */
  readonly codings: readonly Coding[];
  readonly mine: readonly Coding[];
}

function questionOf(open: OpenStudy, { place, theme, memo }: CodeRequest): Question | Refused {
  const index = indexOf(open, place);
  if (typeof index !== 'number') return index;
  const known = themeFor(open, theme);
  if (isRefused(known)) return known;
  if (memo.length > longestText) return refuse('too long');
  const codings = open.now
    .decidedIn(place.transcript)
    .passages[index].codings.filter((coding) => open.now.themeOf(coding.theme) === known.id);
  return {
    passage: open.now.passagesIn(place.transcript)[index],
    span: { start: place.start, end: place.end },
    theme: known,
    codings,
    mine: codings.filter(({ under }) => under.reader === open.reader.id),
  };
}

/**
 * Confirmed where the model offers the theme, as a suggestion or among the strongest; by hand where
 * the person found it. Takes the place of this reader's rejection, and of "no theme applies". Where
 * it stands already only a new memo is taken over.
 */
function confirm(open: OpenStudy, request: CodeRequest): Refused | null {
  const question = questionOf(open, request);
  if (isRefused(question)) return question;
  const { passage, span, theme, mine } = question;
  const standing = mine.find(
    (coding) => coding.standing !== 'rejected' && sameSpan(coding.span, span),
  );
  if (standing !== undefined) return again(open, standing, request.memo);
  const offered = offers(open, passage, theme.id);
  return open.decide([
    ...nonesOver(open, request.place.transcript, span),
    ...mine
      .filter((coding) => coding.standing === 'rejected')
      .map((coding): Edit => ({ kind: 'codingRemoved', coding })),
    made(open, request, passage, span, theme, offered ? 'confirmed' : 'by hand'),
  ]);
}

/** Takes the place of this reader's confirmation of the passage; not of a coding of a part of it. */
function reject(open: OpenStudy, request: CodeRequest): Refused | null {
  const question = questionOf(open, request);
  if (isRefused(question)) return question;
  const { passage, span, theme, mine } = question;
  const rejected = mine.find((coding) => coding.standing === 'rejected');
  if (rejected !== undefined) return again(open, rejected, request.memo);
  const whole = mine.filter((coding) => sameSpan(coding.span, span));
  if (whole.length < mine.length) return refuse('part coded', open.now.label(theme.id));
  return open.decide([
    ...whole.map((coding): Edit => ({ kind: 'codingRemoved', coding })),
    made(open, request, passage, span, theme, 'rejected'),
  ]);
}

function codeByHand(open: OpenStudy, request: CodeRequest): Refused | null {
  const { transcript } = request.place;
  const theme = themeFor(open, request.theme);
  if (isRefused(theme)) return theme;
  if (request.memo.length > longestText) return refuse('too long');
  const selection = selectionIn(open, transcript, request.place);
  if (isRefused(selection)) return selection;
  const { span } = selection;
  const standing = [...(open.study.codings.get(transcript)?.values() ?? [])].find(
    (coding) =>
      sameSpan(coding.span, span) &&
      coding.standing !== 'rejected' &&
      coding.under.reader === open.reader.id &&
      open.now.themeOf(coding.theme) === theme.id,
  );
  if (standing !== undefined) return withMemo(open, standing, request.memo);
  const placed = open.now.passagesIn(transcript);
  const [home] = passagesOfSpan(placed, span).sort(([, a], [, b]) => b - a);
  const passage = home === undefined ? null : placed[home[0]];
  // Whoever finds the theme in a part of a passage has changed their mind about rejecting it there.
  const { passages } = open.now.decidedIn(transcript);
  const rejections = new Set(
    passagesOfSpan(placed, span)
      .flatMap(([index]) => passages[index].codings)
      .filter(
        (coding) =>
          coding.standing === 'rejected' &&
          coding.under.reader === open.reader.id &&
          open.now.themeOf(coding.theme) === theme.id,
      ),
  );
  return open.decide([
    ...nonesOver(open, transcript, span),
    ...[...rejections].map((coding): Edit => ({ kind: 'codingRemoved', coding })),
    made(open, request, passage, span, theme, 'by hand'),
  ]);
}

function markNone(
  open: OpenStudy,
  { place, ...view }: UnderView & { readonly place: CodeRequest['place'] },
): Refused | null {
  const index = indexOf(open, place);
  if (typeof index !== 'number') return index;
  const { codings, nones } = open.now.decidedIn(place.transcript).passages[index];
  if (codings.some(({ standing }) => standing !== 'rejected')) return refuse('codings there');
  if (nones.length > 0) return null;
  const none = {
    id: open.desk.context.mintId('none'),
    transcript: place.transcript,
    span: { start: place.start, end: place.end },
    under: underOf(open, view, open.now.passagesIn(place.transcript)[index]),
  };
  return open.decide([{ kind: 'noneMarked', none }]);
}

/**
 * Another theme for a coding, in one decision: what was known about the theme of before is replaced
 * by what is known about this one now.
 */
function moveCoding(
  open: OpenStudy,
  { transcript, coding: id, theme: wanted, ...view }: Api['moveCoding']['takes'],
): Refused | null {
  const coding = open.study.codings.get(transcript)?.get(id);
  if (coding === undefined) {
    return open.refusal({ ok: false, code: 'unknown coding', subject: id });
  }
  if (coding.standing === 'rejected') return refuse('moved rejection');
  const theme = themeFor(open, wanted);
  if (isRefused(theme)) return theme;
  if (open.now.themeOf(coding.theme) === theme.id) return null;
  const about = [...(open.study.codings.get(transcript)?.values() ?? [])].filter(
    (other) =>
      open.now.themeOf(other.theme) === theme.id && other.under.reader === coding.under.reader,
  );
  const twice = about.some(
    (other) => other.standing !== 'rejected' && sameSpan(other.span, coding.span),
  );
  if (twice) return refuse('coded already', open.now.label(theme.id));
  const home = homeOf(open, transcript, coding.span);
  const passage = home === null ? null : open.now.passagesIn(transcript)[home];
  const offered =
    passage !== null &&
    sameSpan(passage, coding.span) &&
    view.seenSuggestion &&
    offers(open, passage, theme.id);
  const { theme: before, standing, span, memo, under, strength, codebookVersion } = coding;
  return open.decide([
    ...about
      .filter(
        (other) =>
          other.standing === 'rejected' &&
          home !== null &&
          homeOf(open, transcript, other.span) === home,
      )
      .map((other): Edit => ({ kind: 'codingRemoved', coding: other })),
    {
      kind: 'codingRevised',
      transcript,
      coding: id,
      from: { theme: before, standing, span, memo, known: { under, strength, codebookVersion } },
      to: {
        theme: theme.id,
        standing: offered ? 'confirmed' : 'by hand',
        span,
        memo,
        known: {
          under: underOf(open, view, passage),
          strength: home === null ? null : strengthAt(open, transcript, home, theme.id),
          codebookVersion: theme.version,
        },
      },
    },
  ]);
}

/**
 * Passages that were each opened before, coded by hand in one gesture. Those that carry the theme
 * already are passed over; every coding says how many were made together.
 */
function codeTogether(
  open: OpenStudy,
  { places, theme: wanted, ...view }: Api['codeTogether']['takes'],
): Refused | null {
  const theme = themeFor(open, wanted);
  if (isRefused(theme)) return theme;
  const questions: Question[] = [];
  for (const place of places) {
    const question = questionOf(open, { place, theme: theme.id, memo: '', ...view });
    if (isRefused(question)) return question;
    const there = question.mine.some(
      ({ standing, span }) => standing !== 'rejected' && sameSpan(span, question.span),
    );
    if (!there) questions.push(question);
  }
  return open.decide(
    questions.flatMap(({ passage, span, mine }) => {
      const place = { transcript: passage.transcript, ...span };
      return [
        ...nonesOver(open, place.transcript, span),
        ...mine
          .filter(({ standing }) => standing === 'rejected')
          .map((coding): Edit => ({ kind: 'codingRemoved', coding })),
        made(open, { place, theme: theme.id, memo: '', ...view }, passage, span, theme, 'by hand', {
          together: questions.length,
        }),
      ];
    }),
  );
}

/** The passage that a span shares most with, as an index; null where it belongs to none. */
function homeOf(open: OpenStudy, transcript: string, span: Span): number | null {
  const placed = open.now.passagesIn(transcript);
  const [home] = passagesOfSpan(placed, span).sort(([, a], [, b]) => b - a);
  return home === undefined ? null : home[0];
}

function offers(open: OpenStudy, passage: Placed, theme: string): boolean {
  const { columns } = open.now.themes;
  return strongestIn(open, passage).some(({ column }) => columns[column] === theme);
}

function strengthAt(
  open: OpenStudy,
  transcript: string,
  index: number,
  theme: string,
): number | null {
  const { codings } = open.now.decidedIn(transcript).passages[index];
  const passage = open.now.passagesIn(transcript)[index];
  return strengthIn(open, passage, theme, codings.length > 0);
}

function writeMemo(open: OpenStudy, { on, text }: Api['writeMemo']['takes']): Refused | null {
  if (text.trim() === '') return refuse('empty memo');
  if (text.length > longestText) return refuse('too long');
  if (on.kind === 'coding') {
    const coding = open.study.codings.get(on.transcript)?.get(on.coding);
    return coding === undefined
      ? open.refusal({ ok: false, code: 'unknown coding', subject: on.coding })
      : withMemo(open, coding, text);
  }
  if (on.kind === 'passage') {
    const index = indexOf(open, on.place);
    if (typeof index !== 'number') return index;
  }
  const { mintId, now } = open.desk.context;
  const memo = {
    id: mintId('memo'),
    subject: subjectOf(on),
    text,
    reader: open.reader.id,
    at: now(),
  };
  return open.decide([{ kind: 'memoWritten', memo }]);
}

function subjectOf(on: Exclude<Api['writeMemo']['takes']['on'], { kind: 'coding' }>): MemoSubject {
  if (on.kind !== 'passage') return on;
  const { transcript, start, end } = on.place;
  return { kind: 'passage', transcript, span: { start, end } };
}

function themeFor(open: OpenStudy, id: string): Theme | Refused {
  const theme = open.study.themes.get(id);
  if (theme === undefined) return open.refusal({ ok: false, code: 'unknown theme', subject: id });
  // Another window may have merged it a moment ago.
  return resolveTheme(open.study, id) ?? theme;
}

function made(
  open: OpenStudy,
  request: CodeRequest,
  passage: Placed | null,
  span: Span,
  theme: Theme,
  standing: Coding['standing'],
  more: Pick<DecidedUnder, 'together'> = {},
): Edit {
  const { transcript } = request.place;
  const home = passage === null ? null : homeOf(open, transcript, passage);
  const coding: Coding = {
    id: open.desk.context.mintId('coding'),
    transcript,
    span,
    theme: theme.id,
    standing,
    under: { ...underOf(open, request, passage), ...more },
    strength: home === null ? null : strengthAt(open, transcript, home, theme.id),
    codebookVersion: theme.version,
    memo: request.memo.trim() === '' ? '' : request.memo,
  };
  return { kind: 'codingMade', coding };
}

/** In a cold sample nothing was in sight, whatever the window says. */
function underOf(
  open: OpenStudy,
  { drawnBy, seenSuggestion }: UnderView,
  passage: Placed | null,
): DecidedUnder {
  const { study, reader, desk } = open;
  const held = passage !== null && isHeldBack(study, passage.transcript, passage);
  return {
    reader: reader.id,
    at: desk.context.now(),
    drawnBy,
    seenSuggestion: seenSuggestion && !held,
    fit: study.fit,
  };
}

/** A coding of an earlier wording stands under the wording of now. */
function keptUnder({ study }: OpenStudy, coding: Coding): Edit[] {
  const { id, transcript, theme, codebookVersion: from } = coding;
  const to = study.themes.get(theme)?.version ?? from;
  return from === to ? [] : [{ kind: 'codingLookedAtAgain', transcript, coding: id, from, to }];
}

/** Decided once more as it stands: it is kept under the wording of now. */
function again(open: OpenStudy, coding: Coding, memo: string): Refused | null {
  const kept = keptUnder(open, coding);
  return kept.length === 0 ? withMemo(open, coding, memo) : open.decide(kept);
}

/** A coding keeps its memo where none is given. */
function withMemo(open: OpenStudy, coding: Coding, memo: string): Refused | null {
  if (memo.trim() === '' || memo === coding.memo) return null;
  const { theme, standing, span } = coding;
  const from = { theme, standing, span, memo: coding.memo };
  return open.decide([
    {
      kind: 'codingRevised',
      transcript: coding.transcript,
      coding: coding.id,
      from,
      to: { ...from, memo },
    },
  ]);
}

/** A theme applies after all where it was said that none does. */
function nonesOver(open: OpenStudy, transcript: string, span: Span): Edit[] {
  const placed = open.now.passagesIn(transcript);
  const { passages } = open.now.decidedIn(transcript);
  const nones = passagesOfSpan(placed, span).flatMap(([index]) => passages[index].nones);
  return [...new Set(nones)].map((none): Edit => ({ kind: 'noneCleared', none }));
}
