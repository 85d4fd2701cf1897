import { atMost, wilson } from '../../engine/evidence/index.ts';
import { coldSampleOf, type Draw } from '../../engine/study/index.ts';
import type { ColdSampleView, Rate, ReadingEvidence } from '../api.ts';
import { isDecided } from './decided-now.ts';
import { drawnNow } from './draws.ts';
import { calibrationNow } from './judged.ts';
import type { OpenStudy } from './open-study.ts';
import { rowsIn } from './passages-now.ts';
import { strengthsOf, themesNow } from './themes-now.ts';

/** What random draws say about the suggestions, and about what is left to read. */
export function readingEvidence(open: OpenStudy): ReadingEvidence {
  const { study, now } = open;
  const draws = [...study.draws.values()].sort((a, b) => (a.at < b.at ? -1 : a.at > b.at ? 1 : 0));
  const { judged, confirmed, bins } = calibrationNow(now);
  let unread = 0;
  for (const id of study.transcripts.keys()) unread += now.decidedIn(id).unread;
  const cold = coldSampleOf(study);
  return {
    draws: draws.map((draw) => ({
      name: draw.name,
      kind: draw.kind,
      at: draw.at,
      reader: study.readers.get(draw.reader)?.name ?? '',
      ...progress(open, draw),
    })),
    unread,
    stopping: stopping(open, draws),
    calibration: {
      judged,
      confirmed,
      bins: bins.map((bin) => ({
        from: bin.from,
        to: bin.to,
        count: bin.confirmed,
        of: bin.judged,
        low: bin.low,
        high: bin.high,
      })),
    },
    coldSample: cold === null ? null : coldSampleView(open, cold),
  };
}

/** How many passages of a draw there are now, and how many were read. */
export function progress(
  { now }: Pick<OpenStudy, 'now'>,
  draw: Draw,
): { readonly places: number; readonly read: number } {
  const drawn = drawnNow(now, draw);
  return {
    places: drawn.length,
    read: drawn.filter(({ transcript, index }) =>
      isDecided(now.decidedIn(transcript).passages[index]),
    ).length,
  };
}

/** From the newest draw of unread passages that somebody began to read: older ones knew more unread. */
function stopping({ now }: OpenStudy, draws: readonly Draw[]): ReadingEvidence['stopping'] {
  const threshold = now.settings.suggestions.strength;
  for (const draw of [...draws].reverse()) {
    if (draw.kind !== 'random draw' || !draw.unreadOnly) continue;
    const decided = drawnNow(now, draw)
      .map(({ transcript, index }) => now.decidedIn(transcript).passages[index])
      .filter(isDecided);
    if (decided.length === 0) continue;
    const found = decided.map(({ codings }) =>
      codings.filter(({ standing }) => standing !== 'rejected'),
    );
    const coded = found.filter((codings) => codings.length > 0).length;
    const missed = found.filter((codings) =>
      codings.some(({ strength }) => strength === null || strength < threshold),
    ).length;
    const read = decided.length;
    return {
      read,
      coded,
      codedAtMost: atMost(coded, read),
      missed,
      missedAtMost: atMost(missed, read),
    };
  }
  return null;
}

function coldSampleView(open: OpenStudy, sample: Draw): ColdSampleView {
  return {
    name: sample.name,
    at: sample.at,
    reader: open.study.readers.get(sample.reader)?.name ?? '',
    ...progress(open, sample),
    scoredAt: sample.scored?.at ?? null,
    score: scoreOf(open, sample),
  };
}

function scoreOf({ study, now, desk }: OpenStudy, sample: Draw): ColdSampleView['score'] {
  if (sample.scored === null) return null;
  const fit = study.fits.get(sample.scored.fit);
  const fitted = fit === undefined ? null : desk.fitted(fit.id);
  if (fit === undefined || fitted === null) return null;
  const themes = fitted === now.fitted ? now.themes : themesNow(study, fitted);
  const { strength: least, countedWords } = now.settings.suggestions;

  const tallies = new Map<string, { coded: number; suggested: number; both: number }>();
  const tally = (theme: string) => {
    const known = tallies.get(theme) ?? { coded: 0, suggested: 0, both: 0 };
    tallies.set(theme, known);
    return known;
  };
  const sums = { coded: [0, 0], none: [0, 0] };
  for (const { transcript, index, passage } of drawnNow(now, sample)) {
    const decided = now.decidedIn(transcript).passages[index];
    // What was decided after the score had the suggestions in sight.
    const { at } = sample.scored;
    const blind = decided.codings.filter(
      ({ standing, under }) => standing !== 'rejected' && under.at <= at && !under.seenSuggestion,
    );
    const none = decided.nones.some(({ under }) => under.at <= at);
    if (blind.length === 0 && !none) continue;
    const row = rowsIn(fitted, transcript).find((each) => {
      const { start, end } = fitted.words.passages[each];
      return start === passage.start && end === passage.end;
    });
    const suggested = new Set<string>();
    if (row !== undefined && fitted.words.passages[row].countedWords >= countedWords) {
      strengthsOf(themes, row)?.forEach((strength, column) => {
        if (themes.offered[column] === 1 && strength >= least)
          suggested.add(themes.columns[column]);
      });
    }
    const of = blind.length > 0 ? sums.coded : sums.none;
    of[1]++;
    if (suggested.size > 0) of[0]++;
    const coded = new Set(blind.map(({ theme }) => now.themeOf(theme) ?? theme));
    for (const theme of coded) {
      tally(theme).coded++;
      if (suggested.has(theme)) tally(theme).both++;
    }
    for (const theme of suggested) tally(theme).suggested++;
  }

  const rows = [...study.themes.keys()].flatMap((id) => {
    const counts = tallies.get(id);
    const modelled = themes.columnOf.has(id);
    return counts === undefined ? [] : [{ id, label: now.label(id), ...counts, modelled }];
  });
  const sum = (which: 'coded' | 'suggested' | 'both', modelled: boolean): number =>
    rows.filter((one) => one.modelled === modelled).reduce((total, one) => total + one[which], 0);
  return {
    fit: fit.id,
    coded: rate(sums.coded[0], sums.coded[1]),
    none: rate(sums.none[0], sums.none[1]),
    found: rate(sum('both', true), sum('coded', true)),
    right: rate(sum('both', true), sum('suggested', true)),
    beyond: sum('coded', false),
    themes: rows,
  };
}

/** Nothing is known about a share of nothing. */
function rate(count: number, of: number): Rate {
  return { count, of, ...(of === 0 ? { low: 0, high: 1 } : wilson(count, of)) };
}
