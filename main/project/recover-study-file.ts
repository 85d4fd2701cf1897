import { randomBytes } from 'node:crypto';
import { chainStart, commitmentOf, hex, nextLink, SALT_BYTES, sameBytes } from './chain.ts';
import type { PayloadCipher } from './cipher.ts';
import { failure, failureOf, success, type Result } from './failure.ts';
import { cipherOf } from './file-key.ts';
import { FileWindow, holdsContent } from './file-window.ts';
import { endsAnAct, HEAD_BYTES, headFor, lastingHead, removedHead } from './frame.ts';
import type { FrameHead, Kind } from './frame.ts';
import { CHECK_BYTES, decodeHeader, encodeHeader } from './header.ts';
import { FIXED_HEADER_BYTES, MOST_HEADER_BYTES } from './header.ts';
import { nodeStorage } from './node-storage.ts';
import type { OpenOptions } from './open-study-file.ts';
import { KEY_BEGINNING, KEY_HALF_BYTES, newKey } from './password.ts';
import { closeQuietly } from './storage.ts';
import { place, writeBeside } from './write-beside.ts';

/** A record of the damaged file whose content is not in the new one. */
export interface MissingPart {
  readonly sequence: number;
  /** Null where not even that could be told. */
  readonly kind: Kind | null;
  /** Where it stood, or should have stood, in the damaged file. */
  readonly offset: number;
}

export interface Recovery {
  readonly studyId: string;
  /** The header was damaged beyond telling the id: the new file has a new one. */
  readonly studyIdLost: boolean;
  /** Records whose content came over. */
  readonly kept: number;
  /** Of those, records whose damaged heads could be rebuilt and proved by the chain. */
  readonly rebuilt: number;
  readonly missing: readonly MissingPart[];
  /** Bytes at the end of the damaged file that belong to no whole edit. */
  readonly leftOver: number;
  /** Hash of the new file's chain. */
  readonly head: string;
  /** Whether that is the hash which the damaged file's last record carries: no commitment is lost. */
  readonly headKept: boolean;
}

/** What the new file gets at one sequence number; without a head, a note that it is missing. */
interface Piece {
  readonly sequence: number;
  readonly kind: Kind;
  readonly offset: number;
  readonly head: FrameHead | null;
  readonly payload: { readonly offset: number; readonly length: number } | null;
}

/** Beyond this a file is not damaged but made up: each missing record gets a note in the new file. */
const MOST_MISSING = 1_000_000;

/**
 * Brings what is whole in a damaged study over into a new file and says what is missing. The damaged
 * file is only read. Records keep their sequence numbers. One whose content is damaged stays as
 * removed, with its commitment, so the chain goes on as it was; one of which nothing is left becomes
 * a note, and the chain is another from there.
 *
 * A locked study needs its password, and the new file is locked with the same.
 *
 * Failures: those of reading, 'empty', 'not a study' (no frame found), 'newer version', 'locked',
 * 'wrong password', 'asks too much'; 'damaged' where both copies of a locked study's key are;
 * 'already there' and those of writing for the new file.
 */
export async function recoverStudyFile(
  filePath: string,
  newPath: string,
  options: Pick<OpenOptions, 'password' | 'randomBytes' | 'storage' | 'work'> = {},
): Promise<Result<Recovery>> {
  const storage = options.storage ?? nodeStorage;
  const random = options.randomBytes ?? randomBytes;
  let handle;
  try {
    if (!storage.statPath(filePath).regular) return failure('not a study', filePath);
    handle = storage.open(filePath, 'read');
  } catch (error) {
    return failureOf(error, filePath, 'cannot read');
  }
  try {
    const window = new FileWindow(storage, handle, storage.stat(handle).size);
    const start = await findStart(window, filePath, options.password);
    if (!start.ok) return start;
    const { offset, cipher } = start.value;
    const studyIdLost = start.value.studyId === null;
    const studyId = start.value.studyId ?? hex(random(16));
    const gathered = gather(window, offset, chainStart(studyId), cipher);
    if (gathered === null) return failure('not a study', filePath);
    const { pieces, rebuilt, end, lastLink } = gathered;
    const key = cipher === null ? null : await newKey(options.password ?? '', options.work);

    let link = chainStart(studyId);
    const written = writeBeside(storage, newPath, false, (target) => {
      target.add(encodeHeader(studyId, key !== null, key?.keyRegion));
      const add = (head: FrameHead, body: Uint8Array): void => {
        const stored = key?.cipher.lock(head, body) ?? { head, payload: body };
        target.frame(stored.head, stored.payload);
      };
      for (const piece of pieces) {
        if (piece.head === null) {
          const body = Buffer.from(JSON.stringify({ missing: { offset: piece.offset } }), 'utf8');
          const head = headFor('note', piece.sequence, random(SALT_BYTES), body, link);
          link = head.link;
          add(head, body);
          continue;
        }
        const lasting = lastingHead(piece.kind, piece.sequence);
        link = nextLink(link, lasting, piece.head.commitment);
        const { payload } = piece;
        const stored = payload === null ? null : window.copy(payload.offset, payload.length);
        const content = stored === null ? null : contentOf(piece.head, stored, cipher);
        if (content === null) {
          target.frame({ ...removedHead(piece.head), link }, new Uint8Array(0));
        } else {
          const { salt, body } = content;
          add({ ...piece.head, encrypted: false, length: body.length, salt, link }, body);
        }
      }
    });
    if (!written.ok) return written;
    const placed = await place(storage, written.value, newPath);
    if (!placed.ok) return placed;
    const missing = pieces
      .filter(({ head, payload }) => payload === null && head?.removed !== true)
      .map(({ sequence, kind, offset: at, head }) => {
        return { sequence, kind: head === null ? null : kind, offset: at };
      });
    return success({
      studyId,
      studyIdLost,
      kept: pieces.filter(({ payload }) => payload !== null).length,
      rebuilt,
      missing,
      leftOver: window.size - end,
      head: hex(link),
      headKept: lastLink === null ? pieces.length === 0 : sameBytes(lastLink, link),
    });
  } catch (error) {
    return failureOf(error, filePath, 'cannot read');
  } finally {
    closeQuietly(storage, handle);
  }
}

