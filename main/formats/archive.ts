import { inflateRawSync } from 'node:zlib';

/** A ZIP archive whose parts are unpacked one by one, never beyond a limit. */
export interface Archive {
  readonly names: readonly string[];
  /** A part; null where there is none of that name or it is damaged; 'too large' above the limit. */
  readonly read: (name: string, mostBytes: number) => Uint8Array | 'too large' | null;
}

interface Part {
  readonly method: number;
  readonly packed: number;
  readonly header: number;
  readonly encrypted: boolean;
}

const endMark = 0x06054b50;
const listMark = 0x02014b50;
const partMark = 0x04034b50;
const endLength = 22;
const longestComment = 0xffff;
const mostParts = 20_000;

/**
 * The archive in `bytes`, by the list at its end (PKWARE APPNOTE 6.3.10, without ZIP64); null where
 * that list is torn. What the list says of unpacked sizes is not believed: unpacking counts.
 */
export function openArchive(bytes: Uint8Array): Archive | null {
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  const end = findEnd(view);
  if (end === null) return null;
  const count = view.getUint16(end + 10, true);
  if (count > mostParts) return null;
  const parts = new Map<string, Part>();
  let at = view.getUint32(end + 16, true);
  for (let index = 0; index < count; index++) {
    if (at + 46 > end || view.getUint32(at, true) !== listMark) return null;
    const nameLength = view.getUint16(at + 28, true);
    const nameEnd = at + 46 + nameLength;
    if (nameEnd > end) return null;
    const name = utf8.decode(bytes.subarray(at + 46, nameEnd));
    if (!parts.has(name)) {
      parts.set(name, {
        method: view.getUint16(at + 10, true),
        packed: view.getUint32(at + 20, true),
        header: view.getUint32(at + 42, true),
        encrypted: (view.getUint16(at + 8, true) & 1) === 1,
      });
    }
    at = nameEnd + view.getUint16(at + 30, true) + view.getUint16(at + 32, true);
  }
  return {
    names: [...parts.keys()],
    read: (name, mostBytes) => {
      const part = parts.get(name);
      return part === undefined ? null : unpack(bytes, view, part, mostBytes);
    },
  };
}

const utf8 = new TextDecoder();

function findEnd(view: DataView): number | null {
  const last = view.byteLength - endLength;
  for (let at = last; at >= 0 && at >= last - longestComment; at--) {
    if (view.getUint32(at, true) === endMark) return at;
  }
  return null;
}

function unpack(
  bytes: Uint8Array,
  view: DataView,
  { method, packed, header, encrypted }: Part,
  mostBytes: number,
): Uint8Array | 'too large' | null {
  if (encrypted || header + 30 > bytes.length || view.getUint32(header, true) !== partMark) {
    return null;
  }
  const start = header + 30 + view.getUint16(header + 26, true) + view.getUint16(header + 28, true);
  if (start + packed > bytes.length) return null;
  const content = bytes.subarray(start, start + packed);
  if (method === 0) return packed > mostBytes ? 'too large' : content;
  if (method !== 8) return null;
  try {
    // Stops at the limit whatever size the archive claims.
    return inflateRawSync(content, { maxOutputLength: Math.max(1, mostBytes) });
  } catch (error) {
    return (error as NodeJS.ErrnoException).code === 'ERR_BUFFER_TOO_LARGE' ? 'too large' : null;
  }
}

/** The parts that `wanted` names, within one limit for all of them together. */
export function readParts(
  archive: Archive,
  wanted: (name: string) => boolean,
  mostBytes: number,
): Record<string, Uint8Array> | 'too large' | 'broken' {
  const parts: Record<string, Uint8Array> = Object.create(null) as Record<string, Uint8Array>;
  let left = mostBytes;
  for (const name of archive.names.filter(wanted)) {
    const part = archive.read(name, left);
    if (part === 'too large') return part;
    if (part === null) return 'broken';
    left -= part.length;
    parts[name] = part;
  }
  return parts;
}
