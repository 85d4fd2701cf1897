import { gatherSteadiness } from '../evidence.ts';
import { steadinessCsv, steadinessText } from '../reports/steadiness.ts';
import { evidenceCommand } from './evidence.ts';
import { readOptions, usageStop, wholeNumber } from './options.ts';
import type { ExitCode, Terminal } from './terminal.ts';

export const steadyUsage =
  'understory steady study.understory [--resamples 20] [--seed N] [--out FILE] [--no-guard]';

const options = {
  resamples: { type: 'string' },
  seed: { type: 'string' },
  out: { type: 'string' },
  'no-guard': { type: 'boolean' },
} as const;

/** Measures how steady the themes of the fit on screen are when participants are left out. */
export async function steady(words: readonly string[], terminal: Terminal): Promise<ExitCode> {
  const { values, positionals } = readOptions(words, options, steadyUsage);
  if (positionals.length !== 1) throw usageStop('Name one study.', steadyUsage);
  const resamples = wholeNumber(
    values.resamples,
    'resamples',
    { least: 2, most: 1000, otherwise: 20 },
    steadyUsage,
  );
  const seed = seedOf(values.seed, steadyUsage);
  const guard = { guard: values['no-guard'] !== true };
  return await evidenceCommand(
    {
      study: positionals[0],
      out: values.out,
      ending: 'steady',
      doing: 'Re-fitting',
      gather: (desk, running) => gatherSteadiness(desk, { ...running, ...seed, resamples }),
      text: steadinessText,
      table: (desk, fitted, result) => steadinessCsv(desk, fitted, result, guard),
    },
    terminal,
  );
}

/** Nothing where no seed is given: the fit's own is taken then. */
export function seedOf(value: string | undefined, usage: string): { readonly seed?: number } {
  if (value === undefined) return {};
  const limits = { least: 0, most: 4_294_967_295, otherwise: 0 };
  return { seed: wholeNumber(value, 'seed', limits, usage) };
}
