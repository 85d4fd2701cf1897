import { existsSync } from 'node:fs';
import { mkdir } from 'node:fs/promises';
import { basename, dirname, isAbsolute, join, resolve } from 'node:path';
import { editKinds } from '../../engine/study/index.ts';
import type { Answer, Overview, Refused } from '../api.ts';
import { randomIds } from '../ids.ts';
import {
  bringForward,
  createStudyFile,
  openStudyFile,
  StudyFileFault,
  type OpenOptions,
  type StudyFile,
  type StudyFileFailure,
  type StudyFileOptions,
} from '../project/index.ts';
import { sentenceFor } from '../sentences/sentences.ts';
import { upcast } from '../upcast.ts';
import { give, isRefused, refuse } from './answers.ts';
import { buildDemo, demoName } from './demo.ts';
import { safeFileName } from './file-names.ts';
import { firstEdits } from './first-edits.ts';
import { OpenStudy, startGroup } from './open-study.ts';
import { overview } from './overview.ts';
import { asRecent, lockedStudy, studyEnding as ending } from './recent-study.ts';
import { faultInWords, type Room } from './room.ts';
import type { CallContext, Handlers } from './session-types.ts';
import { folderFailure } from './write-file.ts';

export function openingHandlers(
  room: Room,
): Pick<
  Handlers,
  | 'about'
  | 'recentStudies'
  | 'overview'
  | 'openDemo'
  | 'startStudy'
  | 'openStudy'
  | 'closeStudy'
  | 'renameStudy'
  | 'nameReader'
> {
  const { surroundings } = room;
  const { about, dialogs, recent } = surroundings;
  const look = room.look<null, Overview>((open) => give(overview(open)));
  return {
    about: async () => give(about),

    recentStudies: async () => give((await recent.list()).map(asRecent)),

    overview: async (takes, context) => (room.open === null ? give(null) : look(takes, context)),

    openDemo: (_, context) => room.inTurn(() => openDemo(room, context)),

    // A dialog that nobody answers must not keep a study from being locked, so it has no turn.
    startStudy: async ({ name, path, password }) => {
      const title = name.trim();
      if (title === '') return { code: 'empty name', refused: sentenceFor(emptyName) };
      let place = path;
      if (place === null && dialogs !== null) {
        place = await dialogs.placeStudy(safeFileName(title));
        if (place === null) return give(null);
      }
      const file = placeOf(place ?? safeFileName(title), about.studiesFolder);
      return room.inTurn(() => startStudy(room, title, file, password));
    },

    openStudy: async ({ path, readOnly, despiteNote = false }) => {
      let place = path;
      if (place === null) {
        if (dialogs === null) return refuse('no dialog');
        place = await dialogs.chooseStudy();
        if (place === null) return give(null);
      }
      const file = placeOf(place, about.studiesFolder, '');
      return room.inTurn(() => openStudy(room, file, readOnly, { despiteNote }));
    },

    closeStudy: () =>
      room.inTurn(async () => {
        closeStudy(room);
        return give(null);
      }),

    renameStudy: room.decide((open, { name }: { name: string }) => {
      const from = open.study.name;
      const to = name.trim();
      return to === from ? null : open.decide([{ kind: 'studyRenamed', from, to }]);
    }),

    nameReader: room.decide((open, { name }: { name: string }) => nameReader(open, name.trim())),
  };
}

const emptyName = { ok: false, code: 'empty name', subject: '' } as const;

/** Opens a study, whatever the way it was asked for. */
export async function openStudy(
  room: Room,
  path: string,
  readOnly: boolean,
  options: Pick<OpenOptions, 'despiteNote' | 'password'> = {},
): Promise<Answer<Overview>> {
  const { open: current, surroundings } = room;
  if (current !== null && !current.file.closed && samePath(current.file.path, path)) {
    if (current.file.readOnly === readOnly)
      return room.look<null, Overview>((open) => give(overview(open)))(null, noContext);
    // The lock of the one would stand in the way of the other.
    closeStudy(room);
  }
  const opened = await openStudyFile(path, { readOnly, ...options, ...knock(room) });
  if (!opened.ok) {
    if (opened.code === 'not found') await surroundings.recent.remove(path);
    if (opened.code === 'locked') {
      room.wanted = { path, readOnly, why: 'opening' };
      room.tell('locked', lockedStudy(room.wanted));
    }
    return notOpened(opened, path);
  }
  return take(room, opened.value);
}

export async function notOpened(failure: StudyFileFailure, path: string): Promise<Refused> {
  if (failure.code === 'open elsewhere' && (await bringForward(path))) {
    return { ...refuse('shown forward', basename(path, ending)), code: failure.code };
  }
  return { code: failure.code, refused: sentenceFor(failure), path };
}

async function startStudy(
  room: Room,
  name: string,
  path: string,
  password: string | undefined,
): Promise<Answer<Overview>> {
  const { readerName, now } = room.surroundings;
  try {
    await mkdir(dirname(path), { recursive: true });
  } catch (error) {
    const failure = folderFailure(error, dirname(path));
    return { code: failure.code, refused: sentenceFor(failure) };
  }
  const id = randomIds('study');
  const created = await createStudyFile(path, { studyId: id, password }, knock(room));
  if (!created.ok) return { code: created.code, refused: sentenceFor(created) };
  const open = new OpenStudy(created.value, { accountName: readerName, now });
  const made = open.desk.make(firstEdits(id, name, open.reader), { group: startGroup });
  if (!made.ok) {
    open.close();
    return open.refusal(made);
  }
  return enter(room, open);
}

