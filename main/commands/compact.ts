import { placesFor, usualBackups } from '../backup-settings.ts';
import { listBackups } from '../project/index.ts';
import { backupsBesideCompact, compactedInWords } from '../sentences/keeping.ts';
import { sentenceFor } from '../sentences/sentences.ts';
import { unusedRecords } from '../unused.ts';
import { openStudy } from './open.ts';
import { readOptions, usageStop } from './options.ts';
import { Stop, type ExitCode, type Terminal } from './terminal.ts';

export const compactUsage = 'understory compact study.understory';

/** Writes a study anew without what nothing can ask for any more; says both sizes. */
export async function compact(words: readonly string[], terminal: Terminal): Promise<ExitCode> {
  const { positionals } = readOptions(words, {}, compactUsage);
  if (positionals.length !== 1) throw usageStop('Name one study.', compactUsage);
  const { desk, file } = await openStudy(positionals[0], terminal, {
    readOnly: false,
    call: ['compact'],
  });
  try {
    const { records } = unusedRecords(desk.study, desk.entries, file.records);
    const done =
      records.length === 0
        ? { ok: true as const, value: { before: file.size, after: file.size } }
        : await file.compact(records.map(({ sequence }) => sequence));
    if (!done.ok) throw new Stop(sentenceFor(done));
    const settings = terminal.backups?.() ?? usualBackups;
    const backups = listBackups(file, placesFor(settings, file.path));
    terminal.out(
      [
        ...compactedInWords(done.value, records.length),
        ...backupsBesideCompact(backups.map(({ size }) => size)),
        `Head: ${file.head}`,
      ]
        .map((line) => `${line}\n`)
        .join(''),
    );
    return 0;
  } finally {
    file.close();
  }
}
