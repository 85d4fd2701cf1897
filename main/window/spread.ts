import { leadingRow, type Fitted } from '../../engine/themes/index.ts';
import type { Desk } from '../desk.ts';
import type { ThemesNow } from './themes-now.ts';

/** Whose words and whose questions a theme lives on, by the fit on screen. */
export interface Spread {
  /** People who have a passage that it leads. */
  readonly people: number;
  readonly ledPeople: ReadonlySet<string>;
  /** The participant with most of its expected words, and their share of them. */
  readonly person: { readonly participant: string; readonly share: number } | null;
  /** The question, in its plainest form, after which most of its expected words are said. */
  readonly question: { readonly text: string; readonly share: number } | null;
  /** The same for every question, largest share first, and to how many people it was put. */
  readonly questions: readonly {
    readonly text: string;
    readonly share: number;
    readonly people: number;
  }[];
}

interface Part {
  label: string;
  words: number;
}

const kept = new WeakMap<ThemesNow, readonly Spread[]>();

/** The spread of every column. */
export function spreadOf(desk: Desk, themes: ThemesNow): readonly Spread[] {
  const known = kept.get(themes);
  if (known !== undefined) return known;
  const spread = themes.fitted === null ? [] : measure(desk, themes, themes.fitted);
  kept.set(themes, spread);
  return spread;
}

function measure(desk: Desk, { columns, columnOfRow }: ThemesNow, fitted: Fitted): Spread[] {
  const { passages } = fitted.words;
  const questions = questionsOf(desk, fitted);
  const led = columns.map(() => new Set<string>());
  const totals = new Float64Array(columns.length);
  const byPerson = columns.map(() => new Map<string, Part>());
  const byQuestion = columns.map(() => new Map<string, Part>());
  const asked = new Map<string, Set<string>>();
  passages.forEach(({ countedWords, participant }, d) => {
    if (countedWords === 0) return;
    const lead = leadingRow(fitted, d);
    if (lead >= 0 && columnOfRow[lead] >= 0) led[columnOfRow[lead]].add(participant);
    const question = questions[d];
    if (question !== null) {
      asked.set(question.key, (asked.get(question.key) ?? new Set()).add(participant));
    }
    for (let row = 0; row < columnOfRow.length; row++) {
      const column = columnOfRow[row];
      if (column < 0) continue;
      const words = countedWords * fitted.theta[d * columnOfRow.length + row];
      totals[column] += words;
      add(byPerson[column], participant, participant, words);
      if (question !== null) add(byQuestion[column], question.key, question.text, words);
    }
  });
  return columns.map((_, column) => {
    const person = largest(byPerson[column], totals[column]);
    const question = largest(byQuestion[column], totals[column]);
    return {
      people: led[column].size,
      ledPeople: led[column],
      person: person === null ? null : { participant: person.label, share: person.share },
      question: question === null ? null : { text: question.label, share: question.share },
      questions: [...byQuestion[column]]
        .map(([key, { label, words }]) => ({
          text: label,
          share: totals[column] > 0 ? words / totals[column] : 0,
          people: asked.get(key)?.size ?? 0,
        }))
        .sort((a, b) => b.share - a.share),
    };
  });
}

function add(parts: Map<string, Part>, key: string, label: string, words: number): void {
  const part = parts.get(key);
  if (part === undefined) parts.set(key, { label, words });
  else part.words += words;
}

function largest(
  parts: ReadonlyMap<string, Part>,
  total: number,
): { readonly label: string; readonly share: number } | null {
  let most: Part | null = null;
  for (const part of parts.values()) if (most === null || part.words > most.words) most = part;
  return most === null || total <= 0 ? null : { label: most.label, share: most.words / total };
}

/** The question before each passage; questions that differ in case or signs only are the same. */
function questionsOf(
  desk: Desk,
  { words }: Fitted,
): ({ readonly key: string; readonly text: string } | null)[] {
  const known = new Map<string, { readonly key: string; readonly text: string } | null>();
  return words.passages.map(({ transcript, questionBefore }) => {
    if (questionBefore === null || !desk.study.transcripts.has(transcript)) return null;
    const { start, end } = questionBefore;
    const place = `${transcript} ${start} ${end}`;
    const before = known.get(place);
    if (before !== undefined) return before;
    const text = desk.text(transcript).slice(start, end).replace(/\s+/gu, ' ').trim();
    const key = text
      .normalize('NFC')
      .toLowerCase()
      .replace(/[^\p{L}\p{N}]+/gu, ' ')
      .trim();
    const question = key === '' ? null : { key, text };
    known.set(place, question);
    return question;
  });
}
