import type { FitDone } from '../../engine/themes/index.ts';
import { transcriptsInOrder, type Desk } from '../desk.ts';
import type { SkippedFile } from '../gather/source-file.ts';
import { codedExcerpts } from '../reports/coded-excerpts.ts';
import { excerptsCsv } from '../reports/excerpts-csv.ts';
import { fitJson } from '../reports/fit-json.ts';
import { methodsText } from '../reports/methods.ts';
import { passagesCsv } from '../reports/passages-csv.ts';
import { themesCsv } from '../reports/theme-table.ts';
import { sentenceForSkipped, type FileRefusal } from '../sentences/sentences.ts';
import type { Files } from './write-files.ts';

export interface OutputOptions {
  readonly guard: boolean;
  readonly done: FitDone;
  readonly skipped: readonly SkippedFile[];
  readonly unmatched: readonly string[];
}

/** The files that a fit on the command line leaves behind. */
export function outputFiles(desk: Desk, options: OutputOptions): Files {
  const fitted = desk.fitted(desk.study.fit);
  if (fitted === null) throw new Error('outputFiles: desk must hold a study with a fit');
  const csvOptions = { guard: options.guard };
  const excerpts = codedExcerpts(desk, new Set(['confirmed', 'by hand', 'suggested']));
  const files = new Map<string, string>([
    ['excerpts.csv', excerptsCsv(desk.study, excerpts, csvOptions)],
    ['themes.csv', themesCsv(desk, csvOptions)],
    ['passages.csv', passagesCsv(desk, fitted, csvOptions)],
    [
      'fit.json',
      fitJson(desk, fitted, {
        done: options.done,
        unmatched: options.unmatched,
        skipped: options.skipped.map((skipped) => ({
          ...skipped,
          sentence: sentenceForSkipped(skipped.refusal as FileRefusal),
        })),
      }),
    ],
    ['methods.md', methodsText(desk, fitted)],
  ]);
  for (const { id, name } of transcriptsInOrder(desk.study)) {
    files.set(`transcripts/${name}.txt`, desk.text(id));
  }
  return files;
}
