import { resolve } from 'node:path';
import { codedExcerpts, reportable, type Reportable } from '../reports/coded-excerpts.ts';
import { excerptsCsv } from '../reports/excerpts-csv.ts';
import { excerptsDocx } from '../reports/excerpts-docx.ts';
import { excerptsHtml } from '../reports/excerpts-html.ts';
import { excerptsJson } from '../reports/excerpts-json.ts';
import { openStudy } from './open.ts';
import { readOptions, usageStop } from './options.ts';
import type { ExitCode, Terminal } from './terminal.ts';
import { writeOneFile } from './write-files.ts';

export const exportUsage =
  'understory export study.understory --as csv|json|html|docx --out FILE ' +
  '[--standing confirmed,by-hand,suggested] [--no-guard]';

const options = {
  as: { type: 'string' },
  out: { type: 'string' },
  standing: { type: 'string' },
  'no-guard': { type: 'boolean' },
} as const;

const formats = ['csv', 'json', 'html', 'docx'] as const;
type Format = (typeof formats)[number];

/** Writes coded excerpts of a stored study into one file. */
export async function exportExcerpts(
  words: readonly string[],
  terminal: Terminal,
): Promise<ExitCode> {
  const { values, positionals } = readOptions(words, options, exportUsage);
  if (positionals.length !== 1) throw usageStop('Name one study.', exportUsage);
  if (values.out === undefined) throw usageStop('Say with --out where to write.', exportUsage);
  const format = formats.find((one) => one === values.as);
  if (format === undefined)
    throw usageStop('Say with --as what to write: csv, json, html or docx.', exportUsage);
  const standings = readStandings(values.standing ?? 'confirmed,by-hand');

  const { desk, file } = await openStudy(positionals[0], terminal, { readOnly: true, call: null });
  try {
    const excerpts = codedExcerpts(desk, new Set(standings));
    const content = await contentOf(format, desk, excerpts, standings, {
      guard: values['no-guard'] !== true,
      head: file.head,
    });
    await writeOneFile(resolve(terminal.folder, values.out), content, [file.path]);
    terminal.err(
      excerpts.length === 0
        ? `There are no excerpts that are ${standings.join(' or ')} yet, so the file holds none; ` +
            'read and confirm some, or add --standing suggested to see what waits to be read.\n'
        : `${excerpts.length} coded ${excerpts.length === 1 ? 'excerpt' : 'excerpts'} written to ${values.out}\n`,
    );
    return 0;
  } finally {
    file.close();
  }
}

async function contentOf(
  format: Format,
  desk: Parameters<typeof codedExcerpts>[0],
  excerpts: ReturnType<typeof codedExcerpts>,
  standings: readonly Reportable[],
  { guard, head }: { readonly guard: boolean; readonly head: string },
): Promise<string | Uint8Array> {
  const { study } = desk;
  switch (format) {
    case 'csv':
      return excerptsCsv(study, excerpts, { guard }, head);
    case 'json':
      return excerptsJson(study.name, excerpts, { standings, themes: null }, head);
    case 'html':
      return excerptsHtml(study.name, excerpts, { standings, themes: null }, head);
    case 'docx':
      return excerptsDocx(study.name, excerpts, { standings, themes: null }, head);
  }
}

function readStandings(list: string): Reportable[] {
  return list.split(',').map((word) => {
    const name = word.trim().replaceAll('-', ' ');
    const standing = reportable.find((one) => one === name);
    if (standing === undefined) {
      throw usageStop(
        `There is no standing “${word}”; --standing takes confirmed, by-hand, suggested and rejected.`,
        exportUsage,
      );
    }
    return standing;
  });
}
