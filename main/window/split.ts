import { cosine } from '../../engine/model/index.ts';
import type { Fit } from '../../engine/study/index.ts';
import {
  leadingRow,
  leaning,
  shareOf,
  strengthOf,
  topWords,
  unpackFitted,
  type Fitted,
} from '../../engine/themes/index.ts';
import type { Api, Refused, SplitHalf, SplitPreview } from '../api.ts';
import { isSplitRefusal, keptHalfSentence, sentenceForSplit } from '../sentences/splitting.ts';
import { recordSplit, trySplit, type SplitTried } from '../splitting.ts';
import { wordLists } from '../word-lists.ts';
import { give, isRefused, refuse } from './answers.ts';
import { fitRefused } from './fit-for-window.ts';
import { oneEachFirst } from './one-each-first.ts';
import type { OpenStudy } from './open-study.ts';
import type { Room } from './room.ts';
import type { CallContext, Handlers } from './session-types.ts';

const wordsShown = 15;
const passagesShown = 8;

export function splitHandlers(room: Room): Pick<Handlers, 'splitPreview' | 'splitTheme'> {
  return {
    splitPreview: room.look(async (open, { theme }: Api['splitPreview']['takes'], context) => {
      const tried = await trying(open, theme, context);
      return isRefused(tried) ? tried : give(preview(open, theme, tried.value));
    }),

    splitTheme: room.look(async (open, { theme }: Api['splitTheme']['takes'], context) => {
      const tried = await trying(open, theme, context);
      if (isRefused(tried)) return tried;
      open.stopRefining();
      const made = recordSplit(open.desk, tried.value);
      if (!made.ok) return open.refusal(made);
      const after = await room.afterwards(open);
      return isRefused(after) ? after : give({ overview: after.value, theme: tried.value.into.id });
    }),
  };
}

async function trying(
  open: OpenStudy,
  theme: string,
  { onProgress, signal }: CallContext,
): Promise<{ readonly value: SplitTried } | Refused> {
  if (open.fitting) return refuse('fit running');
  open.fitting = true;
  try {
    const tried = await trySplit(open.desk, theme, wordLists, {
      signal: AbortSignal.any([signal, open.closing.signal]),
      onProgress: ({ sweep, bound, change }, fraction) =>
        onProgress({ sweep, bound, change, fraction }),
    });
    if (tried.ok) return give(tried.value);
    if (isSplitRefusal(tried)) {
      return { code: tried.code, refused: sentenceForSplit(tried, open.now.label(tried.subject)) };
    }
    if ('subject' in tried) return open.refusal(tried);
    return fitRefused(tried);
  } finally {
    open.fitting = false;
  }
}

function preview(
  open: OpenStudy,
  theme: string,
  { record, done, before }: SplitTried,
): SplitPreview {
  const { words } = before;
  const fit: Fit = { ...before.fit, themes: record.themes };
  const fitted = unpackFitted(fit, words, done.result);
  const rows = [record.themes.indexOf(theme), record.themes.length - 1];
  const size = words.vocabulary.length;
  const [kept, parted] = rows.map((row) => fitted.phi.subarray(row * size, (row + 1) * size));
  const coded = codedRows(open, theme);
  const elsewhere = coded.filter((row) => leaning(words, row, kept, parted) < 0).length;
  return {
    theme,
    label: open.now.label(theme),
    halves: [
      half(open, fitted, rows[0], coded.length - elsewhere),
      half(open, fitted, rows[1], elsewhere),
    ],
    cosine: cosine(kept, parted),
    sentence: keptHalfSentence(open.now.label(theme), coded.length, elsewhere),
  };
}

/** Rows of the fit on screen that carry a coding with the theme, a row a coding. */
function codedRows({ study, now }: OpenStudy, theme: string): number[] {
  const rows: number[] = [];
  for (const [transcript, codings] of study.codings) {
    const placed = now.passagesIn(transcript);
    const { home } = now.decidedIn(transcript);
    for (const { id, theme: coded, standing } of codings.values()) {
      const at = home.get(id);
      if (standing === 'rejected' || now.themeOf(coded) !== theme || at === undefined) continue;
      if (placed[at].row >= 0) rows.push(placed[at].row);
    }
  }
  return rows;
}

function half(open: OpenStudy, fitted: Fitted, row: number, codings: number): SplitHalf {
  const { study, now, desk } = open;
  const enough = Math.max(1, now.settings.suggestions.countedWords);
  const led = fitted.words.passages.filter((_, passage) => leadingRow(fitted, passage) === row);
  const strongest = fitted.words.passages
    .map((passage, index) => ({ passage, strength: strengthOf(fitted, index, row) }))
    .filter(
      ({ passage }) => passage.countedWords >= enough && study.transcripts.has(passage.transcript),
    )
    .sort((a, b) => b.strength - a.strength);
  return {
    share: shareOf(fitted, row),
    words: topWords(fitted, row, wordsShown).map(({ form, surface, probability }) => ({
      form,
      surface,
      probability,
    })),
    passages: led.length,
    people: new Set(led.map(({ participant }) => participant)).size,
    codings,
    strongest: oneEachFirst(strongest, ({ passage }) => passage.participant)
      .slice(0, passagesShown)
      .map(({ passage, strength }) => ({
        transcript: passage.transcript,
        start: passage.start,
        end: passage.end,
        transcriptName: study.transcripts.get(passage.transcript)?.name ?? '',
        participant: now.participantName(passage.participant),
        text: desk.text(passage.transcript).slice(passage.start, passage.end),
        strength,
        countedWords: passage.countedWords,
      })),
  };
}
