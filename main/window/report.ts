import type {
  Api,
  NamedFile,
  Refused,
  ReportFormat,
  ReportPreview,
  ReportRequest,
} from '../api.ts';
import { codedExcerpts, type CodedExcerpt } from '../reports/coded-excerpts.ts';
import {
  attribution,
  bookCautions,
  filterSentence,
  type ReportFilter,
} from '../reports/excerpt-book.ts';
import { excerptsCsv } from '../reports/excerpts-csv.ts';
import { excerptsDocx } from '../reports/excerpts-docx.ts';
import { excerptsHtml } from '../reports/excerpts-html.ts';
import { excerptsJson } from '../reports/excerpts-json.ts';
import { methodsText } from '../reports/methods.ts';
import { themesCsv } from '../reports/theme-table.ts';
import { sentenceFor } from '../sentences/sentences.ts';
import { give, isRefused, refuse } from './answers.ts';
import { safeFileName } from './file-names.ts';
import { Kept } from './kept.ts';
import type { OpenStudy } from './open-study.ts';
import type { Room } from './room.ts';
import type { Handlers } from './session-types.ts';
import { themeRows } from './theme-rows.ts';
import { writeWholeFile } from './write-file.ts';

const excerptsShown = 12;
const fewPeople = 3;

export function reportHandlers(
  room: Room,
): Pick<Handlers, 'reportPreview' | 'report' | 'saveFile'> {
  return {
    reportPreview: room.look((open, request: ReportRequest) => {
      const excerpts = excerptsFor(open, request);
      return isRefused(excerpts) ? excerpts : give(preview(open, request, excerpts));
    }),

    report: room.look(async (open, request: Api['report']['takes']) => {
      const excerpts = excerptsFor(open, request);
      if (isRefused(excerpts)) return excerpts;
      const file = await reportFile(open, request, excerpts);
      if (isRefused(file) || open.file.readOnly) return file;
      const refused = recordExport(open, request.format, file.value.fileName, excerpts);
      if (refused !== null) return refused;
      const after = await room.afterwards(open);
      return isRefused(after) ? after : file;
    }),

    saveFile: async ({ fileName, bytes }) => {
      const { dialogs } = room.surroundings;
      if (dialogs === null) return refuse('no dialog to save');
      const path = await room.away(dialogs.placeFile(fileName));
      if (path === null) return give(null);
      const failure = await writeWholeFile(path, bytes);
      return failure === null ? give(path) : { code: failure.code, refused: sentenceFor(failure) };
    },
  };
}

/** Whose words left the study has to be known if one of them withdraws. */
function recordExport(
  open: OpenStudy,
  format: ReportFormat,
  fileName: string,
  excerpts: readonly CodedExcerpt[],
): Refused | null {
  const { study, reader, desk } = open;
  const quotes = format !== 'themes csv' && format !== 'methods';
  const named = <Item extends { readonly id: string; readonly name: string }>(
    items: ReadonlyMap<string, Item>,
    names: readonly string[],
  ): string[] => {
    const wanted = new Set(names);
    return [...items.values()].filter(({ name }) => wanted.has(name)).map(({ id }) => id);
  };
  return open.decide([
    {
      kind: 'reportExported',
      report: {
        what: format,
        fileName,
        transcripts: quotes
          ? named(
              study.transcripts,
              excerpts.map(({ transcript }) => transcript),
            )
          : [],
        participants: quotes
          ? named(
              study.participants,
              excerpts.map(({ participant }) => participant),
            )
          : [],
        at: desk.context.now(),
        reader: reader.id,
      },
    },
  ]);
}

const kept = new WeakMap<OpenStudy, Map<string, Kept<CodedExcerpt[]>>>();

/** Excerpts of some standings, kept while the study stays the same: a preview comes with each tick. */
function allExcerpts(open: OpenStudy, standings: ReportRequest['standings']): CodedExcerpt[] {
  const each = kept.get(open) ?? new Map<string, Kept<CodedExcerpt[]>>();
  kept.set(open, each);
  const key = [...new Set(standings)].sort().join();
  const one = each.get(key) ?? new Kept<CodedExcerpt[]>();
  each.set(key, one);
  return one.get([open.study], () => codedExcerpts(open.desk, new Set(standings)));
}

function excerptsFor(
  open: OpenStudy,
  { standings, themes }: ReportRequest,
): CodedExcerpt[] | Refused {
  const unknown = themes?.find((id) => !open.study.themes.has(id));
  if (unknown !== undefined) {
    return open.refusal({ ok: false, code: 'unknown theme', subject: unknown });
  }
  const all = allExcerpts(open, standings);
  if (themes === null) return all;
  const wanted = new Set(themes.map((id) => open.now.themeOf(id)));
  return all.filter(({ themeId }) => wanted.has(themeId));
}

