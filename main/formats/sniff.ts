import { strFromU8, unzipSync } from 'fflate';
import { listArchive } from './docx.ts';

/** What a file is, going by its first bytes and, for an archive, by what is in it. */
export type Sniffed =
  | { readonly kind: 'docx' | 'broken docx' | 'locked' | 'writing' }
  | { readonly kind: 'other'; readonly format: string };

const beginnings: readonly (readonly [format: string, at: number, bytes: string])[] = [
  ['pdf', 0, '%PDF'],
  ['rtf', 0, '{\\rtf'],
  ['image', 0, '\x89PNG'],
  ['image', 0, '\xff\xd8\xff'],
  ['image', 0, 'GIF8'],
  ['image', 0, 'II*\0'],
  ['image', 0, 'MM\0*'],
  ['image', 8, 'WEBP'],
  ['recording', 0, 'ID3'],
  ['recording', 0, '\xff\xfb'],
  ['recording', 0, '\xff\xf1'],
  ['recording', 0, 'OggS'],
  ['recording', 0, 'fLaC'],
  ['recording', 8, 'WAVE'],
  ['recording', 8, 'AVI '],
  ['recording', 4, 'ftyp'],
  ['recording', 0, '\x1a\x45\xdf\xa3'],
  ['archive', 0, 'Rar!'],
  ['archive', 0, '7z\xbc\xaf'],
  ['archive', 0, '\x1f\x8b'],
  ['program', 0, '\x7fELF'],
  ['program', 0, 'MZ\x90'],
];

const compound = '\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1';

export function sniff(bytes: Uint8Array): Sniffed {
  const first = latin1(bytes.subarray(0, 16));
  if (first.startsWith('PK\x03\x04') || first.startsWith('PK\x05\x06')) return sniffArchive(bytes);
  // The container of old Office files, and of new ones with a password.
  if (first.startsWith(compound)) {
    const names = latin1(bytes.subarray(0, 1 << 20)).replaceAll('\0', '');
    if (names.includes('EncryptedPackage')) return { kind: 'locked' };
    return { kind: 'other', format: names.includes('WordDocument') ? 'doc' : 'old office file' };
  }
  for (const [format, at, mark] of beginnings) {
    if (first.startsWith(mark, at)) return { kind: 'other', format };
  }
  return { kind: 'writing' };
}

function sniffArchive(bytes: Uint8Array): Sniffed {
  const files = listArchive(bytes);
  // A torn archive has lost its list at the end; the names also stand before each file.
  if (files === null) {
    const torn = latin1(bytes.subarray(0, 1 << 20));
    if (torn.includes('[Content_Types].xml') || torn.includes('word/')) {
      return { kind: 'broken docx' };
    }
    return { kind: 'other', format: 'archive' };
  }
  const has = (name: string): boolean => files.some((file) => file.name === name);
  if (has('word/document.xml')) return { kind: 'docx' };
  if (has('xl/workbook.xml')) return { kind: 'other', format: 'xlsx' };
  if (has('ppt/presentation.xml')) return { kind: 'other', format: 'pptx' };
  if (has('[Content_Types].xml')) return { kind: 'broken docx' };
  const type = files.find((file) => file.name === 'mimetype' && file.size < 200);
  if (type !== undefined) {
    const mime = readSmall(bytes, 'mimetype');
    if (mime.includes('opendocument.text')) return { kind: 'other', format: 'odt' };
    if (mime.includes('opendocument.spreadsheet')) return { kind: 'other', format: 'ods' };
    if (mime.includes('epub')) return { kind: 'other', format: 'epub' };
  }
  return { kind: 'other', format: 'archive' };
}

function readSmall(bytes: Uint8Array, wanted: string): string {
  try {
    return strFromU8(unzipSync(bytes, { filter: ({ name }) => name === wanted })[wanted]!);
  } catch {
    return '';
  }
}

function latin1(bytes: Uint8Array): string {
  return Buffer.from(bytes.buffer, bytes.byteOffset, bytes.byteLength).toString('latin1');
}
