import { resolveTheme } from '../../engine/study/index.ts';
import {
  compareFits,
  settingFault,
  topWords,
  whatMoved,
  type Fitted,
  type Moved,
} from '../../engine/themes/index.ts';
import type {
  Api,
  FitRequest,
  FitRow,
  FitsCompared,
  FitThemeView,
  MovedView,
  Overview,
  Refused,
} from '../api.ts';
import { fitBefore } from '../commands/moved.ts';
import { sentenceForSetting } from '../sentences/sentences.ts';
import { give, isRefused, refuse } from './answers.ts';
import { fitForWindow } from './fit-for-window.ts';
import { Kept } from './kept.ts';
import type { OpenStudy } from './open-study.ts';
import { quickFirst, refine } from './refining.ts';
import type { Room } from './room.ts';
import type { CallContext, Handlers } from './session-types.ts';
import { fitRows } from './shape-view.ts';

export function fitHandlers(
  room: Room,
): Pick<Handlers, 'fit' | 'moved' | 'chooseFit' | 'nameFit' | 'compareFits' | 'stopRefining'> {
  return {
    fit: room.look(async (open, request: FitRequest, context) => {
      const first = request.kind === 'from scratch' && showsQuickFirst(room, open, request.themes);
      const fitted = await fitStudy(open, request, context, first ? 'quick' : null);
      if (isRefused(fitted)) return fitted;
      if (first) refine(room, open);
      const after = await room.afterwards(open);
      return isRefused(after) ? after : give({ overview: after.value, moved: movedView(open) });
    }),

    moved: room.look<null, MovedView | null>((open) => give(movedView(open))),

    chooseFit: room.decide((open, { fit: to }: Api['chooseFit']['takes']) => {
      const from = open.study.fit;
      return from === to ? null : open.decide([{ kind: 'fitChosen', from, to }]);
    }),

    nameFit: room.decide((open, { fit: id, name }: Api['nameFit']['takes']) => {
      const known = open.study.fits.get(id);
      if (known === undefined) return unknownFit(open, id);
      const to = name.trim() === '' ? null : name.trim();
      return known.name === to
        ? null
        : open.decide([{ kind: 'fitRenamed', fit: id, from: known.name, to }]);
    }),

    compareFits: room.look((open, { first, second }: Api['compareFits']['takes']) => {
      const unknown = [first, second].find((id) => !open.study.fits.has(id));
      return unknown === undefined
        ? give(comparedView(open, first, second))
        : unknownFit(open, unknown);
    }),

    stopRefining: room.look<null, Overview>(async (open) => {
      const was = open.refinement !== null;
      open.stopRefining();
      return room.afterwards(open, was);
    }),
  };
}

async function fitStudy(
  open: OpenStudy,
  { kind, themes }: FitRequest,
  { onProgress, signal: called }: CallContext,
  answer: 'quick' | null,
): Promise<{ readonly value: unknown } | Refused> {
  if (open.fitting) return refuse('fit running');
  const fault = themes === null ? null : settingFault('themes', themes);
  if (fault !== null) return { code: 'setting', refused: sentenceForSetting(fault) };
  const signal = AbortSignal.any([called, open.closing.signal]);
  // Whoever fits again no longer waits for the full answer to the fit before.
  open.stopRefining();
  open.fitting = true;
  try {
    const given = {
      ...(kind === 're-fit' || themes === null ? {} : { themes }),
      ...(answer === null ? {} : { answer }),
    };
    return await fitForWindow(open.desk, kind, given, onProgress, signal);
  } finally {
    open.fitting = false;
  }
}

function showsQuickFirst(room: Room, open: OpenStudy, themes: number | null): boolean {
  return quickFirst(open, themes ?? open.now.settings.themes, room.surroundings.quickFrom);
}

const kept = new WeakMap<OpenStudy, Kept<MovedView | null>>();

/** What moved between the fit on screen and the one before it; null where there is none. */
function movedView(open: OpenStudy): MovedView | null {
  const { study, now } = open;
  const before = fitBefore(study);
  const last = kept.get(open) ?? new Kept();
  kept.set(open, last);
  return last.get([study.fit, before, study.themes, study.transcripts], () => {
    const then = before !== null && study.fits.has(before) ? open.desk.fitted(before) : null;
    if (then === null || now.fitted === null) return null;
    const moved = whatMoved(study, then, now.fitted);
    return inWords(open, moved, now.fitted.fit.themes.length);
  });
}

function inWords({ study, now, desk }: OpenStudy, moved: Moved, ofThemes: number): MovedView {
  const named = (id: string) => ({ id, label: now.label(id) });
  return {
    compared: moved.compared,
    ofThemes,
    passages: moved.passages.flatMap(({ passage: row, from, to, strengths }) => {
      const passage = now.fitted?.words.passages[row];
      const transcript = study.transcripts.get(passage?.transcript ?? '');
      if (passage === undefined || transcript === undefined) return [];
      const { start, end, number } = passage;
      return [
        {
          transcript: transcript.id,
          start,
          end,
          transcriptName: transcript.name,
          number,
          text: desk.text(transcript.id).slice(start, end),
          from: named(from),
          to: named(to),
          strengths,
        },
      ];
    }),
    themes: moved.themes.map(({ theme, gained, lost }) => ({ ...named(theme), gained, lost })),
    appeared: moved.appeared.map((id) => now.label(id)),
    gone: moved.gone.map((id) => now.label(id)),
  };
}

function unknownFit(open: OpenStudy, id: string): Refused {
  return open.refusal({ ok: false, code: 'unknown fit', subject: id });
}

const wordsCompared = 8;

function comparedView(open: OpenStudy, first: string, second: string): FitsCompared {
  const { desk, study } = open;
  const [one, two] = [desk.fitted(first), desk.fitted(second)];
  if (one === null || two === null) throw new Error('comparedView: a fit cannot be read');
  const rows = new Map(fitRows(open).map((row) => [row.id, row]));
  const view = (fitted: Fitted, row: number): FitThemeView => {
    const theme = resolveTheme(study, fitted.fit.themes[row]);
    const words = topWords(fitted, row, wordsCompared).map(({ surface }) => surface);
    return { label: theme?.name ?? `candidate: ${words.slice(0, 3).join(', ')} …`, words };
  };
  const { pairs, onlyFirst, onlySecond, ...rest } = compareFits(one, two);
  return {
    first: rows.get(first) as FitRow,
    second: rows.get(second) as FitRow,
    pairs: pairs.map(({ first: a, second: b, cosine, led }) => ({
      first: view(one, a),
      second: view(two, b),
      cosine,
      led,
    })),
    onlyFirst: onlyFirst.map((row) => view(one, row)),
    onlySecond: onlySecond.map((row) => view(two, row)),
    ...rest,
  };
}
