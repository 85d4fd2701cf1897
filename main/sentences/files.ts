import type { StudyFileFailure, StudyFileCode } from '../project/index.ts';

type Say = (failure: StudyFileFailure) => string;

const owner = ({ owner: who }: StudyFileFailure): string =>
  who === undefined ? '' : ` (${who.name} on ${who.host}, since ${who.since})`;

const file = ({ path }: StudyFileFailure): string => `“${path}”`;

/** Why a study file could not be opened or written, and what to do. */
export const fileSentences: Record<StudyFileCode, Say> = {
  'not found': (f) => `There is no file ${file(f)}. Check the name and the folder.`,
  'already there': (f) =>
    `${file(f)} exists already and was left as it is. Choose another name, or move that file away.`,
  'not a study': (f) => `${file(f)} is not an Understory study. Choose a file made by Understory.`,
  empty: (f) =>
    `${file(f)} is empty, so there is no study in it. Look for a backup beside it, or another copy.`,
  'newer version': (f) =>
    `${file(f)} was written by a newer version of Understory. Install that version to open it; nothing was changed.`,
  damaged: (f) =>
    `${file(f)} is damaged${f.sequence === undefined ? '' : ` from record ${f.sequence} on`}. It was left as it is; recover what is whole into a new file, or open a backup.`,
  locked: (f) =>
    `${file(f)} is locked with a password. Open it in the window and type the password.`,
  'open elsewhere': (f) =>
    `${file(f)} is open in another window or command${owner(f)}. Close it there, then try again.`,
  'noted elsewhere': (f) =>
    `A note beside ${file(f)} says that it is open on another machine${owner(f)}. Make sure that it is closed there, then try again.`,
  'cannot lock': (f) =>
    `${file(f)} cannot be kept from being written twice on this machine, so it was not opened for writing. Copy it to a local drive and open it there.`,
  'not allowed': (f) =>
    `This account is not allowed to read or write ${file(f)}. Change the permissions, or choose another folder.`,
  'name too long': (f) => `The name ${file(f)} is too long for this drive. Choose a shorter one.`,
  'no space': (f) =>
    `The drive of ${file(f)} is full; what was saved before is safe. Free some space, then try again.`,
  'cannot read': (f) =>
    `${file(f)} could not be read${f.cause === undefined ? '' : ` (${f.cause})`}. Check that the drive is connected, then try again.`,
  'cannot write': (f) =>
    `${file(f)} could not be written${f.cause === undefined ? '' : ` (${f.cause})`}; what was saved before is safe. Check the drive, then try again.`,
  'read only': (f) =>
    `${file(f)} is open for reading only. Save a copy under another name to go on working.`,
  'changed underneath': (f) =>
    `Something else changed ${file(f)} while it was open, so nothing more was written. Save your study as a copy, then compare the two.`,
  'not certain': (f) =>
    `The drive did not confirm the last change to ${file(f)}, so the study is now for reading only. Save a copy to another drive and check that the change is in it.`,
  'too large': (f) =>
    `One piece is larger than ${file(f)} can hold. Divide the transcript or the memo, then try again.`,
};
