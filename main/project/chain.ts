import * as crypto from 'node:crypto';

export const HASH_BYTES = 32;
export const SALT_BYTES = 16;

// Node before 20.12 has no hash in one call. Where it is, a frame's hashes take half the time.
const inOneCall = (crypto as { readonly hash?: typeof crypto.hash }).hash;
const ONE_CALL_BYTES = 16_384;

export function sha256(...parts: readonly Uint8Array[]): Uint8Array {
  let length = 0;
  for (const part of parts) length += part.length;
  if (inOneCall !== undefined && length <= ONE_CALL_BYTES) {
    return inOneCall('sha256', Buffer.concat(parts, length), 'buffer');
  }
  const hash = crypto.createHash('sha256');
  for (const part of parts) hash.update(part);
  return hash.digest();
}

/** What the chain of a study begins from: SHA-256("understory study" LF, study id in UTF-8). */
export function chainStart(studyId: string): Uint8Array {
  return sha256(Buffer.from(`understory study\n${studyId}`, 'utf8'));
}

/**
 * Binds to a body without telling it: SHA-256(salt, body). Once salt and body are destroyed nobody
 * can confirm a guess at the body from it, and the chain still holds.
 */
export function commitmentOf(salt: Uint8Array, body: Uint8Array): Uint8Array {
  return sha256(salt, body);
}

/**
 * The next hash of the chain: SHA-256(previous, lasting part of the frame's head, commitment). The
 * lasting part is magic, kind and sequence: what a locked, sealed or compacted copy keeps too.
 */
export function nextLink(
  previous: Uint8Array,
  lastingHead: Uint8Array,
  commitment: Uint8Array,
): Uint8Array {
  return sha256(previous, lastingHead, commitment);
}

export function sameBytes(a: Uint8Array, b: Uint8Array): boolean {
  return Buffer.compare(a, b) === 0;
}

export function hex(bytes: Uint8Array): string {
  return Buffer.from(bytes).toString('hex');
}
