import { resolve } from 'node:path';
import { placesFor, usualBackups } from '../backup-settings.ts';
import { rewriteBackups, type StudyFile } from '../project/index.ts';
import { backupsInWords, beforeRemoving, beforeSetting } from '../sentences/password.ts';
import { sentenceFor } from '../sentences/sentences.ts';
import { openFile } from './open.ts';
import { readOptions, usageStop } from './options.ts';
import { passwordIn } from './password.ts';
import { Stop, type ExitCode, type Terminal } from './terminal.ts';

export const changePasswordUsage =
  'understory password study.understory --set|--remove [--new-password-file FILE]';

const options = {
  set: { type: 'boolean' },
  remove: { type: 'boolean' },
  'new-password-file': { type: 'string' },
} as const;

/** Sets, changes or removes the password of a study, and makes its backups anew in the same act. */
export async function changePassword(
  words: readonly string[],
  terminal: Terminal,
): Promise<ExitCode> {
  const { values, positionals } = readOptions(words, options, changePasswordUsage);
  if (positionals.length !== 1) throw usageStop('Name one study.', changePasswordUsage);
  const { set = false, remove = false, 'new-password-file': from } = values;
  if (set === remove) {
    throw usageStop('Say either --set or --remove.', changePasswordUsage);
  }
  if (remove && from !== undefined) {
    throw usageStop('--new-password-file goes with --set alone.', changePasswordUsage);
  }
  const [path] = positionals;
  const opened = await openFile(resolve(terminal.folder, path), terminal, false);
  if (!opened.ok) throw new Stop(sentenceFor({ ...opened, path }));
  const file = opened.value;
  try {
    if (remove && !file.locked) {
      throw new Stop(`“${path}” has no password; there is nothing to remove.`);
    }
    terminal.err(`${remove ? beforeRemoving : beforeSetting}\n`);
    const next = remove ? null : await newPassword(from, terminal);
    const changed = await file.setPassword(next);
    if (!changed.ok) throw new Stop(sentenceFor({ ...changed, path }));
    terminal.out(`The password is ${next === null ? 'removed' : 'set'}.\n`);
    return backupsToo(file, terminal);
  } finally {
    file.close();
  }
}

/** From the file that was named, else typed twice. */
async function newPassword(from: string | undefined, terminal: Terminal): Promise<string> {
  if (from !== undefined) return passwordIn(from, terminal.folder);
  const ask = terminal.password?.ask ?? null;
  if (ask === null) {
    throw new Stop(
      'Nobody can type the new password here; give the command a file that holds it with --new-password-file.',
    );
  }
  const first = await ask('New password: ');
  const second = first === null ? null : await ask('The same once more: ');
  if (first === null || second === null) throw new Stop('Stopped: nothing was written.');
  if (first !== second) {
    throw new Stop('The two were not the same, so nothing was changed; try again.');
  }
  return first;
}

/** Backups from before would open without this password, or with another one. */
function backupsToo(file: StudyFile, terminal: Terminal): ExitCode {
  const settings = terminal.backups?.() ?? usualBackups;
  const rewritten = rewriteBackups(file, placesFor(settings, file.path), { now: terminal.now });
  const well = rewritten.left.length === 0 && rewritten.failed === null;
  const tell = well ? terminal.out : terminal.err;
  for (const note of backupsInWords(rewritten)) tell(`${note}\n`);
  return well ? 0 : 1;
}
