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
  const bandShares = new Float32Array(now.transcripts.length * layers);
  const gathered = new Map([...study.transcripts.keys()].map((id, place) => [id, place]));

  let row = 0;
  for (const transcript of now.transcripts) {
    const { id, name, speakers, turns } = transcript;
    const placed = now.passagesIn(id);
    const asking = new Set(
      speakers.flatMap(({ label, role }) => (role === 'interviewer' ? [label] : [])),
    );
    const questions = turns.filter(({ speaker }) => asking.has(speaker));
    const from = row;
    const expected = new Float64Array(layers);
    let counted = 0;
    let next = 0;
    for (const passage of placed) {
      words[row] = passage.words;
      places[2 * row] = passage.start;
      places[2 * row + 1] = passage.end;
      for (; next < questions.length && questions[next].start < passage.start; next++)
        gaps[row] = 1;
      const strengths = strengthsOf(themes, passage.row);
      if (strengths !== null) {
        shares.set(strengths, row * layers);
        counted += passage.countedWords;
        for (let k = 0; k < layers; k++) expected[k] += passage.countedWords * strengths[k];
      }
      row++;
    }
    for (const coding of study.codings.get(id)?.values() ?? []) {
      if (coding.standing === 'rejected') continue;
      const column = themes.columnOf.get(now.themeOf(coding.theme) ?? '') ?? -1;
      for (const [index] of passagesOfSpan(placed, coding.span)) ticks.push(from + index, column);
    }
    if (counted > 0) {
      bandShares.set(
        expected.map((words) => words / counted),
        bands.length * layers,
      );
    }
    const speaker = mainSpeakers(placed);
    bands.push({
      transcript: id,
      name,
      participant: speaker.map((one) => now.participantName(one)).join(', '),
      attributes: study.participants.get(speaker[0] ?? '')?.attributes ?? {},
      gathered: gathered.get(id) ?? 0,
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
    bandShares,
    ticks: Int32Array.from(ticks),
  };
}

/** Whoever says most first; all of them where several were interviewed together. */
function mainSpeakers(
  placed: readonly { readonly participant: string; readonly words: number }[],
): string[] {
  const words = new Map<string, number>();
  for (const passage of placed) {
    words.set(passage.participant, (words.get(passage.participant) ?? 0) + passage.words);
  }
  return [...words].sort(([, a], [, b]) => b - a).map(([participant]) => participant);
}
