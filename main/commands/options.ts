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
    throw usageStop(sentenceOf(error as NodeJS.ErrnoException), usage);
  }
}

/** Node's parser speaks to programmers; only the option that it names is kept. */
function sentenceOf(error: NodeJS.ErrnoException): string {
  const named = /'(-[^' ]*)/u.exec(error.message)?.[1];
  if (named === undefined) throw error;
  switch (error.code) {
    case 'ERR_PARSE_ARGS_UNKNOWN_OPTION':
      return `There is no option ${named} here; check its spelling.`;
    case 'ERR_PARSE_ARGS_INVALID_OPTION_VALUE':
      return error.message.includes('does not take')
        ? `The option ${named} takes no value; leave it away.`
        : `The option ${named} needs a value; write it after the option.`;
    default:
      throw error;
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
  return new Stop(`${sentence}\nUsage: ${usage}`, 2);
}
