import type { PayloadCipher } from './cipher.ts';
import { failure, success, type Result } from './failure.ts';
import type { Header } from './header.ts';
import { newKey, passwordFault, unlockKey, type DerivationWork } from './password.ts';

/** What a file needs to be locked, or to be plain: both go into its header together. */
export interface FileKey {
  /** Null for a study without a password. */
  readonly cipher: PayloadCipher | null;
  readonly keyRegion: Uint8Array;
}

/**
 * A new key for a file to be written; null asks for none. Failures: 'password too short', 'password
 * too long', 'asks too much' (this machine has not the memory).
 */
export async function keyFor(
  password: string | null,
  filePath: string,
  work?: DerivationWork,
): Promise<Result<FileKey>> {
  if (password === null) return success({ cipher: null, keyRegion: new Uint8Array(0) });
  const fault = passwordFault(password);
  if (fault !== null) return failure(`password ${fault}`, filePath);
  try {
    return success(await newKey(password, work));
  } catch {
    return failure('asks too much', filePath);
  }
}

/** The cipher of a file's payloads; null for a plain one. Failures: as of `openStudyFile`. */
export async function cipherOf(
  header: Pick<Header, 'locked' | 'keyRegion'>,
  password: string | undefined,
  filePath: string,
): Promise<Result<PayloadCipher | null>> {
  if (!header.locked) return success(null);
  if (password === undefined) return failure('locked', filePath);
  const unlocked = await unlockKey(header.keyRegion, password);
  if (unlocked.ok) return success(unlocked.cipher);
  if (unlocked.why !== 'damaged') return failure(unlocked.why, filePath);
  return failure('damaged', filePath, { offset: 0, sequence: 0, reason: 'header' });
}