/** Reads the trail of a file and shows its study in place of the one before. */
export async function take(room: Room, file: StudyFile): Promise<Answer<Overview>> {
  const { readerName, now } = room.surroundings;
  const open = new OpenStudy(file, { accountName: readerName, now });
  const fault = load(open);
  if (fault !== null) {
    open.close();
    return fault;
  }
  return enter(room, open);
}

/** Shows the study of an open file anew, after its records were changed under the desk. */
export async function loadAgain(
  room: Room,
  before: OpenStudy,
): Promise<{ readonly value: Overview } | Refused> {
  const { readerName, now } = room.surroundings;
  const open = new OpenStudy(before.file, { accountName: readerName, now });
  const fault = load(open);
  if (fault !== null) {
    closeStudy(room);
    return fault;
  }
  if (open.study.readers.has(before.reader.id)) open.chooseReader(before.reader.id);
  before.leave();
  room.open = open;
  return room.afterwards(open);
}

function load({ desk, file }: OpenStudy): Refused | null {
  const name = basename(file.path, ending);
  try {
    const known = new Set<string>(editKinds);
    for (const { json } of file.edits()) {
      const brought = upcast(json);
      const kind = brought.ok ? (brought.entry.edit as { kind?: string } | undefined)?.kind : null;
      if (typeof kind !== 'string' || !known.has(kind)) return refuse('newer decisions', name);
    }
    desk.load(file.edits());
    // A file that was cut off right after its header.
    return desk.study.id === '' ? refuse('unfinished trail', name) : null;
  } catch (error) {
    return error instanceof StudyFileFault ? faultInWords(error) : refuse('unfinished trail', name);
  }
}

async function enter(room: Room, open: OpenStudy): Promise<Answer<Overview>> {
  closeStudy(room, { quietly: true });
  room.open = open;
  room.seen();
  await room.surroundings.recent.add(open.file.path);
  try {
    return await room.afterwards(open);
  } catch (error) {
    if (!(error instanceof StudyFileFault)) throw error;
    closeStudy(room);
    return faultInWords(error);
  }
}

export function closeStudy(room: Room, { quietly = false } = {}): void {
  const { open } = room;
  const { wanted } = room;
  room.wanted = null;
  if (open === null) {
    if (wanted !== null && !quietly) room.tell('closed', null);
    return;
  }
  room.open = null;
  room.backups.beforeClosing(open);
  open.close();
  if (!quietly) room.tell('closed', null);
}

async function openDemo(room: Room, context: CallContext): Promise<Answer<Overview>> {
  const { studiesFolder } = room.surroundings.about;
  const first = join(studiesFolder, `${demoName}${ending}`);
  if (existsSync(first)) {
    const opened = await openStudy(room, first, false);
    // Whatever else stands under that name is left alone, and a new one made beside it.
    if (!isRefused(opened) || opened.code === 'open elsewhere') return opened;
  }
  let path = first;
  for (let number = 2; existsSync(path); number++) {
    path = join(studiesFolder, `${demoName} ${number}${ending}`);
  }
  const built = await buildDemo(room.surroundings, path, knock(room), context);
  return isRefused(built) ? built : take(room, built.value);
}

function nameReader(open: OpenStudy, name: string): Refused | null {
  const { study, reader } = open;
  if (name === reader.name) return null;
  const known = [...study.readers.values()].find((one) => one.name === name);
  if (known !== undefined) {
    open.chooseReader(known.id);
    return null;
  }
  const next = { id: open.desk.context.mintId('reader'), name };
  const drafts = [{ edit: { kind: 'readerAdded', reader: next } as const }];
  const removed = study.readers.has(reader.id)
    ? open.desk.make([...drafts, { edit: { kind: 'readerRemoved', reader } }], {
        group: open.desk.context.mintId('group'),
      })
    : open.desk.make(drafts);
  // Whoever has decided something stays in the study beside the new name.
  const made = !removed.ok && removed.code === 'reader in use' ? open.desk.make(drafts) : removed;
  if (!made.ok) return open.refusal(made);
  open.chooseReader(next.id);
  return null;
}

export function knock({ surroundings }: Room): StudyFileOptions {
  const { comeForward, keyWork } = surroundings;
  return {
    ...(comeForward === undefined ? {} : { onSecondOpen: comeForward }),
    ...(keyWork === undefined ? {} : { work: keyWork }),
  };
}

function placeOf(path: string, folder: string, otherwise: string = ending): string {
  const full = isAbsolute(path) ? path : resolve(folder, path);
  return full.endsWith(ending) ? full : `${full}${otherwise}`;
}

function samePath(a: string, b: string): boolean {
  return resolve(a) === resolve(b);
}

const noContext: CallContext = { onProgress: () => {}, signal: new AbortController().signal };
