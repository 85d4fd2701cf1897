import type { Desk } from '../desk.ts';
import { guessPlan, type TablePlan } from '../gather/answers.ts';
import { answerDrafts, type FoundTable } from '../gather/gather.ts';
import type { SkippedFile } from '../gather/source-file.ts';
import { refuse } from './refuse.ts';
import { Stop, type Terminal } from './terminal.ts';

/** What a person said of the columns of tables; what is left open is guessed. */
export interface ColumnOptions {
  readonly text?: readonly string[] | undefined;
  readonly participant?: string | undefined;
  readonly attribute?: readonly string[] | undefined;
  readonly sheet?: string | undefined;
}

/** Makes a transcript of each table of answers, and says what its columns were taken for. */
export function gatherTables(
  desk: Desk,
  tables: readonly FoundTable[],
  options: ColumnOptions,
  terminal: Terminal,
): { readonly transcripts: string[]; readonly skipped: SkippedFile[] } {
  const transcripts: string[] = [];
  const skipped: SkippedFile[] = [];
  for (const found of tables) {
    const plan = planFor(found, options);
    const made = plan === null ? null : answerDrafts(desk, found, plan);
    if (plan === null || made === null) {
      skipped.push({ file: found.file, refusal: { code: 'a table' } });
      continue;
    }
    refuse(desk.make(made.drafts, { group: desk.context.mintId('group') }));
    transcripts.push(made.name);
    const who =
      plan.participant === null ? 'each row a person' : `participant: ${plan.participant}`;
    const attributes =
      plan.attributes.length === 0 ? '' : `; attributes: ${plan.attributes.join(', ')}`;
    terminal.err(
      `${found.file} read as a table: text: ${plan.text.join(', ')}; ${who}${attributes}\n`,
    );
  }
  return { transcripts, skipped };
}

/** The plan for one table; null where it has none of the columns named, or none that hold answers. */
function planFor(found: FoundTable, options: ColumnOptions): TablePlan | null {
  const { sheets } = found.table;
  const sheet =
    options.sheet === undefined ? sheets[0] : sheets.find(({ name }) => name === options.sheet);
  if (sheet === undefined) {
    throw new Stop(
      `“${found.file}” has no sheet “${options.sheet ?? ''}”; it has ${sheets.map(({ name }) => name).join(', ')}.`,
      2,
    );
  }
  const headings = sheet.rows[0] ?? [];
  const guess = guessPlan(sheet);
  const present = (given: readonly string[]): string[] =>
    given.filter((heading) => headings.includes(heading));
  const text = options.text === undefined ? (guess?.text ?? []) : present(options.text);
  if (text.length === 0) return null;
  const participant =
    options.participant === undefined
      ? (guess?.participant ?? null)
      : (present([options.participant])[0] ?? null);
  const attributes =
    options.attribute === undefined ? (guess?.attributes ?? []) : present(options.attribute);
  return {
    sheet: sheet.name,
    text,
    participant: participant !== null && text.includes(participant) ? null : participant,
    attributes: attributes.filter((one) => one !== participant && !text.includes(one)),
  };
}
