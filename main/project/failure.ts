/**
 * Why a study file could not be opened, written or copied. The codes are for programs and tests;
 * main/sentences says them to a person.
 */
export type StudyFileCode =
  /** There is no file of that name. */
  | 'not found'
  /** A file of that name is there, and was not to be replaced. */
  | 'already there'
  /** It does not begin as a study does. */
  | 'not a study'
  /** It has no bytes at all. */
  | 'empty'
  /** Written by a later version of the format than this one knows. */
  | 'newer version'
  /** Not whole: `reason`, `offset` and `sequence` say where. Recovery goes into a new file. */
  | 'damaged'
  /** It needs a password, and none was given. */
  | 'locked'
  /** The password given is not that of the study. */
  | 'wrong password'
  /** Deriving its key would take more memory or time than a study of ours does. */
  | 'asks too much'
  /** A password to be set has fewer than 8 characters. */
  | 'password too short'
  /** A password to be set has more than 1,024 characters. */
  | 'password too long'
  /** Another window or command on this machine has it open for writing: `owner`, where known. */
  | 'open elsewhere'
  /** A note beside it says that another machine has it open: `owner`. */
  | 'noted elsewhere'
  /** The writer's lock can't be had on this machine at all. */
  | 'cannot lock'
  /** The system allows no reading, or no writing, here. */
  | 'not allowed'
  /** The file's name is longer than the drive takes. */
  | 'name too long'
  /** The drive is full, or the person's share of it. */
  | 'no space'
  | 'cannot read'
  | 'cannot write'
  /** The study was opened for reading, or became so: see `readOnlyBecause`. */
  | 'read only'
  /** Something else wrote to the file, replaced it or took it away since: `how`. */
  | 'changed underneath'
  /** The drive did not confirm: what was written last may or may not be there. */
  | 'not certain'
  /** One edit or one blob is larger than a study holds. */
  | 'too large';

export type DamageReason =
  /** The file's own header. */
  | 'header'
  /** What stands here is no frame's head. */
  | 'head'
  /** A frame's content is not what was written. */
  | 'content'
  /** A frame is whole and stands in the wrong place: records are missing, doubled or swapped. */
  | 'order'
  /** A frame is whole and does not follow from the one before it. */
  | 'chain';

/** Who has a study open: advice, left by another machine or process. */
export interface Owner {
  readonly host: string;
  readonly name: string;
  /** ISO 8601, by that machine's clock. */
  readonly since: string;
}

export interface StudyFileFailure {
  readonly ok: false;
  readonly code: StudyFileCode;
  readonly path: string;
  /** The system's own code ("ENOSPC"), where there was one. */
  readonly cause?: string;
  /** 'damaged': bytes from the start of the file. */
  readonly offset?: number;
  /** 'damaged': the sequence number of the record that should stand there; 0 for the header. */
  readonly sequence?: number;
  readonly reason?: DamageReason;
  readonly owner?: Owner;
  /** 'changed underneath': what differs. */
  readonly how?: 'missing' | 'replaced' | 'size' | 'content' | 'lock';
}

export interface Success<T> {
  readonly ok: true;
  readonly value: T;
}

export type Result<T> = Success<T> | StudyFileFailure;

export function success<T>(value: T): Success<T> {
  return { ok: true, value };
}

export function failure(
  code: StudyFileCode,
  path: string,
  details: Omit<StudyFileFailure, 'ok' | 'code' | 'path'> = {},
): StudyFileFailure {
  return { ok: false, code, path, ...details };
}

const codeOfCause: Record<string, StudyFileCode> = {
  ENOENT: 'not found',
  ENOTDIR: 'not found',
  EEXIST: 'already there',
  EISDIR: 'not a study',
  EACCES: 'not allowed',
  EPERM: 'not allowed',
  EROFS: 'not allowed',
  ENAMETOOLONG: 'name too long',
  ENOSPC: 'no space',
  EDQUOT: 'no space',
  EFBIG: 'no space',
};

/**
 * A failed file operation as a value. Errors without a system code are bugs and are thrown on.
 */
export function failureOf(
  error: unknown,
  path: string,
  otherwise: 'cannot read' | 'cannot write',
): StudyFileFailure {
  const cause = (error as { code?: unknown } | null)?.code;
  if (typeof cause !== 'string' || !/^E[A-Z0-9]+$/.test(cause)) throw error;
  return failure(codeOfCause[cause] ?? otherwise, path, { cause });
}

/** The system's code of an error, as a detail of a failure. */
export function causeOf(error: unknown, path: string): { readonly cause?: string } {
  const { cause } = failureOf(error, path, 'cannot write');
  return cause === undefined ? {} : { cause };
}

/** Thrown where a whole study could not be read any more after it had been opened. */
export class StudyFileFault extends Error {
  readonly failure: StudyFileFailure;
  constructor(failure: StudyFileFailure) {
    super(
      `${failure.code}${failure.sequence === undefined ? '' : ` at record ${failure.sequence}`}`,
    );
    this.name = 'StudyFileFault';
    this.failure = failure;
  }
}
