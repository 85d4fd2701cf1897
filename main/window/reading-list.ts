import { coldSampleOf, type Draw } from '../../engine/study/index.ts';
import type {
  Api,
  PassagePlace,
  ReadingList,
  ReadingListKind,
  ReadingListRequest,
  Refused,
} from '../api.ts';
import { give, refuse } from './answers.ts';
import { isDecided, type DecidedPassage } from './decided-now.ts';
import { draw } from './draw.ts';
import { drawName, drawnNow, drawNamed } from './draws.ts';
import type { OpenStudy } from './open-study.ts';
import { oneEachFirst } from './one-each-first.ts';
import type { Placed } from './passages-now.ts';
import { keywordList } from './search.ts';
import { strengthsOf } from './themes-now.ts';
import { earlierCodings } from './wordings.ts';

/** A passage that may come on a list. */
interface Candidate {
  readonly passage: Placed;
  readonly decided: DecidedPassage;
  /** Of the theme asked for, else of the strongest theme; null where nothing was counted. */
  readonly strength: number | null;
}

/** Passages to go through, in the order asked for, under the name that decisions record. */
export function readingList(
  open: OpenStudy,
  request: Api['readingList']['takes'],
): { readonly value: ReadingList } | Refused | Promise<{ readonly value: ReadingList } | Refused> {
  const { study, now } = open;
  const { kind, theme, transcript, unreadOnly } = request;
  if (theme !== null && !study.themes.has(theme)) {
    return open.refusal({ ok: false, code: 'unknown theme', subject: theme });
  }
  if ((kind === 'one theme' || kind === 'earlier wording') && theme === null) {
    return open.refusal({ ok: false, code: 'unknown theme', subject: '' });
  }
  if (transcript !== null && !study.transcripts.has(transcript)) {
    return open.refusal({ ok: false, code: 'unknown transcript', subject: transcript });
  }
  if (needsFit.has(kind) && now.fitted === null) return refuse('no fit');

  if (kind === 'keyword in context') return keywordList(open, request);
  const drawn = recordedDraw(open, request);
  if (kind === 'cold sample' && drawn === null) return refuse('no cold sample');
  if (drawn !== null) return drawnList(open, drawn);
  const name = nameOf(open, request);
  // Every passage of it was read, under the earlier wording.
  const isWanted = (one: Candidate): boolean =>
    kind === 'earlier wording' || !unreadOnly || isOpen(one, name);
  const shown = inOrder(open, request, candidates(open, request), isWanted);
  return give({
    name,
    places: shown.map(placeOf),
    decided: shown.filter(({ decided }) => isDecided(decided)).length,
  });
}

/** The draw that is meant, where it was recorded. */
function recordedDraw({ study }: OpenStudy, request: ReadingListRequest): Draw | null {
  const { kind, theme, transcript } = request;
  if (kind === 'cold sample') return coldSampleOf(study);
  if (kind !== 'random draw' || theme !== null || transcript !== null) return null;
  return drawNamed(study, drawName({ ...request, kind })) ?? null;
}

/** A draw stays as it was made, whatever was read of it since. */
function drawnList({ now }: OpenStudy, drawn: Draw): { readonly value: ReadingList } {
  const all = drawnNow(now, drawn);
  return give({
    name: drawn.name,
    places: all.map(({ passage }) => placeOf({ passage })),
    decided: all.filter(({ transcript, index }) =>
      isDecided(now.decidedIn(transcript).passages[index]),
    ).length,
  });
}

const needsFit: ReadonlySet<ReadingListKind> = new Set([
  'strongest first',
  'nearest the edge',
  'unexplained',
]);

function nameOf(
  { study, now }: OpenStudy,
  { kind, theme, transcript, unreadOnly, count, seed }: ReadingListRequest,
): string {
  const list = kind === 'random draw' ? `random draw of ${count}, seed ${seed}` : kind;
  const where = transcript === null ? undefined : study.transcripts.get(transcript)?.name;
  return [
    kind === 'one theme' || kind === 'earlier wording'
      ? `${kind}: ${now.label(theme ?? '')}`
      : list,
    ...(theme !== null && kind !== 'one theme' && kind !== 'earlier wording'
      ? [`with ${now.label(theme)}`]
      : []),
    ...(where === undefined ? [] : [`in ${where}`]),
    ...(unreadOnly && kind !== 'earlier wording' ? ['unread'] : []),
  ].join(', ');
}

