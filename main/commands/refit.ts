import { resolve } from 'node:path';
import { applyPlan, applySettings } from '../decisions.ts';
import { emptyPlan } from '../plan.ts';
import { sentenceFor } from '../sentences/sentences.ts';
import { fitWithProgress } from './fitting.ts';
import { movedText } from './moved.ts';
import { openStudy } from './open.ts';
import { readOptions, usageStop, wholeNumber } from './options.ts';
import { outputFiles } from './outputs.ts';
import { readPlan } from './plan-file.ts';
import { refuse } from './refuse.ts';
import { Stop, type ExitCode, type Terminal } from './terminal.ts';
import { sayUnheard } from './theme.ts';
import { checkFolder, stageFiles } from './write-files.ts';

export const refitUsage =
  'understory refit study.understory --out DIR [--plan more.json] [--from-scratch] [--themes N] [--no-guard]';

const options = {
  plan: { type: 'string' },
  out: { type: 'string' },
  themes: { type: 'string' },
  'from-scratch': { type: 'boolean' },
  'no-guard': { type: 'boolean' },
} as const;

/** Applies further decisions to a stored study and fits again around them. */
export async function refit(words: readonly string[], terminal: Terminal): Promise<ExitCode> {
  const { values, positionals } = readOptions(words, options, refitUsage);
  if (positionals.length !== 1) throw usageStop('Name one study.', refitUsage);
  if (values.out === undefined) throw usageStop('Say with --out where to write.', refitUsage);
  const scratch = values['from-scratch'] === true;
  if (values.themes !== undefined && !scratch) {
    throw usageStop('--themes goes with --from-scratch: a re-fit keeps the themes.', refitUsage);
  }
  const limits = { least: 1, most: 200, otherwise: 12 };
  const themes = wholeNumber(values.themes, 'themes', limits, refitUsage);
  const plan = values.plan === undefined ? emptyPlan : await readPlan(values.plan, terminal.folder);
  const out = resolve(terminal.folder, values.out);
  await checkFolder(out);
  const { desk, store, file } = await openStudy(positionals[0], terminal, {
    readOnly: false,
    call: ['refit', plan, scratch, values.themes ?? null],
  });
  try {
    const asked = values.themes === undefined ? {} : { themes };
    refuse(applySettings(desk, { ...plan.settings, ...asked }));
    refuse(applyPlan(desk, { ...plan, settings: {} }));
    const done = await fitWithProgress(desk, scratch ? 'from scratch' : 're-fit', terminal);
    sayUnheard(desk, done.unheardSeeds, terminal);
    const outputs = outputFiles(desk, {
      guard: values['no-guard'] !== true,
      done,
      skipped: [],
      unmatched: [],
    });
    const keep = [
      file.path,
      ...(values.plan === undefined ? [] : [resolve(terminal.folder, values.plan)]),
    ];
    const staged = await stageFiles(out, outputs, keep);
    try {
      const written = store.flush(file);
      if (!written.ok) throw new Stop(sentenceFor(written));
      await staged.commit();
    } finally {
      await staged.discard();
    }
    terminal.err(movedText(desk));
    return 0;
  } finally {
    file.close();
  }
}
