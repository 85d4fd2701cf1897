import { join } from 'node:path';
import { readBackupSettings } from '../backup-settings.ts';
import { compact, compactUsage } from '../commands/compact.ts';
import { exportExcerpts, exportUsage } from '../commands/export.ts';
import { endingOf } from '../commands/fault.ts';
import { sealCommand, sealUsage, withdrawCommand, withdrawUsage } from '../commands/forgetting.ts';
import { howMany, howManyUsage } from '../commands/how-many.ts';
import { moved, movedUsage } from '../commands/moved.ts';
import { passwordVariable, takePasswordFile } from '../commands/password.ts';
import { changePassword, changePasswordUsage } from '../commands/change-password.ts';
import { refit, refitUsage } from '../commands/refit.ts';
import { steady, steadyUsage } from '../commands/steady.ts';
import type { ExitCode, Terminal } from '../commands/terminal.ts';
import { takeInCommand, takeInUsage } from '../commands/take-in.ts';
import { theme, themeUsage } from '../commands/theme.ts';
import { trail, trailUsage } from '../commands/trail.ts';
import { verifyStudy, verifyUsage } from '../commands/verify.ts';
import { askHidden } from './hidden-prompt.ts';
import { settingsFolder } from './places.ts';

type Command = (words: readonly string[], terminal: Terminal) => Promise<ExitCode>;

const commands: Record<string, Command> = {
  theme,
  refit,
  export: exportExcerpts,
  moved,
  steady,
  howmany: howMany,
  verify: verifyStudy,
  trail,
  withdraw: withdrawCommand,
  seal: sealCommand,
  takein: takeInCommand,
  compact,
  password: changePassword,
};

const help = `Understory: theme and code interview transcripts on this machine alone.

  ${themeUsage}
      reads transcripts, fits themes and writes excerpts.csv, themes.csv, passages.csv, fit.json,
      methods.md and transcripts/ into DIR
  ${refitUsage}
      applies further decisions to a study and fits again around them
  ${exportUsage}
      writes coded excerpts into one file
  ${movedUsage}
      prints what the last re-fit moved
  ${steadyUsage}
      measures how steady each theme is when participants are left out, beside the floor that
      shuffled words reach; writes NAME.steady.csv beside the study
  ${howManyUsage}
      compares numbers of themes and says which cannot be told apart; writes NAME.howmany.csv
  ${verifyUsage}
      checks every byte, folds the trail, makes every fit again from its stored words and compares;
      exit code 0: all holds, 1: something differs or was tampered with, 3: could not be checked
  ${trailUsage}
      prints who decided what, when and on what, or writes it under the headings of an audit trail
  ${withdrawUsage}
      erases a participant's text, codings, memos and attributes for good; says first what goes
  ${sealUsage}
      erases the originals behind stand-ins for good; says first what goes
  ${takeInUsage}
      takes another copy’s codings, memos and readers in
  ${compactUsage}
      writes the study anew without what was taken back and can no longer be done again
  ${changePasswordUsage}
      sets, changes or removes the password; backups are made anew with the same lock

A study with a password: --password-file FILE (its first line) goes with every command, or the
environment variable UNDERSTORY_PASSWORD; without either it is asked for. With either, theme --save
locks the study that it writes.

Run it as: npm run -s understory -- theme resources/demo --themes 12 --seed 1 --out demo-themes
`;

/** Runs one command; the exit code. `folder` is where its paths are meant from. */
export async function run(words: readonly string[], folder: string): Promise<ExitCode> {
  const stop = new AbortController();
  const onInterrupt = (): void => stop.abort();
  process.once('SIGINT', onInterrupt);
  // A reader such as `head` may go before everything is written; that is no error of ours.
  for (const stream of [process.stdout, process.stderr]) stream.on('error', ignoreClosedPipe);
  try {
    return await runIn(words, {
      folder,
      out: (text) => process.stdout.write(text),
      err: (text) => process.stderr.write(text),
      rewrites: process.stderr.isTTY === true,
      now: clockTime,
      signal: stop.signal,
      password: {
        file: null,
        environment: process.env[passwordVariable] || null,
        ask: process.stdin.isTTY === true ? askHidden : null,
      },
      backups: () => readBackupSettings(join(settingsFolder(), 'backups.json')),
    });
  } finally {
    process.removeListener('SIGINT', onInterrupt);
  }
}

/** The same with everything that touches the terminal given from outside. */
export async function runIn(words: readonly string[], terminal: Terminal): Promise<ExitCode> {
  const [name, ...rest] = words;
  if (name === undefined || name === 'help' || name === '--help' || name === '-h') {
    terminal.out(help);
    return name === undefined ? 2 : 0;
  }
  if (!Object.hasOwn(commands, name)) {
    const known = Object.keys(commands).join(', ');
    terminal.err(`There is no command “${name}”; choose one of ${known}.\n`);
    return 2;
  }
  try {
    const { words: own, file } = takePasswordFile(rest);
    const { environment = null, ask = null } = terminal.password ?? {};
    return await commands[name](own, { ...terminal, password: { file, environment, ask } });
  } catch (error) {
    const { sentence, exitCode } = endingOf(error);
    terminal.err(`${sentence}\n`);
    return exitCode;
  }
}

function ignoreClosedPipe(error: NodeJS.ErrnoException): void {
  if (error.code !== 'EPIPE') throw error;
}

/** SOURCE_DATE_EPOCH (reproducible-builds.org) fixes the time for runs that must repeat exactly. */
function clockTime(): string {
  const fixed = process.env['SOURCE_DATE_EPOCH'];
  const at = fixed !== undefined && /^\d+$/u.test(fixed) ? Number(fixed) * 1000 : Date.now();
  return new Date(at).toISOString();
}
