import { sameBytes, sha256 } from './chain.ts';

export const FORMAT_VERSION = 1;
/** More than any header of ours needs; a file that asks for more is refused before memory is. */
export const MOST_HEADER_BYTES = 65_536;
/** Up to and with the two lengths. Version, flags, header length and check stay put in all versions. */
export const FIXED_HEADER_BYTES = 24;
export const CHECK_BYTES = 8;

const MAGIC = Uint8Array.from([0xf7, 0x75, 0x6e, 0x64, 0x73, 0x74, 0x0d, 0x0a]);
const LOCKED = 1;

export interface Header {
  /** 1 to 255 bytes of UTF-8. */
  readonly studyId: string;
  readonly locked: boolean;
  /** How the key is derived, in a locked study; empty otherwise. */
  readonly keyRegion: Uint8Array;
  /** Where the first frame stands. */
  readonly length: number;
}

export function encodeHeader(
  studyId: string,
  locked = false,
  keyRegion: Uint8Array = new Uint8Array(0),
): Buffer {
  const id = Buffer.from(studyId, 'utf8');
  if (id.length < 1 || id.length > 255 || id.toString('utf8') !== studyId) {
    throw new Error(`encodeHeader: studyId is ${JSON.stringify(studyId)}, must be 1 to 255 bytes`);
  }
  const length = FIXED_HEADER_BYTES + id.length + keyRegion.length + CHECK_BYTES;
  if (length > MOST_HEADER_BYTES) {
    throw new Error(`encodeHeader: keyRegion has ${keyRegion.length} bytes, too long for a header`);
  }
  const bytes = Buffer.alloc(length);
  bytes.set(MAGIC, 0);
  bytes.writeUInt32LE(FORMAT_VERSION, 8);
  bytes.writeUInt32LE(locked ? LOCKED : 0, 12);
  bytes.writeUInt32LE(length, 16);
  bytes.writeUInt16LE(id.length, 20);
  bytes.writeUInt16LE(keyRegion.length, 22);
  bytes.set(id, FIXED_HEADER_BYTES);
  bytes.set(keyRegion, FIXED_HEADER_BYTES + id.length);
  bytes.set(headerCheck(bytes), length - CHECK_BYTES);
  return bytes;
}

export type DecodedHeader =
  | { readonly ok: true; readonly header: Header }
  | { readonly ok: false; readonly why: HeaderFault };
export type HeaderFault = 'empty' | 'not a study' | 'newer version' | 'damaged';

/** Reads a header from a file's first bytes: all of them, or MOST_HEADER_BYTES. */
export function decodeHeader(start: Uint8Array): DecodedHeader {
  const bytes = Buffer.from(start.buffer, start.byteOffset, start.byteLength);
  if (bytes.length === 0) return { ok: false, why: 'empty' };
  const shown = bytes.subarray(0, MAGIC.length);
  if (!sameBytes(shown, MAGIC.subarray(0, shown.length))) return { ok: false, why: 'not a study' };
  if (bytes.length < FIXED_HEADER_BYTES) return { ok: false, why: 'damaged' };
  const length = bytes.readUInt32LE(16);
  if (length < FIXED_HEADER_BYTES + CHECK_BYTES || length > MOST_HEADER_BYTES) {
    return { ok: false, why: 'damaged' };
  }
  if (length > bytes.length) return { ok: false, why: 'damaged' };
  const check = bytes.subarray(length - CHECK_BYTES, length);
  if (!sameBytes(check, headerCheck(bytes.subarray(0, length))))
    return { ok: false, why: 'damaged' };

  // Only now can a version be told from a flipped bit.
  const flags = bytes.readUInt32LE(12);
  if (bytes.readUInt32LE(8) !== FORMAT_VERSION || (flags & ~LOCKED) !== 0) {
    return { ok: false, why: 'newer version' };
  }
  const idLength = bytes.readUInt16LE(20);
  const keyLength = bytes.readUInt16LE(22);
  const fits = FIXED_HEADER_BYTES + idLength + keyLength + CHECK_BYTES === length;
  if (!fits || idLength < 1 || idLength > 255) return { ok: false, why: 'damaged' };
  const keyStart = FIXED_HEADER_BYTES + idLength;
  return {
    ok: true,
    header: {
      studyId: bytes.toString('utf8', FIXED_HEADER_BYTES, keyStart),
      locked: (flags & LOCKED) !== 0,
      keyRegion: Uint8Array.from(bytes.subarray(keyStart, keyStart + keyLength)),
      length,
    },
  };
}

function headerCheck(bytes: Uint8Array): Uint8Array {
  return sha256(bytes.subarray(0, bytes.length - CHECK_BYTES)).subarray(0, CHECK_BYTES);
}
