import type { Edit, EditKind, Entry, Study } from '../../engine/study/index.ts';
import type { Desk } from '../desk.ts';
import { editInWords, type Names } from '../sentences/edits.ts';
import { csv, type CsvOptions } from './csv.ts';
import { themeName } from './theme-name.ts';

/** The parts of an audit trail (Lincoln & Guba 1985), in their order. */
export const trailHeadings = [
  'raw data',
  'reduction and analysis products',
  'reconstruction products',
  'process notes',
  'intentions',
  'instruments',
] as const;

export type TrailHeading = (typeof trailHeadings)[number];

/** Under which heading a decision of each kind belongs. */
const headingOf: Record<EditKind, TrailHeading> = {
  studyStarted: 'intentions',
  studyRenamed: 'intentions',
  settingsChanged: 'instruments',
  readerAdded: 'process notes',
  readerRemoved: 'process notes',
  transcriptGathered: 'raw data',
  transcriptRemoved: 'raw data',
  transcriptRenamed: 'raw data',
  speakersAssigned: 'raw data',
  textRevised: 'raw data',
  fieldNoteKept: 'raw data',
  fieldNoteLetGo: 'raw data',
  fieldNoteDescribed: 'raw data',
  participantAdded: 'raw data',
  participantRemoved: 'raw data',
  participantDescribed: 'raw data',
  participantWithdrawn: 'raw data',
  originalsSealed: 'raw data',
  themeAdded: 'reconstruction products',
  themeRemoved: 'reconstruction products',
  themeRenamed: 'reconstruction products',
  themeDefined: 'reconstruction products',
  themePinned: 'reconstruction products',
  themeUnpinned: 'reconstruction products',
  themeSetAside: 'reconstruction products',
  themeBroughtBack: 'reconstruction products',
  themesMerged: 'reconstruction products',
  themesUnmerged: 'reconstruction products',
  themesOrdered: 'reconstruction products',
  headingAdded: 'reconstruction products',
  headingRemoved: 'reconstruction products',
  headingRenamed: 'reconstruction products',
  themePutUnder: 'reconstruction products',
  reportExported: 'reconstruction products',
  wordSeeded: 'instruments',
  wordUnseeded: 'instruments',
  wordShutOut: 'instruments',
  wordLetIn: 'instruments',
  codingMade: 'reduction and analysis products',
  codingRemoved: 'reduction and analysis products',
  codingRevised: 'reduction and analysis products',
  codingLookedAtAgain: 'reduction and analysis products',
  guideRevised: 'instruments',
  identifierSettled: 'raw data',
  transcriptDescribed: 'raw data',
  turnsTagged: 'raw data',
  noneMarked: 'reduction and analysis products',
  noneCleared: 'reduction and analysis products',
  drawMade: 'instruments',
  drawRemoved: 'instruments',
  drawScored: 'reduction and analysis products',
  modelFitted: 'reduction and analysis products',
  fitRemoved: 'reduction and analysis products',
  fitChosen: 'reduction and analysis products',
  fitRenamed: 'reduction and analysis products',
  fitsForgotten: 'reduction and analysis products',
  memoWritten: 'process notes',
  memoErased: 'process notes',
  memoRevised: 'process notes',
  evidenceGathered: 'process notes',
  copyTakenIn: 'process notes',
  copyLetGo: 'process notes',
};

/** One decision of the trail: who, when, what, on what. */
export interface TrailLine {
  /** The number of its record. */
  readonly record: number;
  /** ISO 8601 in UTC, as the machine's clock gave it. */
  readonly at: string;
  /** A reader's name, or the program that acted without one. */
  readonly by: string;
  readonly heading: TrailHeading;
  readonly kind: EditKind;
  readonly what: string;
  /** Names of the transcripts, participants and themes that it speaks of. */
  readonly on: readonly string[];
  /** Ids of the themes among them. */
  readonly themes: readonly string[];
  /** The record that it takes back. */
  readonly undoes: number | null;
  /** Whether it was taken back since. */
  readonly takenBack: boolean;
}

export interface TrailFilter {
  /** A reader's name. */
  readonly by?: string;
  readonly kind?: string;
  /** ISO 8601, or the beginning of it: a day, a minute. */
  readonly since?: string;
  readonly theme?: string;
}

/** The trail in order. Names are those of today; what was erased is not there to be named. */
export function trailLines({ study, entries }: Pick<Desk, 'study' | 'entries'>, names: Names) {
  const all = [...entries];
  const readers = new Map<string, string>();
  const named = new Map<string, string>();
  for (const { edit } of all) {
    if (edit.kind === 'readerAdded') readers.set(edit.reader.id, edit.reader.name);
    if (edit.kind === 'transcriptGathered') named.set(edit.transcript.id, edit.transcript.name);
    if (edit.kind === 'participantAdded') named.set(edit.participant.id, edit.participant.name);
  }
  for (const { id, name } of study.transcripts.values()) named.set(id, name);
  for (const { id, name } of study.participants.values()) named.set(id, name);
  const undone = takenBack(all);
  return all.map(({ sequence, at, by, undoes, edit }): TrailLine => {
    const ids = idsIn(edit);
    const themes = ids.filter((id) => study.themes.has(id));
    return {
      record: sequence,
      at,
      by: readers.get(by) ?? by,
      heading: headingFor(edit),
      kind: edit.kind,
      what: editInWords(edit, names),
      on: [
        ...new Set([
          ...ids.flatMap((id) => named.get(id) ?? []),
          // A fit speaks of all of them.
          ...(edit.kind === 'modelFitted' || edit.kind === 'fitRemoved'
            ? []
            : themes.map((id) => names.theme(id))),
        ]),
      ],
      themes,
      undoes: undoes ?? null,
      takenBack: undone.has(sequence),
    };
  });
}

