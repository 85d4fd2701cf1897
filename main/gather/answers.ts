import type { Turn } from '../../engine/spans/index.ts';
import type { Sheet } from '../formats/index.ts';

/** What a column of a table of answers is taken for. */
export type ColumnPart = 'text' | 'participant' | 'attribute' | 'left out';

export interface Column {
  readonly heading: string;
  readonly guess: ColumnPart;
  /** Rows in which it holds something. */
  readonly filled: number;
  /** Words in a cell that holds something, on average. */
  readonly words: number;
}

/** Which columns of which sheet are what: the person's word, by the columns' headings. */
export interface TablePlan {
  readonly sheet: string;
  readonly text: readonly string[];
  /** Null: every row is a person of its own. */
  readonly participant: string | null;
  readonly attributes: readonly string[];
}

const fewestWords = 5;
const people =
  /^(?:participants?|respondents?|interviewees?|informants?|persons?|people|who|names?|cases?|id|code|token|response|teilnehmer(?:in|innen)?|befragte[r]?|person|participante?s?|entrevistad[oa]s?|encuestad[oa]s?|enqu[êe]t[ée]e?s?|r[ée]pondante?s?)(?:[\s_.-]*(?:id|no|nr|number|code|name))?$/iu;

/**
 * What each column seems to be: long cells are answers; the one whose heading speaks of people, or the
 * first whose short cells all differ, names the participant; short cells that come back are
 * attributes; all else is left out.
 */
export function guessColumns({ rows: [headings = [], ...body] }: Sheet): Column[] {
  const facts = headings.map((heading, index) => {
    const cells = body.map((row) => row[index]!.trim()).filter((cell) => cell !== '');
    const words = cells.reduce((sum, cell) => sum + cell.split(/\s+/u).length, 0);
    return {
      heading,
      filled: cells.length,
      words: cells.length === 0 ? 0 : words / cells.length,
      different: new Set(cells).size,
      isDate: cells.length > 0 && cells.every((cell) => /^\d{1,4}[-./]\d{1,2}[-./]\d/u.test(cell)),
    };
  });
  const isText = ({ words }: (typeof facts)[number]): boolean => words >= fewestWords;
  const named = facts.find((fact) => people.test(fact.heading.trim()) && !isText(fact));
  const telling = facts.find(
    (fact) =>
      !isText(fact) &&
      !fact.isDate &&
      fact.filled === body.length &&
      fact.different === body.length &&
      body.length > 1,
  );
  const participant = named ?? telling;
  return facts.map((fact) => {
    const { heading, filled, words, different, isDate } = fact;
    const guess: ColumnPart = isText(fact)
      ? 'text'
      : fact === participant
        ? 'participant'
        : filled > 0 && !isDate && different <= Math.max(12, filled / 2)
          ? 'attribute'
          : 'left out';
    return { heading, guess, filled, words };
  });
}

/** The plan that the guesses make; null where no column seems to hold answers. */
export function guessPlan(sheet: Sheet): TablePlan | null {
  const columns = guessColumns(sheet);
  const of = (part: ColumnPart): string[] =>
    columns.filter(({ guess }) => guess === part).map(({ heading }) => heading);
  const text = of('text');
  if (text.length === 0) return null;
  return {
    sheet: sheet.name,
    text,
    participant: of('participant')[0] ?? null,
    attributes: of('attribute'),
  };
}

/** Somebody who answers in a table. */
export interface Answerer {
  readonly label: string;
  /** What they are called in the study. */
  readonly name: string;
  readonly attributes: Readonly<Record<string, string>>;
}

export interface Answers {
  readonly text: string;
  readonly turns: readonly Turn[];
  /** The label of the questions. */
  readonly asking: string;
  readonly people: readonly Answerer[];
}

const longestName = 200;

/**
 * A table as a talk: for every row and every column of text the heading as the interviewer's turn,
 * then the answer. Null where no cell of these columns holds anything.
 */
export function answersOf(sheet: Sheet, plan: TablePlan, transcript: string): Answers | null {
  const [headings = [], ...body] = sheet.rows;
  const at = (heading: string): number => headings.indexOf(heading);
  const columns = plan.text.map(at).filter((index) => index >= 0);
  const who = plan.participant === null ? -1 : at(plan.participant);
  const named = new Map<string, Answerer>();
  const labels = body.map((row, index) => {
    const given =
      who < 0 ? '' : row[who]!.replace(/\s+/gu, ' ').trim().slice(0, longestName).trim();
    const label = given === '' ? `Row ${index + 2}` : given;
    return { label, name: given === '' ? `${transcript}, row ${index + 2}` : given };
  });
  let asking = 'Question';
  while (labels.some(({ label }) => label === asking)) asking += ' asked';
  const turns: Turn[] = [];
  let text = '';
  const say = (speaker: string, words: string): void => {
    if (text !== '') text += '\n\n';
    text += `${speaker}: `;
    const start = text.length;
    text += words;
    turns.push({ start, end: text.length, speaker, startTime: null, endTime: null });
  };
  body.forEach((row, index) => {
    const { label, name } = labels[index]!;
    const answered = columns.filter((column) => row[column]!.trim() !== '');
    if (answered.length === 0) return;
    const attributes: Record<string, string> = { ...named.get(label)?.attributes };
    for (const heading of plan.attributes) {
      const value = row[at(heading)]?.trim() ?? '';
      if (value !== '' && heading !== '__proto__') attributes[heading] = value;
    }
    named.set(label, { label, name, attributes });
    for (const column of answered) {
      say(asking, headings[column]!);
      say(label, row[column]!.trim());
    }
  });
  return turns.length === 0 ? null : { text, turns, asking, people: [...named.values()] };
}
