import { chainStart, nextLink, sameBytes } from './chain.ts';
import type { PayloadCipher } from './cipher.ts';
import type { DamageReason } from './failure.ts';
import { holdsContent, type FileWindow } from './file-window.ts';
import { endsAnAct, HEAD_BYTES, lastingHead, type FrameHead, type Kind } from './frame.ts';
import type { Header } from './header.ts';

/** Where a record stands in the file. */
export interface StudyRecord {
  readonly sequence: number;
  readonly kind: Kind;
  /** Of the frame's head, in bytes from the start of the file. */
  readonly offset: number;
  /** Bytes of payload. */
  readonly length: number;
  /** Its content was destroyed on purpose; only the fact of it is left. */
  readonly removed: boolean;
}

export interface Damage {
  readonly offset: number;
  readonly sequence: number;
  readonly reason: DamageReason;
}

export interface Scan {
  /** Up to the last edit, seal or note. */
  readonly records: StudyRecord[];
  /** Where the last of them ends. */
  readonly end: number;
  /** The chain's hash at that place. */
  readonly head: Uint8Array;
  /** Null where the rest of the file, if any, is what an interrupted write leaves. */
  readonly damage: Damage | null;
}

const BYTES_BETWEEN_PAUSES = 32 * 1024 * 1024;

/**
 * Walks all frames and checks each: head, place, content, chain. What an interrupted write can leave
 * behind (a frame cut short, blobs whose edit never came, an end that the drive never filled) is no
 * damage; anything else is, the last frame included, because a saved edit must not vanish unseen.
 * Throws what the storage throws.
 */
export async function scan(
  window: FileWindow,
  header: Header,
  cipher: PayloadCipher | null,
  onProgress?: (fraction: number) => void,
): Promise<Scan> {
  const records: StudyRecord[] = [];
  let link = chainStart(header.studyId);
  let offset = header.length;
  let whole = { records: 0, end: offset, head: link };
  let damage: Damage | null = null;
  let nextPause = BYTES_BETWEEN_PAUSES;

  while (offset < window.size) {
    const sequence = records.length + 1;
    const frame = window.head(offset);
    const reason = frame === null ? null : faultOf(frame, sequence, link, window, offset, cipher);
    if (frame === null || reason !== null) {
      const why = reason ?? 'head';
      if (!isInterruptedWrite(window, offset, frame, why)) {
        damage = { offset, sequence, reason: why === 'cut' ? 'content' : why };
      }
      break;
    }
    const { kind, length, removed } = frame;
    records.push({ sequence, kind, offset, length, removed });
    link = frame.link;
    offset += HEAD_BYTES + length;
    if (endsAnAct(kind)) whole = { records: records.length, end: offset, head: link };
    if (offset >= nextPause) {
      nextPause = offset + BYTES_BETWEEN_PAUSES;
      onProgress?.(offset / window.size);
      await new Promise((resolve) => setImmediate(resolve));
    }
  }
  records.length = whole.records;
  return { records, end: whole.end, head: whole.head, damage };
}

type FrameFault = DamageReason | 'cut';

function faultOf(
  frame: FrameHead,
  sequence: number,
  previous: Uint8Array,
  window: FileWindow,
  offset: number,
  cipher: PayloadCipher | null,
): FrameFault | null {
  if (frame.sequence !== sequence) return 'order';
  const lasting = lastingHead(frame.kind, frame.sequence);
  if (!sameBytes(frame.link, nextLink(previous, lasting, frame.commitment))) return 'chain';
  if (offset + HEAD_BYTES + frame.length > window.size) return 'cut';
  if (frame.removed) return null;
  // A plain record in a locked study was put there by somebody without the key, and the other way
  // round it could not be read.
  if (frame.encrypted !== (cipher !== null)) return 'content';
  return holdsContent(window, offset + HEAD_BYTES, frame, cipher) ? null : 'content';
}

function isInterruptedWrite(
  window: FileWindow,
  offset: number,
  frame: FrameHead | null,
  fault: FrameFault,
): boolean {
  if (fault === 'order' || fault === 'chain') return false;
  // A whole head says how long its frame was to be: the rest of the file is inside that frame.
  if (fault === 'cut') return true;
  if (window.size - offset < HEAD_BYTES) return true;
  if (!window.endsUnwritten()) return false;
  const after = frame === null ? offset + 1 : offset + HEAD_BYTES + frame.length;
  return window.findHead(after) === null;
}
