import { readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { topicNames, Talk, write } from './material.ts';
import { run, type Ended } from './run.ts';

/** Makes `name` in the folder: people on four topics, four themes, fitted by the quick recipe. */
export async function fittedStudy(
  folder: string,
  name: string,
  people = 6,
  themes: readonly object[] = [],
  more: readonly string[] = [],
): Promise<void> {
  const talk = new Talk(5);
  const files = Array.from({ length: people }, (_, i): [string, string] => [
    `in ${name}/P0${i + 1}.txt`,
    talk
      .turns(['INT', `P0${i + 1}`], 4 * topicNames.length)
      .map(([speaker, text]) => `${speaker}: ${text}\n\n`)
      .join(''),
  ]);
  write(folder, {
    ...Object.fromEntries(files),
    'plan.json': JSON.stringify({ themes, settings: { answer: 'quick' } }),
  });
  const ended = await run(folder, [
    ...['theme', `in ${name}`, '--themes', '4', '--seed', '1', '--plan', 'plan.json'],
    ...['--out', `out ${name}`, '--save', name, ...more],
  ]);
  if (ended.code !== 0) throw new Error(ended.err);
}

export function copyOf(folder: string, from: string, to: string): void {
  writeFileSync(join(folder, to), readFileSync(join(folder, from)));
}

/** Interrupts a command as soon as it shows progress. */
export async function interrupted(folder: string, words: readonly string[]): Promise<Ended> {
  const stop = new AbortController();
  let err = '';
  const ended = await run(folder, words, {
    signal: stop.signal,
    err: (text) => {
      err += text;
      if (/: \d+ %/u.test(text)) stop.abort();
    },
  });
  return { ...ended, err };
}
