import { timeInWords } from './time.ts';
import type { StudyFileFailure, StudyFileCode } from '../project/index.ts';

type Say = (failure: StudyFileFailure) => string;

const owner = ({ owner: who }: StudyFileFailure): string =>
  who === undefined ? '' : ` (${who.name} on ${who.host}, since ${timeInWords(who.since)})`;

const file = ({ path }: StudyFileFailure): string => `“${path}”`;

/** Why a study file could not be opened or written, and what to do. */
export const fileSentences: Record<StudyFileCode, Say> = {
  'not found': (f) => `There is no file ${file(f)}; check the name and the folder.`,
  'already there': (f) =>
    `${file(f)} exists already and was left as it is; choose another name, or move that file away.`,
  'not a study': (f) => `${file(f)} is not an Understory study; choose a file made by Understory.`,
  empty: (f) =>
    `${file(f)} is empty, so there is no study in it; look for a backup beside it, or another copy.`,
  'newer version': (f) =>
    `${file(f)} was written by a newer version of Understory and was left as it is; install that version to open it.`,
  damaged: (f) =>
    `${file(f)} is damaged${f.sequence === undefined ? '' : ` from record ${f.sequence} on`} and was left as it is; recover what is whole into a new file, or open a backup.`,
  locked: (f) =>
    `${file(f)} is locked with a password; type it, or give the command a file that holds it with --password-file.`,
  'wrong password': (f) =>
    `That is not the password of ${file(f)}; check capital letters and the keyboard’s language, then try again.`,
  'asks too much': (f) =>
    `Opening ${file(f)} would take more memory or time than a study of ours does, so it was left as it is; if you made it, open it on a machine with more memory, or use a backup.`,
  'password too short': (f) =>
    `The password of ${file(f)} needs at least 8 characters; four words picked by chance make a good one.`,
  'password too long': (f) =>
    `The password of ${file(f)} may have at most 1,024 characters; choose a shorter one.`,
  'open elsewhere': (f) =>
    `${file(f)} is open in another window or command${owner(f)}; close it there, then try again.`,
  'noted elsewhere': (f) =>
    `A note beside ${file(f)} says that it is open on another machine${owner(f)}; make sure that it is closed there, then try again.`,
  'cannot lock': (f) =>
    `${file(f)} cannot be kept from being written twice on this machine, so it was not opened for writing; copy it to a local drive and open it there.`,
  'not allowed': (f) =>
    `This account is not allowed to read or write ${file(f)}; change the permissions, or choose another folder.`,
  'name too long': (f) => `The name ${file(f)} is too long for this drive; choose a shorter one.`,
  'no space': (f) =>
    `The drive of ${file(f)} is full, and what was saved before is safe; free some space, then try again.`,
  'cannot read': (f) =>
    `${file(f)} could not be read${f.cause === undefined ? '' : ` (${f.cause})`}; check that the drive is connected, then try again.`,
  'cannot write': (f) =>
    `${file(f)} could not be written${f.cause === undefined ? '' : ` (${f.cause})`}, and what was saved before is safe; check the drive, then try again.`,
  'read only': (f) =>
    `${file(f)} is open for reading only; save a copy under another name to go on working.`,
  'changed underneath': (f) =>
    `Something else changed ${file(f)} while it was open, so nothing more was written; save your study as a copy, then compare the two.`,
  'not certain': (f) =>
    `The drive did not confirm the last change to ${file(f)}, so the study is now for reading only; save a copy to another drive and check that the change is in it.`,
  'too large': (f) =>
    `One piece is larger than ${file(f)} can hold; divide the transcript or the memo, then try again.`,
};
