import { parseArgs, type ParseArgsConfig } from 'node:util';
import { Stop } from './terminal.ts';

type OptionConfig = NonNullable<ParseArgsConfig['options']>;

/** A command's options and what stands besides them; stops with exit code 2 where they are off. */
export function readOptions<Options extends OptionConfig>(
  words: readonly string[],
  options: Options,
  usage: string,
) {
  try {
    return parseArgs({ args: [...words], options, allowPositionals: true, strict: true });
  } catch (error) {
    const { message } = error as Error;
    // The parser's first sentence names the option; what follows speaks to programmers.
    throw usageStop(`${message.split(/\. |\n/u)[0].replace(/\.$/u, '')}.`, usage);
  }
}

/** A whole number within limits, or the default where the option is not given. */
export function wholeNumber(
  value: string | undefined,
  name: string,
  { least, most, otherwise }: { least: number; most: number; otherwise: number },
  usage: string,
): number {
  if (value === undefined) return otherwise;
  const number = /^\d+$/u.test(value) ? Number(value) : Number.NaN;
  if (!(number >= least && number <= most)) {
    throw usageStop(`--${name} must be a whole number from ${least} to ${most}.`, usage);
  }
  return number;
}

export function usageStop(sentence: string, usage: string): Stop {
  return new Stop(`${sentence} Usage: ${usage}`, 2);
}