/** The lines that pass a filter. */
export function filterTrail(
  lines: readonly TrailLine[],
  { by, kind, since, theme }: TrailFilter,
): readonly TrailLine[] {
  return lines.filter(
    (line) =>
      (by === undefined || line.by === by) &&
      (kind === undefined || line.kind === kind) &&
      (since === undefined || line.at >= since) &&
      (theme === undefined || line.themes.includes(theme)),
  );
}

/** What was undone and done again stands. Whatever takes back is later than what it takes back. */
function takenBack(entries: readonly Entry[]): ReadonlySet<number> {
  const undone = new Set<number>();
  for (const { sequence, undoes } of [...entries].reverse()) {
    if (undoes !== undefined && !undone.has(sequence)) undone.add(undoes);
  }
  return undone;
}

function headingFor(edit: Edit): TrailHeading {
  if (edit.kind === 'memoWritten' && edit.memo.subject.kind === 'study') return 'intentions';
  return headingOf[edit.kind];
}

/** Every string in an edit that may be an id; ids are unlike anything that people type. */
function idsIn(edit: Edit): string[] {
  const found: string[] = [];
  const look = (value: unknown, key: string): void => {
    if (typeof value === 'string') found.push(value);
    else if (typeof value === 'object' && value !== null && !skipped.has(key)) {
      for (const [inner, each] of Object.entries(value)) look(each, inner);
    }
  };
  for (const [key, value] of Object.entries(edit)) look(value, key);
  return found;
}

const skipped: ReadonlySet<string> = new Set(['trace', 'turns', 'settings', 'result', 'details']);

/** What a desk's ids are called, for the command line. */
export function namesOf(desk: Desk): Names {
  const { study } = desk;
  const fitted = desk.fitted(study.fit);
  return {
    theme: (id) => {
      const theme = study.themes.get(id);
      return theme === undefined ? 'a theme that is no more' : themeName(theme, fitted);
    },
    transcript: (id) => study.transcripts.get(id)?.name ?? 'a transcript that is no more',
    participant: (id) => study.participants.get(id)?.name ?? 'a participant who is no more',
  };
}

/** The trail as a table, a row a decision; the head of the chain stands in the last column. */
export function trailCsv(lines: readonly TrailLine[], head: string, options: CsvOptions): string {
  return csv(
    [
      ['record', 'at', 'by', 'heading', 'kind', 'what', 'on', 'undoes', 'taken_back', 'study_head'],
      ...lines.map((line) => [
        line.record,
        line.at,
        line.by,
        line.heading,
        line.kind,
        line.what,
        line.on.join('; '),
        line.undoes,
        line.takenBack ? 'yes' : 'no',
        head,
      ]),
    ],
    options,
  );
}

/** The trail under the headings of an audit trail (Lincoln & Guba 1985). */
export function trailMarkdown(
  { name }: Pick<Study, 'name'>,
  lines: readonly TrailLine[],
  head: string,
): string {
  const parts = trailHeadings.map((heading) => {
    const own = lines.filter((line) => line.heading === heading);
    const title = `## ${heading.slice(0, 1).toUpperCase()}${heading.slice(1)}`;
    if (own.length === 0) return `${title}\n\nNothing in the trail.\n`;
    const rows = own.map(
      (line) =>
        `| ${line.record} | ${line.at} | ${[line.by, line.what, line.on.join('; '), remark(line)]
          .map(cell)
          .join(' | ')} |`,
    );
    return `${title}\n\n| record | when | who | what | on | remark |\n| --- | --- | --- | --- | --- | --- |\n${rows.join('\n')}\n`;
  });
  return `# Audit trail of ${name}

The decisions of the study in their order, under the headings of an audit trail (Lincoln, Y. S. & Guba,
E. G. (1985). Naturalistic inquiry. Sage). What stands here is what the study is made from; \`verify\`
makes every fit again from it. Head of the chain: \`${head}\`.

${parts.join('\n')}`;
}

function remark({ undoes, takenBack: back }: TrailLine): string {
  return [undoes === null ? '' : `takes back ${undoes}`, back ? 'taken back' : '']
    .filter((part) => part !== '')
    .join('; ');
}

function cell(text: string): string {
  return text.replaceAll('\\', '\\\\').replaceAll('|', '\\|').replace(/\s+/gu, ' ');
}