function preview(
  open: OpenStudy,
  request: ReportRequest,
  excerpts: readonly CodedExcerpt[],
): ReportPreview {
  const byTheme = new Map<string, CodedExcerpt[]>();
  for (const excerpt of allExcerpts(open, request.standings)) {
    const own = byTheme.get(excerpt.themeId);
    if (own === undefined) byTheme.set(excerpt.themeId, [excerpt]);
    else own.push(excerpt);
  }
  return {
    count: excerpts.length,
    people: peopleIn(excerpts),
    filter: filterFor(open, request, excerpts.length),
    themes: themeRows(open).map(({ id, label }) => {
      const own = byTheme.get(id) ?? [];
      return { id, label, count: own.length, people: peopleIn(own) };
    }),
    excerpts: excerpts.slice(0, excerptsShown).map((excerpt) => ({
      theme: excerpt.theme,
      question: excerpt.questionBefore,
      text: excerpt.text,
      attribution: attribution(excerpt),
      standing: excerpt.standing,
    })),
    cautions: cautionsFor(request, excerpts),
  };
}

function peopleIn(excerpts: readonly CodedExcerpt[]): number {
  return new Set(excerpts.map(({ participant }) => participant)).size;
}

function filterFor(
  { now }: OpenStudy,
  { standings, themes }: ReportRequest,
  count: number,
): string {
  return filterSentence(reportFilter(now, { standings, themes }), count);
}

function reportFilter(
  now: OpenStudy['now'],
  { standings, themes }: Pick<ReportRequest, 'standings' | 'themes'>,
): ReportFilter {
  return { standings, themes: themes?.map((id) => now.label(id)) ?? null };
}

function cautionsFor(
  { standings }: ReportRequest,
  excerpts: readonly CodedExcerpt[],
): readonly string[] {
  return [
    bookCautions[0],
    ...(standings.includes('suggested') ? [bookCautions[1]] : []),
    ...(standings.includes('suggested')
      ? ['Suggestions that nobody has read are among these excerpts; they are marked as suggested.']
      : []),
    ...(someoneStandsOut(excerpts)
      ? [
          'Some sets of attributes belong to fewer than three people here: printed together they can say who somebody is.',
        ]
      : []),
  ];
}

/** Whether the attributes of somebody in the report are shared by fewer than three people in it. */
function someoneStandsOut(excerpts: readonly CodedExcerpt[]): boolean {
  const people = new Map<string, Set<string>>();
  for (const { participant, attributes } of excerpts) {
    const pairs = Object.entries(attributes).sort(([a], [b]) => (a < b ? -1 : 1));
    if (pairs.length === 0) continue;
    const key = JSON.stringify(pairs);
    people.set(key, (people.get(key) ?? new Set()).add(participant));
  }
  return [...people.values()].some((own) => own.size < fewPeople);
}

const endings: Readonly<Record<ReportFormat, string>> = {
  csv: 'excerpts.csv',
  json: 'excerpts.json',
  html: 'excerpts.html',
  docx: 'excerpts.docx',
  'themes csv': 'themes.csv',
  methods: 'methods.md',
};

async function reportFile(
  open: OpenStudy,
  request: Api['report']['takes'],
  excerpts: readonly CodedExcerpt[],
): Promise<{ readonly value: NamedFile } | Refused> {
  const content = await contentOf(open, request, excerpts);
  if (isRefused(content)) return content;
  return give({
    fileName: `${safeFileName(open.study.name)} ${endings[request.format]}`,
    bytes: typeof content === 'string' ? new TextEncoder().encode(content) : content,
  });
}

async function contentOf(
  { study, desk, now, file: { head } }: OpenStudy,
  { format, standings, themes, guard }: Api['report']['takes'],
  excerpts: readonly CodedExcerpt[],
): Promise<string | Uint8Array | Refused> {
  const filter = reportFilter(now, { standings, themes });
  switch (format) {
    case 'csv':
      return excerptsCsv(study, excerpts, { guard }, head);
    case 'json':
      return excerptsJson(study.name, excerpts, filter, head);
    case 'html':
      return excerptsHtml(study.name, excerpts, filter, head);
    case 'docx':
      return excerptsDocx(study.name, excerpts, filter, head);
    case 'themes csv':
      return themesCsv(desk, { guard }, head);
    case 'methods':
      return now.fitted === null ? refuse('no fit') : methodsText(desk, now.fitted, head);
  }
}