/**
 * Unread, or decided on from this very list: so a list that is asked for again is the same list, with
 * what was done in it.
 */
function isOpen({ decided }: Candidate, name: string): boolean {
  return (
    !isDecided(decided) ||
    [...decided.codings, ...decided.nones].some(({ under }) => under.drawnBy === name)
  );
}

function candidates(
  open: OpenStudy,
  { kind, theme, transcript }: ReadingListRequest,
): Candidate[][] {
  const { now, study } = open;
  const { themes, settings } = now;
  const wanted = theme === null ? null : (now.themeOf(theme) ?? theme);
  const current = wanted === null ? undefined : study.themes.get(wanted);
  const earlier = new Set(
    kind === 'earlier wording' && current !== undefined ? earlierCodings(open, current) : [],
  );
  const column = wanted === null ? undefined : themes.columnOf.get(wanted);
  const { strength: threshold, countedWords } = settings.suggestions;
  return now.transcripts
    .filter(({ id }) => transcript === null || id === transcript)
    .map(({ id }) => {
      const { passages } = now.decidedIn(id);
      return now.passagesIn(id).flatMap((passage, index): Candidate[] => {
        const decided = passages[index];
        const counted = passage.countedWords >= Math.max(1, countedWords);
        const strengths = counted ? strengthsOf(themes, passage.row) : null;
        const strength =
          strengths === null
            ? null
            : wanted === null
              ? largest(strengths, themes.offered)
              : column === undefined
                ? null
                : strengths[column];
        if (kind === 'earlier wording') {
          if (!decided.codings.some((coding) => earlier.has(coding))) return [];
        } else if (wanted !== null && kind !== 'nearest the edge') {
          const coded = decided.codings.some((coding) => now.themeOf(coding.theme) === wanted);
          if (!coded && (strength === null || strength < threshold)) return [];
        }
        return [{ passage, decided, strength }];
      });
    });
}

function inOrder(
  { now }: OpenStudy,
  { kind, count, seed }: ReadingListRequest,
  transcripts: readonly Candidate[][],
  isWanted: (one: Candidate) => boolean,
): Candidate[] {
  const all = transcripts.flat().filter(isWanted);
  switch (kind) {
    case 'in order':
    case 'earlier wording':
      return all;
    case 'strongest first':
      return by(counted(all), ({ strength }) => -strength);
    case 'nearest the edge': {
      const edge = now.settings.suggestions.strength;
      return by(counted(all), ({ strength }) => Math.abs(strength - edge));
    }
    case 'unexplained': {
      const surprise = now.fitted?.unexplained;
      return by(counted(all), ({ passage }) => -(surprise?.[passage.row] ?? 0));
    }
    case 'one theme':
      return oneEachFirst(
        by(all, ({ strength }) => -(strength ?? -1)),
        ({ passage }) => passage.participant,
      );
    case 'random draw':
      return draw(transcripts, count, seed, isWanted);
    case 'cold sample':
    case 'keyword in context':
      throw new Error(`readingList: ${kind} has a list of its own`);
  }
}

type Counted = Candidate & { readonly strength: number };

function counted(all: readonly Candidate[]): Counted[] {
  return all.filter((one): one is Counted => one.strength !== null);
}

function by<One extends Candidate>(all: readonly One[], key: (one: One) => number): One[] {
  return all
    .map((one) => ({ one, value: key(one) }))
    .sort((a, b) => a.value - b.value)
    .map(({ one }) => one);
}

/** Of the themes that can be suggested. */
function largest(strengths: Float64Array, offered: Uint8Array): number {
  return strengths.reduce(
    (most, strength, column) => (offered[column] === 1 && strength > most ? strength : most),
    0,
  );
}

function placeOf({
  passage: { transcript, start, end },
}: Pick<Candidate, 'passage'>): PassagePlace {
  return { transcript, start, end };
}
