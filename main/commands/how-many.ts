import { gatherHowMany } from '../evidence.ts';
import { howManyCsv, howManyText } from '../reports/how-many.ts';
import { evidenceCommand } from './evidence.ts';
import { readOptions, usageStop, wholeNumber } from './options.ts';
import { seedOf } from './steady.ts';
import type { ExitCode, Terminal } from './terminal.ts';

export const howManyUsage =
  'understory howmany study.understory [--from 4] [--to 30] [--step 1] [--seed N] [--out FILE]';

const options = {
  from: { type: 'string' },
  to: { type: 'string' },
  step: { type: 'string' },
  seed: { type: 'string' },
  out: { type: 'string' },
} as const;

/** Compares numbers of themes; recommends a range to read and never chooses. */
export async function howMany(words: readonly string[], terminal: Terminal): Promise<ExitCode> {
  const { values, positionals } = readOptions(words, options, howManyUsage);
  if (positionals.length !== 1) throw usageStop('Name one study.', howManyUsage);
  const number = (name: 'from' | 'to' | 'step', least: number, otherwise: number): number =>
    wholeNumber(values[name], name, { least, most: 200, otherwise }, howManyUsage);
  const from = number('from', 2, 4);
  const to = number('to', 2, 30);
  const step = number('step', 1, 1);
  if (from > to) throw usageStop('--from must not be above --to.', howManyUsage);
  const numbers = Array.from(
    { length: Math.floor((to - from) / step) + 1 },
    (_, i) => from + i * step,
  );
  const seed = seedOf(values.seed, howManyUsage);
  return await evidenceCommand(
    {
      study: positionals[0],
      out: values.out,
      ending: 'howmany',
      doing: 'Fitting',
      gather: (desk, running) => gatherHowMany(desk, { ...running, ...seed, numbers }),
      text: (_desk, _fitted, result) => howManyText(result),
      // There is nothing in it but numbers and our own headings.
      table: (_desk, _fitted, result) => howManyCsv(result, { guard: false }),
    },
    terminal,
  );
}
