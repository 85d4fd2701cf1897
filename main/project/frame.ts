import { commitmentOf, HASH_BYTES, nextLink, SALT_BYTES, sameBytes, sha256 } from './chain.ts';

/**
 * A frame: a head of HEAD_BYTES, then the payload. FORMAT.md has the table. The head carries its own
 * check, so that its length can be believed before a payload byte is read; the payload is held by
 * the commitment, so that each byte is hashed once.
 */
export type Kind = 'edit' | 'blob' | 'seal' | 'note';

export const HEAD_BYTES = 112;
/** Magic, kind, sequence: the part of a head that every copy of a record shares. */
export const LASTING_BYTES = 16;
export const MOST_EDIT_BYTES = 64 * 1024 * 1024;
export const MOST_PAYLOAD_BYTES = 1024 * 1024 * 1024;

/** 0xF7 occurs in no UTF-8 text, so no transcript and no edit can look like a frame. */
export const FRAME_MAGIC = Buffer.from([0xf7, 0x66, 0x72, 0x0a]);

const ENCRYPTED = 1;
const REMOVED = 2;
const BOUND_BYTES = 24 + SALT_BYTES + HASH_BYTES;
const CHECKED_BYTES = 104;

const numberOfKind: Record<Kind, number> = { edit: 1, blob: 2, seal: 3, note: 4 };
const kindOfNumber: Record<number, Kind> = { 1: 'edit', 2: 'blob', 3: 'seal', 4: 'note' };

export interface FrameHead {
  readonly kind: Kind;
  /** 1 for the first record of a study. */
  readonly sequence: number;
  readonly encrypted: boolean;
  /** Salt and payload were destroyed; the commitment stands for them. */
  readonly removed: boolean;
  /** Bytes of payload. */
  readonly length: number;
  readonly salt: Uint8Array;
  readonly commitment: Uint8Array;
  readonly link: Uint8Array;
}

/** A record may end a study, unless it is a blob: a blob belongs to the edit after it. */
export function endsAnAct(kind: Kind): boolean {
  return kind !== 'blob';
}

export function lastingHead(kind: Kind, sequence: number): Buffer {
  const bytes = Buffer.alloc(LASTING_BYTES);
  bytes.set(FRAME_MAGIC, 0);
  bytes[4] = numberOfKind[kind];
  bytes.writeBigUInt64LE(BigInt(sequence), 8);
  return bytes;
}

export function encodeHead(head: FrameHead): Buffer {
  const bytes = Buffer.alloc(HEAD_BYTES);
  writeBound(bytes, head);
  bytes.set(head.link, BOUND_BYTES);
  bytes.set(headCheck(bytes), CHECKED_BYTES);
  return bytes;
}

/** The part of a head that a locked payload is bound to: all before the chain. */
export function boundHead(head: FrameHead): Buffer {
  const bytes = Buffer.alloc(BOUND_BYTES);
  writeBound(bytes, head);
  return bytes;
}

/** The head of a new record that follows `previous` in the chain. */
export function headFor(
  kind: Kind,
  sequence: number,
  salt: Uint8Array,
  body: Uint8Array,
  previous: Uint8Array,
): FrameHead {
  const commitment = commitmentOf(salt, body);
  const link = nextLink(previous, lastingHead(kind, sequence), commitment);
  const length = body.length;
  return { kind, sequence, encrypted: false, removed: false, length, salt, commitment, link };
}

/** What stays of a record whose content is destroyed. */
export function removedHead(head: FrameHead): FrameHead {
  const salt = new Uint8Array(SALT_BYTES);
  return { ...head, encrypted: false, removed: true, length: 0, salt };
}

/** The head in these bytes, or null when they hold none that is whole. */
export function decodeHead(from: Uint8Array): FrameHead | null {
  if (from.length < HEAD_BYTES) return null;
  const bytes = Buffer.from(from.buffer, from.byteOffset, HEAD_BYTES);
  if (!FRAME_MAGIC.equals(bytes.subarray(0, 4))) return null;
  if (!sameBytes(bytes.subarray(CHECKED_BYTES), headCheck(bytes))) return null;
  const kind = kindOfNumber[bytes[4] ?? 0];
  const sequence = bytes.readBigUInt64LE(8);
  const flags = bytes.readUInt32LE(16);
  const length = bytes.readUInt32LE(20);
  const removed = (flags & REMOVED) !== 0;
  if (kind === undefined || bytes[5] !== 0 || bytes[6] !== 0 || bytes[7] !== 0) return null;
  if (sequence < 1n || sequence > BigInt(Number.MAX_SAFE_INTEGER)) return null;
  if ((flags & ~(ENCRYPTED | REMOVED)) !== 0 || (removed && length !== 0)) return null;
  if (length > MOST_PAYLOAD_BYTES) return null;
  return {
    kind,
    sequence: Number(sequence),
    encrypted: (flags & ENCRYPTED) !== 0,
    removed,
    length,
    salt: Uint8Array.from(bytes.subarray(24, 40)),
    commitment: Uint8Array.from(bytes.subarray(40, 72)),
    link: Uint8Array.from(bytes.subarray(72, 104)),
  };
}

/** Whether a whole frame's payload is still what its head commits to. */
export function holdsItsCommitment(frame: Uint8Array): boolean {
  const commitment = commitmentOf(frame.subarray(24, 40), frame.subarray(HEAD_BYTES));
  return sameBytes(commitment, frame.subarray(40, 72));
}

function writeBound(bytes: Buffer, head: FrameHead): void {
  bytes.set(lastingHead(head.kind, head.sequence), 0);
  bytes.writeUInt32LE((head.encrypted ? ENCRYPTED : 0) | (head.removed ? REMOVED : 0), 16);
  bytes.writeUInt32LE(head.length, 20);
  bytes.set(head.salt, 24);
  bytes.set(head.commitment, 24 + SALT_BYTES);
}

function headCheck(head: Uint8Array): Uint8Array {
  return sha256(head.subarray(0, CHECKED_BYTES)).subarray(0, HEAD_BYTES - CHECKED_BYTES);
}