interface Start {
  readonly offset: number;
  readonly studyId: string | null;
  readonly cipher: PayloadCipher | null;
}

/** Where frames begin, whose they are and how they are read, also where the header is damaged. */
async function findStart(
  window: FileWindow,
  filePath: string,
  password: string | undefined,
): Promise<Result<Start>> {
  const bytes = Buffer.from(window.bytes(0, MOST_HEADER_BYTES));
  const decoded = decodeHeader(bytes);
  if (decoded.ok) {
    const { length, studyId } = decoded.header;
    const cipher = await cipherOf(decoded.header, password, filePath);
    return cipher.ok ? success({ offset: length, studyId, cipher: cipher.value }) : cipher;
  }
  if (decoded.why === 'empty' || decoded.why === 'newer version') {
    return failure(decoded.why, filePath);
  }
  const first = window.findHead(0);
  if (first === null) return failure('not a study', filePath);
  let cipher: PayloadCipher | null = null;
  if (isEncrypted(window)) {
    const found = await cipherFromDamagedHeader(bytes, password, filePath);
    if (!found.ok) return found;
    cipher = found.value;
  }

  // A header of ours holds nothing but the id, and the keys of a locked study, between its fixed part
  // and its check. The chain's first hash tells whether these bytes are the id.
  const idEnd = first.offset - CHECK_BYTES - (cipher === null ? 0 : 2 * KEY_HALF_BYTES);
  if (idEnd > FIXED_HEADER_BYTES && idEnd <= FIXED_HEADER_BYTES + 255) {
    const studyId = bytes.toString('utf8', FIXED_HEADER_BYTES, idEnd);
    const { kind, sequence, commitment, link } = first.head;
    const expected = nextLink(chainStart(studyId), lastingHead(kind, sequence), commitment);
    if (sequence === 1 && sameBytes(expected, link)) {
      return success({ offset: first.offset, studyId, cipher });
    }
  }
  return success({ offset: first.offset, studyId: null, cipher });
}

/** By the first record that has content. */
function isEncrypted(window: FileWindow): boolean {
  let next = window.findHead(0);
  while (next?.head.removed === true) next = window.findHead(next.offset + HEAD_BYTES);
  return next?.head.encrypted ?? false;
}

/** From either copy of the key, wherever in the header it stands. */
async function cipherFromDamagedHeader(
  bytes: Buffer,
  password: string | undefined,
  filePath: string,
): Promise<Result<PayloadCipher | null>> {
  let why = failure('damaged', filePath, { offset: 0, sequence: 0, reason: 'header' });
  let at = bytes.indexOf(KEY_BEGINNING);
  for (let copy = 0; copy < 2 && at >= 0; copy++) {
    const keyRegion = bytes.subarray(at, at + KEY_HALF_BYTES);
    const found = await cipherOf({ locked: true, keyRegion }, password, filePath);
    if (found.ok) return found;
    why = found;
    at = bytes.indexOf(KEY_BEGINNING, at + 1);
  }
  return why;
}

function contentOf(head: FrameHead, payload: Uint8Array, cipher: PayloadCipher | null) {
  return cipher === null ? { salt: head.salt, body: payload } : cipher.unlock(head, payload);
}

