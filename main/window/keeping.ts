import { existsSync, rmSync } from 'node:fs';
import { basename, dirname, isAbsolute, join, resolve } from 'node:path';
import type { Answer, BackupsView, CompactView, Overview } from '../api.ts';
import { changedBackups, placesFor } from '../backup-settings.ts';
import { copyFile, listBackups } from '../project/index.ts';
import { editInWords } from '../sentences/edits.ts';
import { sentenceFor } from '../sentences/sentences.ts';
import { unusedRecords } from '../unused.ts';
import { give, isRefused, refuse } from './answers.ts';
import type { OpenStudy } from './open-study.ts';
import { openStudy } from './opening.ts';
import { overview } from './overview.ts';
import type { Room } from './room.ts';
import type { Handlers } from './session-types.ts';
import { folderFailure } from './write-file.ts';

const ending = '.understory';

/** Copies of a study: backups, save as, and the study written anew without what nothing needs. */
export function keepingHandlers(
  room: Room,
): Pick<
  Handlers,
  | 'copyStudy'
  | 'backupsView'
  | 'keepBackups'
  | 'chooseBackupFolder'
  | 'makeBackup'
  | 'removeBackup'
  | 'openBackup'
  | 'compactView'
  | 'compactStudy'
> {
  const { about, dialogs } = room.surroundings;
  const place = (path: string): string => withEnding(resolve(about.studiesFolder, path));
  const view = (open: OpenStudy): { readonly value: BackupsView } => give(backupsView(room, open));

  return {
    copyStudy: (takes, context) =>
      room.inTurn(() =>
        room.look<typeof takes, { path: string; overview: Overview } | null>(
          async (open, { path, goOn }) => {
            let to = path === null ? null : place(path);
            const asked = to === null && dialogs !== null;
            if (asked) {
              to = await dialogs.placeStudy(`${basename(open.file.path, ending)} copy`);
              if (to === null) return give(null);
            }
            to ??= free(open.file.path, 'copy');
            // The system's dialog has asked about one that is there.
            const copied = await open.file.saveCopy(to, { replace: asked });
            if (!copied.ok) return { code: copied.code, refused: sentenceFor(copied) };
            if (!goOn) return give({ path: to, overview: overview(open) });
            const next = await openStudy(room, to, false);
            return isRefused(next) ? next : give({ path: to, overview: next.value });
          },
        )(takes, context),
      ),

    backupsView: room.look<null, BackupsView>((open) => view(open)),

    keepBackups: room.look(
      async (open, { keep, folder }: { keep: number; folder: string | null }) => {
        if (folder !== null && !isAbsolute(folder)) return refuse('no whole path', folder);
        const { store } = room.backups;
        try {
          store.write(changedBackups(store.read(), { keep, folder }));
        } catch (error) {
          const failure = folderFailure(error, 'backups.json');
          return { code: failure.code, refused: sentenceFor(failure) };
        }
        return view(open);
      },
    ),

    chooseBackupFolder: async () =>
      give((await dialogs?.chooseFolder?.('Where backups are kept')) ?? null),

    makeBackup: room.look<null, BackupsView>((open) => {
      if (open.file.readOnly) return refuse('reading only');
      if (room.backups.store.read().keep < 1) return refuse('no backups kept');
      const made = room.backups.make(open.file);
      return made.ok ? view(open) : { code: made.code, refused: sentenceFor(made) };
    }),

    removeBackup: room.look((open, { path }: { path: string }) => {
      if (!known(room, open, path)) return refuse('no such backup', basename(path, ending));
      try {
        rmSync(path);
      } catch (error) {
        const failure = folderFailure(error, path);
        return { code: failure.code, refused: sentenceFor(failure) };
      }
      return view(open);
    }),

    openBackup: (takes, context) =>
      room.inTurn(() =>
        room.look<typeof takes, Overview | null>(async (open, { backup, path }) => {
          const found = known(room, open, backup);
          if (!found) return refuse('no such backup', basename(backup, ending));
          let to = path === null ? null : place(path);
          if (to === null && dialogs !== null) {
            to = await dialogs.placeStudy(`${basename(open.file.path, ending)} from a backup`);
            if (to === null) return give(null);
          }
          to ??= free(open.file.path, `from backup ${found.number}`);
          const copied = await copyFile(backup, to);
          if (!copied.ok) return { code: copied.code, refused: sentenceFor(copied) };
          return openStudy(room, to, false);
        })(takes, context),
      ),

    compactView: room.look<null, CompactView>((open) => give(compactView(open))),

    compactStudy: () =>
      room.inTurn(() =>
        room.alone<CompactView>(async (open) => {
          const { goes } = compactView(open);
          const unused = unusedRecords(open.study, open.desk.entries, open.file.records);
          const done = await open.file.compact(unused.records.map(({ sequence }) => sequence));
          if (open.file.closed) return closedByFault(room, open);
          if (!done.ok) return { code: done.code, refused: sentenceFor(done) };
          return give({ ...done.value, goes });
        }),
      ),
  };
}

function backupsView(room: Room, { file }: OpenStudy): BackupsView {
  const settings = room.backups.store.read();
  const places = placesFor(settings, file.path);
  const { failure } = room.backups;
  return {
    keep: settings.keep,
    folder: places.folder,
    chosenFolder: settings.folder,
    backups: listBackups(file, places).map(({ path, study, sameName, number, at, size }) => ({
      path,
      calledThen: sameName ? null : study,
      number,
      at,
      bytes: size,
    })),
    failed: failure === null ? null : sentenceFor(failure),
  };
}

/** A backup of the open study by its path: a window removes and opens nothing else through here. */
function known(room: Room, { file }: OpenStudy, path: string) {
  const places = placesFor(room.backups.store.read(), file.path);
  return listBackups(file, places).find((backup) => backup.path === path);
}

function compactView({ desk, file, study, now }: OpenStudy): CompactView {
  const { records, entries } = unusedRecords(study, desk.entries, file.records);
  const saved = records.reduce((sum, { length }) => sum + length, 0);
  const names = {
    theme: (id: string) => now.label(id),
    transcript: (id: string) => study.transcripts.get(id)?.name ?? 'a transcript',
    participant: (id: string) => study.participants.get(id)?.name ?? 'a participant',
  };
  return {
    before: file.size,
    after: file.size - saved,
    goes: entries.map(({ edit }) => editInWords(edit, names)),
  };
}

/** Where the system closed the study's file under the act and would not open it again. */
function closedByFault(room: Room, open: OpenStudy): Answer<never> {
  if (room.open === open) {
    room.open = null;
    room.tell('closed', null);
  }
  return refuse('closed meanwhile', basename(open.file.path, ending));
}

/** A name beside a study that nothing bears yet. */
export function free(studyPath: string, what: string): string {
  const stem = [...basename(studyPath, ending)].slice(0, 60).join('');
  for (let number = 1; ; number++) {
    const counted = number === 1 ? what : `${what} ${number}`;
    const path = join(dirname(studyPath), `${stem} ${counted}${ending}`);
    if (!existsSync(path)) return path;
  }
}

function withEnding(path: string): string {
  return path.endsWith(ending) ? path : `${path}${ending}`;
}
