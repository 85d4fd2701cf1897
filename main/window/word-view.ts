import type { Refused, Span, WordView } from '../api.ts';
import { give, refuse } from './answers.ts';
import type { OpenStudy } from './open-study.ts';
import { formFor, placeOf } from './theme-words.ts';

const linesShown = 200;
const aroundWord = 60;
const leastShare = 0.005;

/** Where a counted word is said, and which themes it belongs to there. */
export async function wordView(
  open: OpenStudy,
  { form: asked }: { readonly form: string },
): Promise<{ readonly value: WordView } | Refused> {
  const { now, desk } = open;
  const form = formFor(now, asked);
  if (form === null) return refuse('not one word', asked);
  const words = now.fitted?.words ?? (await now.prepared());
  const { study, themes } = now;
  const place = placeOf(words.vocabulary, form);
  if (place < 0) return refuse('word not said', asked);

  const { offsets, words: triples } = words.occurrences;
  const passages = new Set<number>();
  const people = new Set<string>();
  const parts = new Float64Array(themes.columns.length);
  const lines: WordView['lines'][number][] = [];
  let occurrences = 0;
  for (let d = 0; d < words.passages.length; d++) {
    for (let at = offsets[d]; at < offsets[d + 1]; at++) {
      if (triples[3 * at + 2] !== place) continue;
      const passage = words.passages[d];
      occurrences++;
      passages.add(d);
      people.add(passage.participant);
      addParts(open, d, place, parts);
      const transcript = study.transcripts.get(passage.transcript);
      if (lines.length === linesShown || transcript === undefined) continue;
      const [start, end] = [triples[3 * at], triples[3 * at + 1]];
      lines.push({
        transcript: passage.transcript,
        start: passage.start,
        end: passage.end,
        transcriptName: transcript.name,
        ...inContext(desk.text(passage.transcript), { start, end }, passage),
      });
    }
  }
  const all = parts.reduce((sum, part) => sum + part, 0);
  return give({
    form,
    forms: words.surfaces[place],
    occurrences,
    passages: passages.size,
    people: people.size,
    themes: themes.columns
      .map((id, column) => ({
        id,
        label: now.label(id),
        share: all > 0 ? parts[column] / all : 0,
      }))
      .filter(({ share }) => share >= leastShare)
      .sort((a, b) => b.share - a.share),
    lines,
  });
}

/** Divides one occurrence among the themes: p(theme | word, passage). */
function addParts({ now }: OpenStudy, passage: number, word: number, parts: Float64Array): void {
  const { fitted, columnOfRow } = now.themes;
  if (fitted === null) return;
  const themes = columnOfRow.length;
  const size = fitted.words.vocabulary.length;
  const part = (k: number): number =>
    fitted.phi[k * size + word] * fitted.theta[passage * themes + k];
  let all = 0;
  for (let k = 0; k < themes; k++) all += part(k);
  if (all <= 0) return;
  for (let k = 0; k < themes; k++) {
    if (columnOfRow[k] >= 0) parts[columnOfRow[k]] += part(k) / all;
  }
}

/** A word with some of what is said around it in its passage, cut between words. */
export function inContext(
  text: string,
  { start, end }: Span,
  passage: Span,
): { readonly before: string; readonly word: string; readonly after: string } {
  const from = Math.max(passage.start, start - aroundWord);
  const to = Math.min(passage.end, end + aroundWord);
  const before = text.slice(from, start);
  const after = text.slice(end, to);
  return {
    before: oneLine(from === passage.start ? before : before.replace(/^\S*\s/u, '')),
    word: text.slice(start, end),
    after: oneLine(to === passage.end ? after : after.replace(/\s\S*$/u, '')),
  };
}

function oneLine(text: string): string {
  return text.replace(/\s+/gu, ' ');
}