/** All pieces up to the last edit, seal or note, in sequence; null for a file that is made up. */
function gather(
  window: FileWindow,
  start: number,
  chainAtStart: Uint8Array,
  cipher: PayloadCipher | null,
) {
  const pieces: Piece[] = [];
  let offset = start;
  let rebuilt = 0;
  let link: Uint8Array | null = chainAtStart;
  let whole = { pieces: 0, end: start, lastLink: null as Uint8Array | null };

  const take = (piece: Piece, end: number, stored: Uint8Array): void => {
    pieces.push(piece);
    link = stored;
    offset = end;
    if (endsAnAct(piece.kind)) whole = { pieces: pieces.length, end, lastLink: stored };
  };

  while (offset < window.size) {
    const sequence = pieces.length + 1;
    const next = frameAt(window, offset) ?? window.findHead(offset + 1);
    if (next === null) {
      // A whole head here means a frame cut short: what an interrupted write leaves.
      if (window.head(offset) !== null) break;
      const last = rebuild(window, offset, window.size, sequence, link, null, cipher);
      if (last !== null) {
        rebuilt += 1;
        take(last.piece, last.end, last.link);
      }
      break;
    }
    const { head } = next;
    if (next.offset > offset && head.sequence === sequence + 1) {
      const lost = rebuild(window, offset, next.offset, sequence, link, head, cipher);
      if (lost !== null) {
        rebuilt += 1;
        take(lost.piece, lost.end, lost.link);
        continue;
      }
    }
    const readable = head.removed || head.encrypted === (cipher !== null);
    if (head.sequence < sequence || !readable) {
      // A second copy of what we have, or nothing that we can read.
      offset = next.offset + HEAD_BYTES + head.length;
      continue;
    }
    if (head.sequence - sequence > MOST_MISSING) return null;
    for (let lost = sequence; lost < head.sequence; lost++) {
      pieces.push({ sequence: lost, kind: 'note', offset, head: null, payload: null });
    }
    const payloadStart = next.offset + HEAD_BYTES;
    const { kind, length } = head;
    const intact = holdsContent(window, payloadStart, head, cipher);
    const end = payloadStart + length;
    const payload = intact && !head.removed ? { offset: payloadStart, length } : null;
    const piece = { sequence: head.sequence, kind, offset: next.offset, head, payload };
    // Bytes put in or taken out inside this payload shift the frames after it.
    const shifted = !intact && !head.removed && !followsAt(window, end, head.sequence + 1);
    const resume = shifted ? (window.findHead(payloadStart)?.offset ?? end) : end;
    take(piece, resume, head.link);
  }
  pieces.length = whole.pieces;
  return { pieces, rebuilt, end: whole.end, lastLink: whole.lastLink };
}

function frameAt(window: FileWindow, offset: number) {
  const head = window.head(offset);
  if (head === null || offset + HEAD_BYTES + head.length > window.size) return null;
  return { offset, head };
}

function followsAt(window: FileWindow, offset: number, sequence: number): boolean {
  return offset === window.size || window.head(offset)?.sequence === sequence;
}

/**
 * A record whose head is damaged between `offset` and `end`, when its salt and payload are whole:
 * rebuilt for each kind that it may have had, and proved by the hash that the next record carries, or
 * by its own where it is the last.
 */
function rebuild(
  window: FileWindow,
  offset: number,
  end: number,
  sequence: number,
  previous: Uint8Array | null,
  next: FrameHead | null,
  cipher: PayloadCipher | null,
): { readonly piece: Piece; readonly end: number; readonly link: Uint8Array } | null {
  const payloadStart = offset + HEAD_BYTES;
  const length = end - payloadStart;
  if (previous === null || length < 0) return null;
  const old = Buffer.from(window.bytes(offset, HEAD_BYTES));
  const headSalt = Uint8Array.from(old.subarray(24, 40));
  const storedCommitment = Uint8Array.from(old.subarray(40, 72));
  const storedLink = old.subarray(72, 104);
  const commitment =
    cipher === null
      ? window.commitment(headSalt, payloadStart, length)
      : peekedCommitment(window.copy(payloadStart, length), cipher);
  // With a damaged salt the content can't be proved; the commitment still can.
  for (const candidate of [commitment, storedCommitment]) {
    if (candidate === null) continue;
    for (const kind of ['edit', 'blob', 'note', 'seal'] as const) {
      const link = nextLink(previous, lastingHead(kind, sequence), candidate);
      const proved =
        next === null
          ? sameBytes(link, storedLink)
          : sameBytes(
              nextLink(link, lastingHead(next.kind, next.sequence), next.commitment),
              next.link,
            );
      if (!proved) continue;
      const kept = candidate === commitment;
      const noSalt = headSalt.every((byte) => byte === 0);
      const removed = !kept && length === 0 && noSalt;
      const head: FrameHead = {
        kind,
        sequence,
        encrypted: cipher !== null && !removed,
        removed,
        length,
        salt: cipher === null ? headSalt : new Uint8Array(SALT_BYTES),
        commitment: candidate,
        link,
      };
      const payload = kept ? { offset: payloadStart, length } : null;
      return { piece: { sequence, kind, offset, head, payload }, end, link };
    }
  }
  return null;
}

function peekedCommitment(payload: Uint8Array, cipher: PayloadCipher): Uint8Array | null {
  const peeked = cipher.peek(payload);
  return peeked === null ? null : commitmentOf(peeked.salt, peeked.body);
}
