import { placesFor } from '../backup-settings.ts';
import { idleChoices, isIdleChoice } from '../lock-settings.ts';
import type { Answer, Api, Overview, PasswordView, Refused } from '../api.ts';
import { openStudyFile, rewriteBackups, SHORTEST_PASSWORD } from '../project/index.ts';
import { backupsInWords } from '../sentences/password.ts';
import { sentenceFor } from '../sentences/sentences.ts';
import { give, isRefused, refuse } from './answers.ts';
import { closeStudy, knock, notOpened, take } from './opening.ts';
import type { OpenStudy } from './open-study.ts';
import { overview } from './overview.ts';
import { lockedStudy } from './recent-study.ts';
import type { Room } from './room.ts';
import type { Handlers } from './session-types.ts';
import { folderFailure } from './write-file.ts';

export function lockingHandlers(
  room: Room,
): Pick<
  Handlers,
  | 'lockedStudy'
  | 'unlockStudy'
  | 'leaveLocked'
  | 'lockStudy'
  | 'stillHere'
  | 'passwordView'
  | 'setPassword'
  | 'setIdleMinutes'
> {
  const view = room.look<null, PasswordView>((open) => give(passwordView(room, open)));
  return {
    lockedStudy: async () => give(room.wanted === null ? null : lockedStudy(room.wanted)),

    unlockStudy: ({ password }) => room.inTurn(() => unlockStudy(room, password)),

    leaveLocked: (_, context) =>
      room.inTurn(async () => {
        room.wanted = null;
        const now = room.look<null, Overview>((open) => give(overview(open)));
        const after = room.open === null ? null : await now(null, context);
        if (after !== null && isRefused(after)) return after;
        if (after === null) room.tell('closed', null);
        else room.tell('changed', after.value);
        return give(after?.value ?? null);
      }),

    lockStudy: () =>
      room.inTurn(async () => {
        if (room.open === null) return refuse('no study');
        return lockStudy(room, 'asked') ? give(null) : refuse('no password');
      }),

    stillHere: async () => {
      room.seen();
      return give(null);
    },

    passwordView: view,

    setPassword: (takes) => room.inTurn(() => room.alone((open) => setPassword(room, open, takes))),

    setIdleMinutes: async ({ minutes }, context) => {
      if (!isIdleChoice(minutes)) return refuse('no such idle time');
      try {
        room.lock.setIdleMinutes(minutes);
      } catch (error) {
        const failure = folderFailure(error, 'lock.json');
        return { code: failure.code, refused: sentenceFor(failure) };
      }
      room.seen();
      return view(null, context);
    },
  };
}

/**
 * Closes a study that has a password and asks for it: the study, its texts and its key leave this
 * process's reach, and windows are told to show nothing of it. A running fit is stopped. False where
 * the study has no password.
 */
export function lockStudy(room: Room, why: 'idle' | 'asked'): boolean {
  const file = room.open?.file;
  if (file?.locked !== true) return false;
  const wanted = { path: file.path, readOnly: file.readOnlyBecause === 'asked', why };
  closeStudy(room, { quietly: true });
  room.wanted = wanted;
  room.tell('locked', lockedStudy(wanted));
  return true;
}

async function unlockStudy(room: Room, password: string): Promise<Answer<Overview>> {
  const { wanted } = room;
  if (wanted === null) return refuse('no study');
  const { path, readOnly } = wanted;
  const opened = await openStudyFile(path, { readOnly, password, ...knock(room) });
  if (opened.ok) return take(room, opened.value);
  if (opened.code === 'wrong password') return refuse('wrong password');
  return notOpened(opened, path);
}

function passwordView(room: Room, { file }: OpenStudy): PasswordView {
  return {
    hasPassword: file.locked,
    idleMinutes: room.lock.idleMinutes(),
    idleChoices,
    shortest: SHORTEST_PASSWORD,
  };
}

async function setPassword(
  room: Room,
  open: OpenStudy,
  { current, next }: Api['setPassword']['takes'],
): Promise<Answer<Api['setPassword']['gives']>> {
  const { file } = open;
  if (file.readOnly) return open.refusal({ ok: false, code: 'read only', path: file.path });
  if (file.locked && !(await file.isPassword(current ?? ''))) return refuse('wrong password');
  if (!file.locked && next === null) return refuse('no password');
  const changed = await file.setPassword(next);
  if (!changed.ok) {
    if (file.closed) closeStudy(room);
    return failed(room, open, open.refusal(changed));
  }
  room.seen();
  // Backups from before would open without this password, or with another one.
  const places = placesFor(room.backups.store.read(), file.path);
  const rewritten = rewriteBackups(file, places, { now: room.surroundings.now });
  await open.now.settled();
  const now = overview(open);
  room.tell('changed', now);
  return give({ overview: now, notes: backupsInWords(rewritten) });
}

/** After a failure that may have left the study for reading only, which windows must be told. */
function failed(room: Room, open: OpenStudy, refused: Refused): Refused {
  if (room.open === open) room.tell('changed', overview(open));
  return refused;
}

/** How often it is looked whether somebody is still there. */
export const idleLook = 5_000;

/** Locks the open study when nobody was there for as long as was set; what ends the watch. */
export function watchIdle(room: Room): () => void {
  const timer = setInterval(() => {
    const minutes = room.lock.idleMinutes();
    if (room.open?.file.locked !== true || minutes === 0) return;
    // What a person has asked for is finished first: a fit, a measurement, a report.
    if (room.busy || room.idleMilliseconds() < minutes * 60_000) return;
    void room.inTurn(async () => {
      if (!room.busy && room.idleMilliseconds() >= minutes * 60_000) lockStudy(room, 'idle');
    });
  }, idleLook);
  timer.unref();
  return () => clearInterval(timer);
}
