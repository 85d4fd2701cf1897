// Works on a study until it is killed: edits, backups, copies, compaction, other passwords, drawn from a
// seed. Says before and after each act what it does, so that whoever killed it knows what must hold.
import * as fs from 'node:fs';
import * as path from 'node:path';
import {
  backupFolderBeside,
  makeBackup,
  openStudyFile,
  rewriteBackups,
} from '../../../../main/project/index.ts';
import { actNumbered } from './act-numbered.ts';
import { drawer, lightWork } from './torture-rules.ts';

const [studyPath = '', seed = '1', password] = process.argv.slice(2);
const draw = drawer(Number(seed));

/** At once, so that nothing said is lost when this process is killed. */
function say(line: string): void {
  fs.writeSync(1, `${line}\n`);
}

const opened = await openStudyFile(studyPath, { password, work: lightWork });
if (!opened.ok) {
  say(`refused ${opened.code}`);
  process.exit(1);
}
const file = opened.value;
const places = { folder: backupFolderBeside(file.path), keep: 2, earlier: [] };
say('open');
for (;;) {
  const act = draw(20);
  if (act < 14) {
    const done = file.appendAll(actNumbered(file.nextSequence));
    say(done.ok ? `saved ${file.nextSequence - 1}` : `refused ${done.code}`);
  } else if (act < 16) {
    const made = makeBackup(file, places);
    say(made.ok ? 'backed up' : `refused ${made.code}`);
  } else if (act < 17) {
    const to = path.join(path.dirname(file.path), 'copy.understory');
    const copied = await file.saveCopy(to, { replace: true });
    say(copied.ok ? 'copied' : `refused ${copied.code}`);
  } else if (act < 19) {
    const blobs = file.records.filter(({ kind, removed }) => kind === 'blob' && !removed);
    const gone = blobs.length === 0 ? [] : [blobs[draw(blobs.length)].sequence];
    say(`removing ${gone.join(' ')}`);
    const done = await file.compact(gone);
    if (done.ok) rewriteBackups(file, places);
    say(done.ok ? `removed ${gone.join(' ')}` : `refused ${done.code}`);
  } else {
    const next = draw(3) === 0 ? null : `password ${draw(1_000_000)}`;
    say(`locking ${next ?? ''}`);
    const done = await file.setPassword(next);
    if (done.ok) rewriteBackups(file, places);
    say(done.ok ? `locked ${next ?? ''}` : `refused ${done.code}`);
  }
  // Lets the lock answer.
  await new Promise((resolve) => setImmediate(resolve));
}
