import { resolve } from 'node:path';
import { sentenceFor } from '../sentences/sentences.ts';
import { takeInSentences } from '../sentences/taking-in.ts';
import { planTakeIn, takeIn, type Choice, type TakeInRefused } from '../taking-in.ts';
import { openFile, openStudy } from './open.ts';
import { readOptions, usageStop } from './options.ts';
import { Stop, type ExitCode, type Terminal } from './terminal.ts';

export const takeInUsage =
  'understory takein study.understory --from COPY.understory [--conflicts mine|theirs]';

const options = { from: { type: 'string' }, conflicts: { type: 'string' } } as const;

/** Takes another copy's codings, memos and readers in; conflicts stop it unless told who is right. */
export async function takeInCommand(
  words: readonly string[],
  terminal: Terminal,
): Promise<ExitCode> {
  const { values, positionals } = readOptions(words, options, takeInUsage);
  if (positionals.length !== 1) throw usageStop('Name one study.', takeInUsage);
  const { from, conflicts } = values;
  if (from === undefined) throw usageStop('Say with --from which copy.', takeInUsage);
  if (conflicts !== undefined && conflicts !== 'mine' && conflicts !== 'theirs') {
    throw usageStop('--conflicts takes mine or theirs.', takeInUsage);
  }
  const { desk, store, file } = await openStudy(positionals[0], terminal, {
    readOnly: false,
    call: ['takein', conflicts ?? null],
  });
  const opened = await openFile(resolve(terminal.folder, from), terminal, true);
  try {
    if (!opened.ok) throw new Stop(sentenceFor({ ...opened, path: from }));
    const plan = planTakeIn(desk, file, opened.value);
    if (!plan.ok) {
      if (plan.code !== 'nothing new') throw new Stop(takeInSentences[plan.code]);
      terminal.out('That copy holds nothing that is not here already; nothing was changed.\n');
      return 0;
    }
    const { value } = plan;
    terminal.out(
      `Codings: ${value.codings}; marks that no theme applies: ${value.nones}; memos: ${value.memos}; ` +
        `removed: ${value.removed}; left out: ${value.left}; conflicts: ${value.conflicts.length}\n`,
    );
    for (const { mine, theirs } of value.conflicts) {
      terminal.out(`  here: ${mine ?? 'removed'} · there: ${theirs ?? 'removed'}\n`);
    }
    const choices = new Map<string, Choice>(
      conflicts === undefined ? [] : value.conflicts.map(({ id }) => [id, conflicts]),
    );
    const taken = takeIn(desk, file, opened.value, choices);
    if (!taken.ok) {
      throw new Stop(
        Object.hasOwn(takeInSentences, taken.code)
          ? takeInSentences[taken.code as TakeInRefused['code']]
          : sentenceFor(taken as Parameters<typeof sentenceFor>[0]),
      );
    }
    const written = store.flush(file);
    if (!written.ok) throw new Stop(sentenceFor(written));
    terminal.out(`Taken in.\nHead: ${file.head}\n`);
    return 0;
  } finally {
    if (opened.ok) opened.value.close();
    file.close();
  }
}
