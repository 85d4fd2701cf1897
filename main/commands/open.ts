import { resolve } from 'node:path';
import { Desk } from '../desk.ts';
import { derivedIds, hashOf, type MintId } from '../ids.ts';
import { openStudyFile, type Result, type StudyFile } from '../project/index.ts';
import { sentenceFor } from '../sentences/sentences.ts';
import { BufferedStore } from '../store.ts';
import { givenPassword } from './password.ts';
import { Stop, type Terminal } from './terminal.ts';

export interface OpenStudy {
  readonly desk: Desk;
  readonly store: BufferedStore;
  readonly file: StudyFile;
}

/**
 * Opens a study for a command. What the command decides is kept in memory until it is flushed, so
 * that a refusal half-way changes nothing. `call` is what the new ids follow from.
 */
export async function openStudy(
  path: string,
  terminal: Terminal,
  { readOnly, call }: { readonly readOnly: boolean; readonly call: unknown },
): Promise<OpenStudy> {
  const opened = await openFile(resolve(terminal.folder, path), terminal, readOnly);
  if (!opened.ok) throw new Stop(sentenceFor({ ...opened, path }));
  const file = opened.value;
  const store = new BufferedStore(file);
  let mint: MintId | undefined;
  const desk: Desk = new Desk(store, {
    by: 'command line',
    now: terminal.now,
    // Ids may not follow from salts or times, or the same call would not give the same files.
    mintId: (what) => (mint ??= derivedIds([call, contentHash(desk)]))(what),
  });
  try {
    desk.load(file.edits());
  } catch (error) {
    file.close();
    throw error;
  }
  return { desk, store, file };
}

const tries = 3;

/** With the password that was given; else with one that is typed, where somebody can. */
export async function openFile(
  path: string,
  terminal: Terminal,
  readOnly: boolean,
): Promise<Result<StudyFile>> {
  return withPassword(terminal, (password) => openStudyFile(path, { readOnly, password }));
}

/** Tries a study with the password that was given; else asks for one, three times at most. */
export async function withPassword<Value>(
  terminal: Terminal,
  attempt: (password: string | undefined) => Promise<Result<Value>>,
): Promise<Result<Value>> {
  const given = await givenPassword(terminal);
  let opened = await attempt(given ?? undefined);
  const ask = terminal.password?.ask ?? null;
  for (let time = 0; ask !== null && given === null && time < tries; time++) {
    if (opened.ok || (opened.code !== 'locked' && opened.code !== 'wrong password')) break;
    if (time > 0) terminal.err('That is not the password.\n');
    const password = await ask('Password of the study: ');
    if (password === null) throw new Stop('Stopped: nothing was written.');
    opened = await attempt(password);
  }
  return opened;
}

function contentHash({ study }: Desk): string {
  return hashOf([
    study.id,
    study.sequence,
    [...study.themes.keys()],
    [...study.fits.values()].map(({ hashes }) => hashes.result),
  ]);
}
