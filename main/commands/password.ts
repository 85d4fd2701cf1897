import { readFile } from 'node:fs/promises';
import { resolve } from 'node:path';
import { Stop, type Terminal } from './terminal.ts';

export const passwordOption = '--password-file';
export const passwordVariable = 'UNDERSTORY_PASSWORD';

/** Takes --password-file FILE out of a command's words: every command that opens a study knows it. */
export function takePasswordFile(words: readonly string[]): {
  readonly words: readonly string[];
  readonly file: string | null;
} {
  const rest: string[] = [];
  let file: string | null = null;
  for (let at = 0; at < words.length; at++) {
    const word = words[at];
    // After this, words are names even where they look like options.
    if (word === '--') return { words: [...rest, ...words.slice(at)], file };
    if (word.startsWith(`${passwordOption}=`)) {
      file = word.slice(passwordOption.length + 1);
    } else if (word === passwordOption) {
      at += 1;
      file = words[at] ?? '';
    } else {
      rest.push(word);
      continue;
    }
    if (file === '') {
      throw new Stop(`The option ${passwordOption} needs a file; write it after the option.`, 2);
    }
  }
  return { words: rest, file };
}

/** The password that was given with the call, the file's before the environment's; null without. */
export async function givenPassword({ folder, password }: Terminal): Promise<string | null> {
  const { file = null, environment = null } = password ?? {};
  return file === null ? environment : passwordIn(file, folder);
}

/** The first line of a file: what may be written there for a password. */
export async function passwordIn(file: string, folder: string): Promise<string> {
  let text: string;
  try {
    text = await readFile(resolve(folder, file), 'utf8');
  } catch {
    throw new Stop(`The file of the password, “${file}”, could not be read; check its name.`);
  }
  const [line = ''] = text.replace(/^\uFEFF/u, '').split(/\r?\n/u);
  if (line === '') {
    throw new Stop(`The file “${file}” begins with an empty line; its first line is the password.`);
  }
  return line;
}
