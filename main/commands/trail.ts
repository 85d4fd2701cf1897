import { extname, resolve } from 'node:path';
import { editKinds } from '../../engine/study/index.ts';
import { filterTrail, namesOf, trailCsv, trailLines, trailMarkdown } from '../reports/trail.ts';
import { openStudy } from './open.ts';
import { readOptions, usageStop } from './options.ts';
import type { ExitCode, Terminal } from './terminal.ts';
import { writeOneFile } from './write-files.ts';

export const trailUsage =
  'understory trail study.understory [--by NAME] [--kind KIND] [--since DATE] [--theme NAME] ' +
  '[--out FILE.csv|FILE.md] [--no-guard]';

const options = {
  by: { type: 'string' },
  kind: { type: 'string' },
  since: { type: 'string' },
  theme: { type: 'string' },
  out: { type: 'string' },
  'no-guard': { type: 'boolean' },
} as const;

/** Prints who decided what, when, on what; or writes it as a table or under its headings. */
export async function trail(words: readonly string[], terminal: Terminal): Promise<ExitCode> {
  const { values, positionals } = readOptions(words, options, trailUsage);
  if (positionals.length !== 1) throw usageStop('Name one study.', trailUsage);
  const { by, kind, since, out } = values;
  const ending = out === undefined ? '' : extname(out).toLowerCase();
  if (out !== undefined && ending !== '.csv' && ending !== '.md') {
    throw usageStop('--out takes a file that ends in .csv or .md.', trailUsage);
  }
  if (kind !== undefined && !editKinds.some((one) => one === kind)) {
    throw usageStop(
      `There is no kind “${kind}”; choose one of ${editKinds.join(', ')}.`,
      trailUsage,
    );
  }
  if (since !== undefined && !/^\d{4}(?:-\d\d(?:-\d\d(?:T[\d:.]*Z?)?)?)?$/u.test(since)) {
    throw usageStop('--since takes a day as 2026-02-03, or the beginning of a time.', trailUsage);
  }
  const { desk, file } = await openStudy(positionals[0], terminal, { readOnly: true, call: null });
  try {
    const names = namesOf(desk);
    const theme =
      values.theme === undefined
        ? undefined
        : [...desk.study.themes.keys()].find(
            (id) => id === values.theme || names.theme(id) === values.theme,
          );
    if (values.theme !== undefined && theme === undefined) {
      throw usageStop(
        `There is no theme “${values.theme}” in the study; use its name or its id.`,
        trailUsage,
      );
    }
    const lines = filterTrail(trailLines(desk, names), {
      ...(by === undefined ? {} : { by }),
      ...(kind === undefined ? {} : { kind }),
      ...(since === undefined ? {} : { since }),
      ...(theme === undefined ? {} : { theme }),
    });
    if (out === undefined) {
      for (const line of lines) {
        const on = line.on.length === 0 ? '' : ` · ${line.on.join('; ')}`;
        const back = line.undoes === null ? '' : ` (takes back ${line.undoes})`;
        terminal.out(`${line.record}  ${line.at}  ${line.by}  ${line.what}${on}${back}\n`);
      }
      terminal.out(`Head: ${file.head}\n`);
      return 0;
    }
    const content =
      ending === '.csv'
        ? trailCsv(lines, file.head, { guard: values['no-guard'] !== true })
        : trailMarkdown(desk.study, lines, file.head);
    await writeOneFile(resolve(terminal.folder, out), content, [file.path]);
    terminal.err(
      `${lines.length} ${lines.length === 1 ? 'decision' : 'decisions'} written to ${out}\n`,
    );
    return 0;
  } finally {
    file.close();
  }
}
