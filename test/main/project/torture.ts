import * as fs from 'node:fs';
import { tmpdir } from 'node:os';
import * as path from 'node:path';
import {
  backupFolderBeside,
  createStudyFile,
  openStudyFile,
  type StudyFile,
} from '../../../main/project/index.ts';
import { nameBeside } from '../../../main/project/name-beside.ts';
import { actNumbered } from './children/act-numbered.ts';
import { drawer, lightWork } from './children/torture-rules.ts';
import { startChild } from './child-process.ts';

/** What must hold after a process was killed. */
interface Known {
  /** Records that were said to be saved. */
  saved: number;
  readonly removed: Set<number>;
  readonly maybeRemoved: Set<number>;
  passwords: (string | null)[];
}

/**
 * Kills a process that works on a study at random moments, round after round on the same study, and
 * looks each time whether everything is there that it said is saved. What was found wrong, in words.
 */
export async function torture(
  script: string,
  {
    rounds,
    seed,
    longest = 150,
  }: {
    readonly rounds: number;
    readonly seed: number;
    /** Milliseconds that a process may work at most. */
    readonly longest?: number;
  },
): Promise<string[]> {
  const folder = fs.mkdtempSync(path.join(tmpdir(), 'understory-torture-'));
  const draw = drawer(seed);
  const wrong: string[] = [];
  try {
    const at = path.join(folder, 'a.understory');
    const created = await createStudyFile(at, { studyId: 'torture' });
    if (!created.ok) return [`the study could not be made: ${created.code}`];
    created.value.close();
    const known: Known = {
      saved: 0,
      removed: new Set(),
      maybeRemoved: new Set(),
      passwords: [null],
    };
    for (let round = 0; round < rounds && wrong.length === 0; round++) {
      const [password] = known.passwords;
      const words = [at, String(draw(1_000_000_000)), ...(password === null ? [] : [password])];
      const child = startChild(script, ...words);
      const first = await child.line();
      if (first !== 'open') return [`round ${round}: the study did not open: ${first}`];
      await new Promise((resolve) => setTimeout(resolve, draw(longest)));
      await child.kill('SIGKILL');
      for (const line of await child.rest()) hear(line, known, wrong);
      wrong.push(...(await look(at, known)).map((fault) => `round ${round}: ${fault}`));
    }
  } finally {
    fs.rmSync(folder, { recursive: true, force: true });
  }
  return wrong;
}

function hear(line: string, known: Known, wrong: string[]): void {
  const [word = '', ...rest] = line.split(' ');
  const numbers = rest.map(Number);
  const password = rest.join(' ') === '' ? null : rest.join(' ');
  if (word === 'saved') known.saved = numbers[0] ?? 0;
  else if (word === 'removing') numbers.forEach((number) => known.maybeRemoved.add(number));
  else if (word === 'removed') numbers.forEach((number) => known.removed.add(number));
  else if (word === 'locking') known.passwords.push(password);
  else if (word === 'locked') known.passwords = [password];
  else if (word === 'refused') wrong.push(`an act was refused: ${rest.join(' ')}`);
}

async function look(at: string, known: Known): Promise<string[]> {
  const found = await open(at, known, false);
  if (typeof found === 'string') return [`the study is refused: ${found}`];
  const { file, password } = found;
  known.passwords = [password];
  const faults = compare(file, known);
  if (file.records.length < known.saved) {
    faults.push(`${known.saved} records were saved and ${file.records.length} are there`);
  }
  for (const number of known.removed) {
    if (file.records[number - 1]?.removed !== true) faults.push(`record ${number} came back`);
  }
  known.saved = file.records.length;
  file.close();
  // What was left of a copy goes with the next copy to that name, or when the copy is opened.
  const ofCopy = path.basename(nameBeside(path.join(path.dirname(at), 'copy.understory'), 'new'));
  const left = fs
    .readdirSync(path.dirname(at))
    .filter((name) => name.startsWith('.understory') && name !== ofCopy);
  if (left.length > 0) faults.push(`left behind: ${left.join(', ')}`);
  const folder = backupFolderBeside(at);
  const backups = fs.existsSync(folder)
    ? fs.readdirSync(folder).filter((name) => !name.startsWith('.'))
    : [];
  for (const name of backups) {
    const backup = await open(path.join(folder, name), known, true);
    // A backup of before a new password is there until the act that set it has ended.
    if (backup === 'wrong password' || backup === 'locked') continue;
    if (typeof backup === 'string') faults.push(`${name} is refused: ${backup}`);
    else {
      faults.push(...compare(backup.file, known).map((fault) => `${name}: ${fault}`));
      backup.file.close();
    }
  }
  return faults;
}

async function open(
  at: string,
  known: Known,
  readOnly: boolean,
): Promise<{ readonly file: StudyFile; readonly password: string | null } | string> {
  let why = '';
  for (const password of known.passwords) {
    const opened = await openStudyFile(at, {
      readOnly,
      work: lightWork,
      ...(password === null ? {} : { password }),
    });
    if (opened.ok) return { file: opened.value, password: opened.value.locked ? password : null };
    why = opened.code;
  }
  return why;
}

/** Whether each record is what its number says, or was taken away on purpose. */
function compare(file: StudyFile, { maybeRemoved }: Known): string[] {
  const faults: string[] = [];
  const records = file.records;
  for (let next = 1; next <= records.length;) {
    for (const { blobs = [], edit } of actNumbered(next)) {
      if (next > records.length) break;
      const sequences = blobs.map((_, index) => next + index);
      blobs.forEach((blob, index) => {
        const sequence = next + index;
        if (records[sequence - 1]?.removed === true) {
          if (!maybeRemoved.has(sequence)) faults.push(`record ${sequence} is gone`);
        } else if (!Buffer.from(blob).equals(Buffer.from(file.readBlob(sequence)))) {
          faults.push(`record ${sequence} is another`);
        }
      });
      next += blobs.length;
      const expected = JSON.stringify(edit(sequences, next));
      if (JSON.stringify(file.readEdit(next)) !== expected)
        faults.push(`record ${next} is another`);
      next += 1;
    }
  }
  return faults;
}
