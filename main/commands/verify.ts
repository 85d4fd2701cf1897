import { resolve } from 'node:path';
import {
  fitCheckInWords,
  headInWords,
  limitOfTheChain,
  outcomeInWords,
  trailFaultInWords,
} from '../sentences/verify.ts';
import { sentenceFor } from '../sentences/sentences.ts';
import { leastHeadDigits, verifyFile } from '../verify.ts';
import { withPassword } from './open.ts';
import { readOptions, usageStop } from './options.ts';
import { ProgressLine, Stop, type ExitCode, type Terminal } from './terminal.ts';

export const verifyUsage = 'understory verify study.understory [--head HASH]';

const options = { head: { type: 'string' } } as const;

/** Folds the trail, makes every fit again from its stored words, and compares. */
export async function verifyStudy(words: readonly string[], terminal: Terminal): Promise<ExitCode> {
  const { values, positionals } = readOptions(words, options, verifyUsage);
  if (positionals.length !== 1) throw usageStop('Name one study.', verifyUsage);
  const { head } = values;
  if (head !== undefined && (!/^[0-9a-f]+$/iu.test(head) || head.length < leastHeadDigits)) {
    throw usageStop(
      `--head takes a hash as reports print it, of ${leastHeadDigits} to 64 digits from 0 to f.`,
      verifyUsage,
    );
  }
  const [path] = positionals;
  const line = new ProgressLine(terminal);
  const result = await withPassword(terminal, (password) =>
    verifyFile(resolve(terminal.folder, path), {
      password,
      ...(head === undefined ? {} : { head }),
      signal: terminal.signal,
      onProgress: (done, of, fraction) =>
        line.show(
          `Fit ${done + 1} of ${of}: ${Math.floor(fraction * 100)} %`,
          (done + fraction) / of,
        ),
      onFit: (check) => {
        line.end();
        terminal.out(`${fitCheckInWords(check)}\n`);
      },
    }),
  );
  if (!result.ok) throw new Stop(sentenceFor({ ...result, path }), 3);
  const found = result.value;
  for (const fault of found.faults) terminal.out(`${trailFaultInWords(fault)}\n`);
  if (found.noted !== null) terminal.out(`${headInWords(found.noted)}\n`);
  else if (found.outcome !== 'differs') terminal.out(`${limitOfTheChain}\n`);
  terminal.out(`${outcomeInWords(found)}\n`);
  if (found.head !== '') terminal.out(`Head: ${found.head}\n`);
  return ({ holds: 0, differs: 1, 'not checked': 3 } as const)[found.outcome];
}
