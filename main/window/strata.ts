import type { Strata } from '../api.ts';
import { passagesOfSpan } from './decided-now.ts';
import type { OpenStudy } from './open-study.ts';
import { strengthsOf } from './themes-now.ts';

/** Everything to draw the layered bands of all transcripts once. */
export function strata({ study, now }: OpenStudy): Strata {
  const { themes } = now;
  const layers = themes.columns.length;
  const bands: Strata['bands'][number][] = [];
  let count = 0;
  for (const { id } of now.transcripts) count += now.passagesIn(id).length;
  const words = new Int32Array(count);
  const gaps = new Int32Array(count);
  const places = new Int32Array(2 * count);
  const shares = new Float32Array(count * layers);
  const ticks: number[] = [];

  let row = 0;
  for (const transcript of now.transcripts) {
    const { id, name, speakers, turns } = transcript;
    const placed = now.passagesIn(id);
    const asking = new Set(
      speakers.flatMap(({ label, role }) => (role === 'interviewer' ? [label] : [])),
    );
    const questions = turns.filter(({ speaker }) => asking.has(speaker));
    const from = row;
    let next = 0;
    for (const passage of placed) {
      words[row] = passage.words;
      places[2 * row] = passage.start;
      places[2 * row + 1] = passage.end;
      for (; next < questions.length && questions[next].start < passage.start; next++)
        gaps[row] = 1;
      const strengths = strengthsOf(themes, passage.row);
      if (strengths !== null) shares.set(strengths, row * layers);
      row++;
    }
    for (const coding of study.codings.get(id)?.values() ?? []) {
      if (coding.standing === 'rejected') continue;
      const column = themes.columnOf.get(now.themeOf(coding.theme) ?? '') ?? -1;
      for (const [index] of passagesOfSpan(placed, coding.span)) ticks.push(from + index, column);
    }
    bands.push({
      transcript: id,
      name,
      participant: mainSpeaker(placed, (participant) => now.participantName(participant)),
      from,
      passages: placed.length,
    });
  }
  return {
    bands,
    themes: themes.columns,
    words,
    gaps,
    places,
    shares,
    ticks: Int32Array.from(ticks),
  };
}

/** Whoever says most; with all the others where several were interviewed together. */
function mainSpeaker(
  placed: readonly { readonly participant: string; readonly words: number }[],
  nameOf: (participant: string) => string,
): string {
  const words = new Map<string, number>();
  for (const passage of placed) {
    words.set(passage.participant, (words.get(passage.participant) ?? 0) + passage.words);
  }
  return [...words]
    .sort(([, a], [, b]) => b - a)
    .map(([participant]) => nameOf(participant))
    .join(', ');
}
