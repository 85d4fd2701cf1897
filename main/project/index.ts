// The study file: what the rest of main uses of it. The format is in FORMAT.md.
export { bringForward, createStudyFile, isLocked, openStudyFile } from './open-study-file.ts';
export type { OpenOptions, StudyFileOptions } from './open-study-file.ts';
export type { Act, ReadOnlyBecause, StudyFile } from './study-file.ts';
export type { Damage, StudyRecord } from './scan.ts';
export type { Erasing, SealAct } from './seal.ts';
export type { Kind } from './frame.ts';
export { LONGEST_PASSWORD, passwordFault, SHORTEST_PASSWORD } from './password.ts';
export type { DerivationWork } from './password.ts';
export {
  backupFolderBeside,
  listBackups,
  makeBackup,
  removeBackups,
  rewriteBackups,
} from './backups.ts';
export type { Backup, BackupPlaces, BackupsGone, BackupsRewritten } from './backups.ts';
export { copyFile } from './copy-file.ts';
export { recoverStudyFile } from './recover-study-file.ts';
export type { MissingPart, Recovery } from './recover-study-file.ts';
export { StudyFileFault } from './failure.ts';
export type {
  DamageReason,
  Owner,
  Result,
  StudyFileCode,
  StudyFileFailure,
  Success,
} from './failure.ts';
export { nodeStorage } from './node-storage.ts';
export type { FileIdentity, FileState, Handle, Storage } from './storage.ts';
