import { readFile } from 'node:fs/promises';
import { resolve } from 'node:path';
import type { Desk } from '../desk.ts';
import { fieldNoteDrafts } from '../gather/beside.ts';
import { codebookEdits, readCodebook } from '../gather/codebook.ts';
import { codeOf, findFiles } from '../gather/find-files.ts';
import { sentenceForSkipped, type FileRefusal } from '../sentences/sentences.ts';
import { windowSentences } from '../sentences/window.ts';
import { refuse } from './refuse.ts';
import { Stop, type Terminal } from './terminal.ts';

/** Takes a codebook in as themes: to be looked for, or by hand. */
export async function takeInCodebook(
  desk: Desk,
  path: string,
  byHand: boolean,
  terminal: Terminal,
): Promise<void> {
  let bytes: Uint8Array;
  try {
    bytes = await readFile(resolve(terminal.folder, path));
  } catch (error) {
    throw new Stop(`“${path}”: ${sentenceForSkipped({ code: codeOf(error) })}`, 2);
  }
  const read = readCodebook(bytes);
  if (!read.ok) throw new Stop(windowSentences['no codebook'](path), 2);
  const edits = codebookEdits(
    desk.study,
    read.entries,
    byHand,
    ({ seeds }) => seeds.map((word) => word.toLowerCase()),
    desk.context.mintId,
  );
  refuse(desk.make(edits.map((edit) => ({ edit }))));
  const added = edits.filter(({ kind }) => kind === 'themeAdded').length;
  terminal.err(`${added} themes taken in from ${path}${byHand ? ', to be used by hand' : ''}\n`);
}

/** Keeps files as field notes beside the transcripts. */
export async function keepFieldNotes(
  desk: Desk,
  paths: readonly string[],
  terminal: Terminal,
): Promise<void> {
  const { found, missed } = await findFiles(paths, terminal.folder);
  for (const { name, code } of missed) {
    terminal.err(`Skipped ${name}: ${sentenceForSkipped({ code })}\n`);
  }
  const { drafts, kept, skipped } = await fieldNoteDrafts(desk, found, null);
  for (const { file, refusal } of skipped) {
    terminal.err(`Skipped ${file}: ${sentenceForSkipped(refusal as FileRefusal)}\n`);
  }
  refuse(desk.make(drafts));
  terminal.err(`${kept.length} field ${kept.length === 1 ? 'note' : 'notes'} kept beside\n`);
}
