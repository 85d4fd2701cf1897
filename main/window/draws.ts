import { coldSampleOf, type Draw, type Edit, type Study } from '../../engine/study/index.ts';
import type { Api, DrawRequest, Refused } from '../api.ts';
import { refuse } from './answers.ts';
import { isDecided, passagesOfSpan } from './decided-now.ts';
import { draw } from './draw.ts';
import type { OpenStudy } from './open-study.ts';
import type { Placed } from './passages-now.ts';
import type { StudyNow } from './study-now.ts';

/** A draw's name, as decisions in it record it. */
export function drawName({ kind, count, seed, unreadOnly }: DrawRequest): string {
  return `${kind} of ${count}, seed ${seed}${unreadOnly ? ', unread' : ''}`;
}

export function drawNamed({ draws }: Study, name: string): Draw | undefined {
  for (const one of draws.values()) if (one.name === name) return one;
  return undefined;
}

/** A drawn passage as the passages stand now. */
export interface DrawnNow {
  readonly transcript: string;
  /** Index among the transcript's passages. */
  readonly index: number;
  readonly passage: Placed;
}

/** The passages of a draw, in its order; those whose words are gone, or divided away, are left out. */
export function drawnNow(now: StudyNow, { places }: Draw): DrawnNow[] {
  const found: DrawnNow[] = [];
  const seen = new Set<Placed>();
  for (const { transcript, span } of places) {
    if (!now.study.transcripts.has(transcript)) continue;
    const placed = now.passagesIn(transcript);
    const [home] = passagesOfSpan(placed, span).sort(([, a], [, b]) => b - a);
    if (home === undefined) continue;
    const [index] = home;
    if (seen.has(placed[index])) continue;
    seen.add(placed[index]);
    found.push({ transcript, index, passage: placed[index] });
  }
  return found;
}

/** Draws passages and records which. Asked for again, the draw stays as it was made. */
export function drawSample(open: OpenStudy, request: Api['drawSample']['takes']): Refused | null {
  const { study, now, desk, reader } = open;
  const { kind, count, seed, unreadOnly } = request;
  const cold = kind === 'cold sample';
  if (cold) {
    if (study.fits.size > 0) {
      return open.refusal({ ok: false, code: 'fitted already', subject: '' });
    }
    const there = coldSampleOf(study);
    if (there !== null) return refuse('cold sample there', there.name);
  }
  const name = drawName(request);
  if (drawNamed(study, name) !== undefined) return null;
  const transcripts = now.transcripts.map(({ id }) => {
    const { passages } = now.decidedIn(id);
    return now
      .passagesIn(id)
      .map((passage, index) => ({ passage, read: isDecided(passages[index]) }));
  });
  const chosen = draw(transcripts, count, seed, ({ read }) => !(unreadOnly && read));
  if (chosen.length === 0) return refuse('nothing to draw');
  const drawn: Draw = {
    id: desk.context.mintId('draw'),
    kind,
    name,
    seed,
    count,
    unreadOnly,
    places: chosen.map(({ passage: { transcript, start, end } }) => ({
      transcript,
      span: { start, end },
    })),
    reader: reader.id,
    at: desk.context.now(),
    scored: null,
  };
  return open.decide([{ kind: 'drawMade', draw: drawn }]);
}

/** Holds the cold sample against the fit on screen. */
export function scoreColdSample(open: OpenStudy): Refused | null {
  const { study, now, desk, reader } = open;
  const sample = coldSampleOf(study);
  if (sample === null) return refuse('no cold sample');
  if (sample.scored !== null) return null;
  if (study.fit === null) return refuse('no fit');
  const read = drawnNow(now, sample).some(({ transcript, index }) =>
    isDecided(now.decidedIn(transcript).passages[index]),
  );
  if (!read) return refuse('cold sample unread');
  const edit: Edit = {
    kind: 'drawScored',
    draw: sample.id,
    from: null,
    to: { fit: study.fit, reader: reader.id, at: desk.context.now() },
  };
  return open.decide([edit]);
}
